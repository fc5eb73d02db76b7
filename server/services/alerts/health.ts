/** Judges data-health limits: of the clock's minutes, not of windows, for silence has none. */
import { judgeCondition } from '../../../shared/alerts/condition.ts'
import type { HealthFigures } from '../../../shared/alerts/figures.ts'
import { notAhead } from '../../../shared/alerts/follow.ts'
import type { Parts } from '../../config/parts.ts'
import { Station } from '../../models/index.ts'
import { select } from '../../models/sql.ts'
import { limitsInForce } from '../limits/rows.ts'
import type { LimitInForce } from '../limits/rows.ts'
import { atDesk, holdStates, keepStates } from './desk.ts'
import { act, noteJudgement, refreshAlerts } from './judge.ts'
import type { Office } from './office.ts'
import { shelvedAmong } from './shelves.ts'

/** What the job knows and the database does not. */
export interface OutsideHealth {
  /** Station's clock less the server's, s; null where it is not known. */
  clockOffsetOf(stationId: number): number | null
  /** Share of the disk that is free, 0 to 1; null where it cannot be told. */
  diskFree: number | null
  /**
   * The program has only just begun. While it was down nobody could compute, so an old figure tells nothing of the
   * station yet: its age raises nothing, and what stands is held. A fresh figure counts at once.
   */
  isSettling: boolean
}

interface NewestRow {
  windowEndsAt: Date
  sensorsUsed: number
  reason: string | null
}

const newest = (sequelize: Parts['sequelize'], stationId: number, which: string) =>
  select<NewestRow>(
    sequelize,
    `SELECT windowEndsAt, sensorsUsed, reason FROM estimates
     WHERE stationId = :stationId AND runId = 0 AND ${which} ORDER BY windowEndsAt DESC, revision DESC LIMIT 1`,
    { stationId },
  )

/** As `flagOf` has it: a refused direction leaves the height, a failed window gives none. */
const usable = `significantWaveHeight IS NOT NULL AND (qualityFlag IN (1, 2, 3)
  OR reason IN ('no-resolvable-wave', 'ambiguous', 'geometry-doubtful', 'collinear-array',
  'standing-sea', 'surf-zone'))`

const none: HealthFigures = {
  dataAge: null,
  usableSensors: null,
  clockOffset: null,
  arrayDisagreement: null,
  mailQueueAge: null,
  diskFree: null,
}

/** A window ends each minute, is due ten seconds later and computed within the next. */
const freshSeconds = 150

async function healthOfStation(
  parts: Parts,
  stationId: number,
  now: number,
  outside: OutsideHealth,
): Promise<HealthFigures> {
  const [[last], [good], station] = await Promise.all([
    newest(parts.sequelize, stationId, 'TRUE'),
    newest(parts.sequelize, stationId, usable),
    Station.findByPk(stationId, { attributes: ['createdAt'] }),
  ])
  const offset = outside.clockOffsetOf(stationId)
  const lastAge = last ? (now - last.windowEndsAt.getTime()) / 1000 : Infinity
  // What the newest window tells of the array is old after a while: then the age itself is the alert.
  const isFresh = lastAge < 900
  // A station that never gave a figure has been without one since it was entered.
  const since = good?.windowEndsAt ?? station?.createdAt ?? null
  const age = since && Math.max(0, (now - since.getTime()) / 1000)
  return {
    ...none,
    dataAge: outside.isSettling && age !== null && age > freshSeconds ? null : age,
    usableSensors: last && isFresh ? last.sensorsUsed : null,
    clockOffset: offset === null ? null : Math.abs(offset),
    arrayDisagreement: last && isFresh ? Number(last.reason === 'geometry-doubtful') : null,
  }
}

async function healthOfSystem(parts: Parts, now: number, outside: OutsideHealth): Promise<HealthFigures> {
  const [row] = await select<{ oldest: Date | null }>(
    parts.sequelize,
    `SELECT MIN(createdAt) AS oldest FROM deliveries WHERE state IN ('queued', 'leased')`,
  )
  const mailQueueAge = row?.oldest ? Math.max(0, (now - row.oldest.getTime()) / 1000) : 0
  return { ...none, mailQueueAge, diskFree: outside.diskFree }
}

const asksAge = ({ condition }: LimitInForce): boolean =>
  condition.comparisons.some(({ quantity }) => quantity === 'dataAge')

/** One moment for all limits of data health; the same minute is judged once. */
export async function judgeHealth(parts: Parts, office: Office, outside: OutsideHealth): Promise<void> {
  const limits = await limitsInForce(parts.sequelize, `l.limitClass = 'dataHealth'`, {})
  if (limits.length === 0) return
  const now = parts.clock.now().getTime()
  const figures = new Map<number | null, HealthFigures>()
  for (const { subjectId } of limits) {
    if (figures.has(subjectId)) continue
    const told =
      subjectId === null ? healthOfSystem(parts, now, outside) : healthOfStation(parts, subjectId, now, outside)
    figures.set(subjectId, await told)
  }
  await atDesk(parts, office, async (desk) => {
    const ids = limits.map(({ limitId }) => limitId)
    const states = await holdStates(desk, ids)
    const shelved = await shelvedAmong(desk, ids)
    for (const limit of limits) {
      const held = states.get(limit.limitId)
      const health = figures.get(limit.subjectId) ?? none
      if (!held || held.lastWindowEndsAt === now) continue
      // After the server's clock was set back the last moment lies ahead; what holds now is asked all the same.
      if (held.lastWindowEndsAt !== null && held.lastWindowEndsAt > now) held.track = notAhead(held.track, now)
      const moment = { at: now, seen: { sea: null, health }, earlier: () => null, timeZone: office.timeZone }
      const wasActive = held.track.isActive
      const judgement = judgeCondition(limit.condition, moment)
      const isHeldBack = outside.isSettling && judgement.notJudged !== null && asksAge(limit)
      noteJudgement(limit, held, isHeldBack ? { ...judgement, notJudged: 'settling' } : judgement, now, null)
      await act(desk, limit, held, { at: now, sea: null, isShelved: shelved.has(limit.limitId), wasActive })
    }
    await refreshAlerts(desk, limits, states)
    await keepStates(desk, [...states.values()])
  })
}
