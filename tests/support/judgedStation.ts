/** A station with limits that a test judges by a clock it holds: estimates are written, not computed. */
import { afterEach, beforeAll, beforeEach } from 'vitest'
import type { Express } from 'express'
import { createApp } from '../../server/app.ts'
import { startJudgeLimits } from '../../server/jobs/judgeLimits.ts'
import type { JudgeLimits } from '../../server/jobs/judgeLimits.ts'
import type { Person} from '../../server/models/index.ts';
import { Alert, AlertEvent, Estimate, Limit, LimitState, Message, Station } from '../../server/models/index.ts'
import type { Condition, LimitContent, LimitDraft } from '../../shared/schemas/limit.ts'
import { makeList } from './alerts.ts'
import { signedIn } from './browser.ts'
import type { Browser } from './browser.ts'
import { makePerson, makeStation } from './factories.ts'
import { testParts } from './parts.ts'
import type { TestParts } from './parts.ts'

const noon = new Date('2026-12-01T12:00:00Z')

/** Minutes after noon. */
export const at = (minutes: number): Date => new Date(noon.getTime() + minutes * 60_000)

export const plainCondition: Condition = {
  comparisons: [{ kind: 'above', quantity: 'significantWaveHeight', raise: 2.5, clear: 2.1, riseOverSeconds: null }],
  when: null,
  onDelaySeconds: 600,
  offDelaySeconds: 1800,
  clearSigmas: 1,
  worstQuality: 3,
  latches: false,
}

export type EstimateWanted = Partial<{
  height: number | null
  sd: number
  flag: number
  reason: string
  origin: 'live' | 'late'
  swell: number
  toward: number
  revision: number
}>

export interface JudgedStation {
  parts: TestParts
  app: Express
  station: Station
  /** Two officers on watch and an administrator. */
  desk: Browser
  otherDesk: Browser
  admin: Browser
  partner: Browser
  officer: Person
  otherOfficer: Person
  listId: number
  job: JudgeLimits
  /** A restart: another job on the same tables. */
  restart(): Promise<void>
  contentOf(changes?: Partial<LimitContent>): LimitContent
  draftOf(changes?: Partial<LimitContent>): LimitDraft
  /** Answers the limit's id. */
  setLimit(changes?: Partial<LimitContent>): Promise<number>
  /** The window that ends so many minutes after noon. */
  estimate(minutes: number, wanted?: EstimateWanted): Promise<void>
  /** One window a minute, each judged at its end plus 10 s. */
  sea(from: number, to: number, wanted?: EstimateWanted): Promise<void>
  judge(): Promise<void>
  state(limitId: number): Promise<LimitState>
  alerts(limitId: number): Promise<Alert[]>
  events(alertId: number): Promise<string[]>
  messages(alertId: number): Promise<string[]>
}

