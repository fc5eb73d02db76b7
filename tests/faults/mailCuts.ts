/** The mail server is away and then refuses, and the database is killed meanwhile: the e-mails wait and go out once. */
import { z } from 'zod'
import type { FaultReport } from '../../server/setup/testReports.ts'
import { startTestMailServer } from '../support/mailCatcher.ts'
import { startProgram, untilReady } from '../support/program.ts'
import { until } from '../support/until.ts'
import { allMessages, isUnderWay, onWatch, waveLimits } from './mailKills.ts'

type Check = FaultReport['checks'][number]

const patienceMs = 240_000
const alert = z.object({ id: z.number() })
const check = (name: string, passed: boolean, detail: string): Check => ({ name, passed, detail })

export async function mailServerAwayThenRefusing(say: (line: string) => void): Promise<Check[]> {
  let server = await startTestMailServer()
  const { port, url } = server
  const program = await startProgram({ variables: { SMTP_URL: url } })
  try {
    const ask = await onWatch(program)
    const [limit] = await waveLimits(ask)
    await server.stop()
    const drill = { limitId: limit?.id, value: 3, note: 'Drill without a mail server' }
    const { id } = await ask('POST', '/drills', alert, drill)
    const ofDrill = async () =>
      (await allMessages(ask)).filter(({ alertId, kind }) => alertId === id && kind === 'alert')
    const tried = async () => {
      const deliveries = (await ofDrill()).flatMap((message) => message.deliveries)
      return deliveries.length > 0 && deliveries.every(({ state, attempts }) => state !== 'leased' && attempts > 0)
    }
    await until('the first try was made', tried, patienceMs)
    const [waiting] = await ofDrill()
    say('the mail server is away, a first try was made; kill -9 of the database')
    await program.databaseServer.kill()
    await program.databaseServer.start()
    await untilReady(program.url)
    server = await startTestMailServer(port)
    for (const { address } of waiting?.deliveries ?? []) server.answers.set(address, [[451, 'Greylisted, come again']])
    say('the mail server is back, and refuses each person once for now')
    const isOver = async () => (await ofDrill()).every((message) => !isUnderWay(message))
    await until('every e-mail has come to its end', isOver, patienceMs)
    const deliveries = (await ofDrill()).flatMap((message) => message.deliveries)
    const states = deliveries.map(({ state, attempts }) => `${state} after ${attempts}`).join(', ')
    const copies = server.caught.filter(({ mail }) => mail.subject?.includes('EXERCISE')).length
    const isTold = waiting?.deliveries.every(({ state }) => state === 'queued') === true
    return [
      check(
        'without a mail server its e-mails are said to be not out',
        isTold,
        waiting?.deliveries.map(({ state }) => state).join() ?? 'none',
      ),
      check(
        'every e-mail went out in the end',
        deliveries.every(({ state }) => state === 'accepted'),
        states,
      ),
      check(
        'each was refused once and tried again',
        deliveries.every(({ attempts }) => attempts >= 3),
        states,
      ),
      check('each came once', copies === deliveries.length && copies > 0, `${copies} for ${deliveries.length}`),
    ]
  } finally {
    await program.stop()
    await server.stop()
  }
}
