/** From the estimate that crosses a limit to the mail server's having its e-mail, with the jobs as they run. */
import { setTimeout as pause } from 'node:timers/promises'
import { systemClock } from '../../server/config/clock.ts'
import type { Parts } from '../../server/config/parts.ts'
import { startDeliverMail } from '../../server/jobs/deliverMail.ts'
import { startJudgeLimits } from '../../server/jobs/judgeLimits.ts'
import { createTransport } from '../../server/mail/transport.ts'
import { Estimate } from '../../server/models/index.ts'
import { officeOf } from '../../server/presenters/office.ts'
import { noConsent } from '../../server/services/alerts.ts'
import { createLimit } from '../../server/services/limits.ts'
import type { LimitContent } from '../../shared/schemas/limit.ts'
import { makeList } from '../support/alerts.ts'
import { makePerson, makeStation } from '../support/factories.ts'
import { startTestMailServer } from '../support/mailCatcher.ts'
import { startMariadb } from '../support/mariadb.ts'
import { benchParts, createBenchSchema } from './benchParts.ts'
import type { Figure } from './benchParts.ts'

const crossings = 100
const betweenMs = 200
const firstRaise = 1
const stepMetres = 0.1
const patienceMs = 30_000

const contentOf = (raise: number, listId: number): LimitContent => ({
  title: null,
  condition: {
    comparisons: [{ kind: 'above', quantity: 'significantWaveHeight', raise, clear: raise, riseOverSeconds: null }],
    when: null,
    onDelaySeconds: 0,
    offDelaySeconds: 0,
    clearSigmas: 0,
    worstQuality: 3,
    latches: false,
  },
  priority: 'high',
  recipients: { steps: [{ afterSeconds: 0, listIds: [listId] }], remindEverySeconds: null },
  schedule: null,
  note: '',
  toCheck: '',
  reviewOn: null,
  isPublished: false,
})

/** Each limit a step higher than the one before, and a person of its own: each estimate crosses one. */
async function setLimits(parts: Parts, stationId: number): Promise<string[]> {
  const office = await officeOf(parts)
  const author = await makePerson(systemClock)
  const addresses: string[] = []
  for (let n = 0; n < crossings; n += 1) {
    const { id, email } = await makePerson(systemClock, { role: null })
    const content = contentOf(firstRaise + n * stepMetres, await makeList(parts, `List ${n}`, [id]))
    const order = { subjectKind: 'station' as const, subjectId: stationId, content, reason: 'Measured' }
    await createLimit(parts, office, { ...order, consent: noConsent }, author.id)
    addresses.push(email ?? '')
  }
  return addresses
}

async function saveEstimate(parts: Parts, stationId: number, windowEndsAt: Date, height: number): Promise<void> {
  const span = { windowEndsAt, windowStartsAt: new Date(windowEndsAt.getTime() - 1_200_000), computedAt: new Date() }
  await Estimate.create({
    ...{ ...span, stationId, runId: 0, revision: 1, origin: 'live', deploymentId: 1, settingsId: 1 },
    ...{ softwareVersion: 'bench', resultDigest: 'bench', completeness: 1, resolved: true, qualityFlag: 1 },
    ...{ waterDepth: 12, sensorsUsed: 5, sensorsDeployed: 5, significantWaveHeight: height },
    ...{ significantWaveHeightSd: 0.05, height, period: 10, towardDegrees: 60, towardDegreesSd: 3, speed: 9 },
  })
  parts.bus.publish('estimate.saved', { stationId, windowEndsAt: windowEndsAt.getTime(), revision: 1 })
}

const share = (sorted: number[], part: number): number => sorted[Math.floor(sorted.length * part)] ?? NaN

export async function benchAlertMail(): Promise<Figure[]> {
  const database = await startMariadb({ durable: true })
  const parts = await benchParts(await createBenchSchema(database))
  const server = await startTestMailServer()
  const transport = createTransport({ url: server.url, from: 'watch@harbour.example', clientName: 'localhost' })
  const mail = await startDeliverMail(parts, { transport, mostAMinute: 10_000 })
  const judge = startJudgeLimits(parts)
  try {
    const { station } = await makeStation(systemClock)
    const addresses = await setLimits(parts, station.id)
    const waits: number[] = []
    for (const [n, address] of addresses.entries()) {
      const savedAt = performance.now()
      await saveEstimate(parts, station.id, new Date(), firstRaise + (n + 0.5) * stepMetres)
      while (server.subjectsTo(address).length === 0 && performance.now() - savedAt < patienceMs) await pause(2)
      waits.push(performance.now() - savedAt)
      await pause(betweenMs)
    }
    waits.sort((a, b) => a - b)
    return [
      { what: 'estimate over a limit to e-mail handed over, median', value: share(waits, 0.5), unit: 'ms' },
      { what: 'estimate over a limit to e-mail handed over, 95 %', value: share(waits, 0.95), unit: 'ms' },
    ]
  } finally {
    await judge.stop()
    await mail.stop()
    await server.stop()
    await parts.sequelize.close()
    await database.stop()
  }
}