/** To be called at the top of a file; station, limits and job are renewed before each test. */
export function judgedStation(): JudgedStation {
  const held = {} as JudgedStation
  const startJob = () => startJudgeLimits(held.parts, { isUnscheduled: true })

  Object.assign(held, {
    async restart() {
      await held.job.stop()
      held.job = startJob()
    },
    contentOf: (changes = {}) => ({
      title: null,
      condition: plainCondition,
      priority: 'high',
      recipients: { steps: [{ afterSeconds: 0, listIds: [held.listId] }], remindEverySeconds: 480 },
      schedule: null,
      note: 'Port order 4',
      toCheck: 'The moorings.',
      reviewOn: null,
      isPublished: false,
      ...changes,
    }),
    draftOf: (changes) => ({
      subjectKind: 'station',
      subjectId: held.station.id,
      content: held.contentOf(changes),
      reason: 'Agreed with the pilots',
      consent: null,
      aloneReason: null,
    }),
    async setLimit(changes) {
      const answer = await held.desk.post('/api/limits').send(held.draftOf(changes))
      if (answer.status !== 201) throw new Error(JSON.stringify(answer.body))
      return answer.body.id
    },
    async estimate(minutes, wanted = {}) {
      const { height = 1, sd = 0.05, flag = 1, reason = null, origin = 'live', revision = 1 } = wanted
      const { swell = null, toward = 60 } = wanted
      const resolved = reason === null
      await Estimate.create({
        ...{
          stationId: held.station.id,
          windowEndsAt: at(minutes),
          runId: 0,
          revision,
          windowStartsAt: at(minutes - 20),
        },
        ...{ surgeStartsAt: null, computedAt: held.parts.clock.now(), origin, deploymentId: 1, settingsId: 1 },
        ...{ softwareVersion: 'test', inputCommitId: null, resultDigest: 'test', completeness: 1, resolved, reason },
        ...{ qualityFlag: flag, waterDepth: 12, sensorsUsed: 5, sensorsDeployed: 5 },
        ...{ significantWaveHeight: height, significantWaveHeightSd: height === null ? null : sd },
        ...{ peakPeriod: 10, meanPeriod: 8, energyPeriod: 9, energyFlux: 20_000, surgeHeight: 0.05 },
        ...{
          height: resolved ? height : null,
          period: 10,
          towardDegrees: resolved ? toward : null,
          towardDegreesSd: 3,
        },
        ...{ measuredSpeed: 9, speed: 9, speedSd: 0.3, linearSpeed: 9, directionalSpread: 20 },
        ...{ slownessEast: null, slownessNorth: null, covarianceEastEast: null, covarianceEastNorth: null },
        ...{
          covarianceNorthNorth: null,
          swellHeight: swell,
          swellPeriod: swell && 12,
          swellTowardDegrees: swell && toward,
        },
        ...{
          swellTowardDegreesSd: null,
          swellSpeed: null,
          swellSpeedSd: null,
          windSeaHeight: null,
          windSeaPeriod: null,
        },
        ...{ windSeaTowardDegrees: null, windSeaTowardDegreesSd: null, windSeaSpeed: null, windSeaSpeedSd: null },
      })
    },
    async sea(from, to, wanted = {}) {
      for (let minutes = from; minutes <= to; minutes += 1) {
        held.parts.clock.set(new Date(at(minutes).getTime() + 10_000))
        await held.estimate(minutes, wanted)
        await held.judge()
      }
    },
    judge: () => held.job.wake(),
    async state(limitId) {
      const row = await LimitState.findByPk(limitId)
      if (!row) throw new Error('no state')
      return row
    },
    alerts: (limitId) => Alert.findAll({ where: { limitId }, order: [['id', 'ASC']] }),
    events: async (alertId) =>
      (await AlertEvent.findAll({ where: { alertId }, order: [['id', 'ASC']] })).map(({ kind }) => kind),
    messages: async (alertId) =>
      (await Message.findAll({ where: { alertId }, order: [['id', 'ASC']] })).map(({ kind }) => kind),
  } satisfies Partial<JudgedStation>)

  beforeAll(async () => {
    held.parts = await testParts()
    held.app = createApp(held.parts)
    const { clock } = held.parts
    held.officer = await makePerson(clock, { name: 'Duty officer A' })
    held.otherOfficer = await makePerson(clock, { name: 'Duty officer B' })
    held.desk = await signedIn(held.app, held.officer.email)
    held.otherDesk = await signedIn(held.app, held.otherOfficer.email)
    held.admin = await signedIn(held.app, (await makePerson(clock, { role: 'admin' })).email)
    held.partner = await signedIn(held.app, (await makePerson(clock, { role: 'partner', team: 'harbour' })).email)
    held.listId = await makeList(held.parts, 'Harbour duty', [held.officer.id])
  })
  beforeEach(async () => {
    const retiredAt = noon
    await Station.update({ retiredAt }, { where: {} })
    await Limit.update({ retiredAt }, { where: {} })
    await Alert.update({ closedAt: noon }, { where: { closedAt: null } })
    held.parts.clock.set(noon)
    held.station = (await makeStation(held.parts.clock)).station
    held.job = startJob()
  })
  afterEach(() => held.job.stop())
  return held
}
