/** The server is killed between the commit of an alert and its e-mails: nobody may be left out, nobody told twice without need. */
import { z } from 'zod'
import type { FaultReport } from '../../server/setup/testReports.ts'
import { limitView } from '../../shared/schemas/limit.ts'
import type { LimitView } from '../../shared/schemas/limit.ts'
import { messageList } from '../../shared/schemas/message.ts'
import type { MessageView } from '../../shared/schemas/message.ts'
import { startTestMailServer } from '../support/mailCatcher.ts'
import { startProgram, untilReady } from '../support/program.ts'
import type { Program } from '../support/program.ts'
import { until } from '../support/until.ts'
import { chance } from './chance.ts'

const rounds = 6
const slowness = 120
const longestPauseMs = 1_500
const patienceMs = 90_000

const limits = z.array(limitView)
const alert = z.object({ id: z.number() })

export type Ask = <T>(method: string, path: string, shape: z.ZodType<T>, body?: unknown) => Promise<T>

/** As the officer on watch; the session outlives the kills. */
export async function onWatch({ url, people }: Program): Promise<Ask> {
  const headers = { 'X-Offing': '1', 'Content-Type': 'application/json' }
  const { email, password } = people.find(({ role }) => role === 'operator') ?? { email: '', password: '' }
  const signedIn = await fetch(`${url}/api/session`, {
    method: 'POST',
    headers,
    body: JSON.stringify({ email, password }),
  })
  const cookie = signedIn.headers.get('set-cookie')?.split(';')[0] ?? ''
  return async (method, path, shape, body) => {
    const sent = body === undefined ? {} : { body: JSON.stringify(body) }
    const answer = await fetch(`${url}/api${path}`, { method, headers: { ...headers, Cookie: cookie }, ...sent })
    if (!answer.ok) throw new Error(`${method} ${path}: ${answer.status} ${await answer.text()}`)
    return shape.parse(await answer.json())
  }
}

export async function allMessages(ask: Ask): Promise<MessageView[]> {
  const found: MessageView[] = []
  for (let before: number | null = Infinity; before !== null;) {
    const query: string = before === Infinity ? '' : `?before=${before}`
    const page = await ask('GET', `/messages${query}`, messageList)
    found.push(...page.messages)
    before = page.next
  }
  return found
}

/** Those of which somebody is told. */
export const waveLimits = async (ask: Ask): Promise<LimitView[]> =>
  (await ask('GET', '/limits', limits)).filter(
    ({ limitClass, current }) => limitClass === 'wave' && current.content.recipients.steps.length > 0,
  )

export const isUnderWay = ({ deliveries }: MessageView): boolean =>
  deliveries.length === 0 || deliveries.some(({ state, nextAttemptAt }) => state === 'leased' || nextAttemptAt !== null)

export async function killsBetweenAlertAndEmail(
  seed: number,
  say: (line: string) => void,
): Promise<FaultReport['checks']> {
  const roll = chance(seed)
  const server = await startTestMailServer()
  server.slowness = slowness
  const program = await startProgram({ variables: { SMTP_URL: server.url } })
  try {
    const ask = await onWatch(program)
    const told = await waveLimits(ask)
    const drills: number[] = []
    for (let round = 0; round < rounds; round += 1) {
      const open: number[] = []
      for (const { id } of told) {
        const order = { limitId: id, value: 3, note: `Drill of round ${round + 1}` }
        open.push((await ask('POST', '/drills', alert, order)).id)
      }
      drills.push(...open)
      await new Promise((resolve) => setTimeout(resolve, roll() * longestPauseMs))
      await program.server.kill()
      say(`kill -9 of the server, ${server.caught.length} e-mails taken, ${drills.length} alerts raised`)
      await program.server.start()
      await untilReady(program.url)
      for (const id of open) await ask('POST', `/drills/${id}/end`, alert, {})
    }
    let messages: MessageView[] = []
    const isQuiet = async () => !(messages = await allMessages(ask)).some(isUnderWay)
    await until('every e-mail has come to its end', isQuiet, patienceMs)
    return judge(
      drills,
      messages,
      server.caught.map(({ to, mail }) => `${to} ${mail.messageId}`),
    )
  } finally {
    await program.stop()
    await server.stop()
  }
}

function judge(drills: number[], messages: MessageView[], caught: string[]): FaultReport['checks'] {
  const written = new Set(messages.filter(({ kind }) => kind === 'alert').map(({ alertId }) => alertId))
  const unwritten = drills.filter((id) => !written.has(id))
  const deliveries = messages.flatMap((message) => message.deliveries)
  const notOut = deliveries.filter(({ state }) => state !== 'accepted')
  const copies = new Map<string, number>()
  for (const one of caught) copies.set(one, (copies.get(one) ?? 0) + 1)
  const twice = [...copies.values()].filter((count) => count === 2).length
  const more = [...copies.values()].filter((count) => count > 2).length
  const counts = `${drills.length} alerts, ${deliveries.length} e-mails, ${copies.size} taken, ${twice} of them twice`
  const check = (name: string, passed: boolean): FaultReport['checks'][number] => ({ name, passed, detail: counts })
  return [
    check('every alert that was answered has its e-mail', unwritten.length === 0),
    check('every e-mail reached the mail server', notOut.length === 0 && copies.size === deliveries.length),
    check('none came more than twice', more === 0),
    check(`a second copy came only of those under way at a kill (${counts})`, twice <= rounds * 3),
  ]
}
