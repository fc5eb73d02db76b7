/**
 * Judges a station's limits against its estimates and a place's against its outlooks, window by window in order of their ends, each in
 * one transaction. What is older than the stale limit moves the delays and tells nobody; the newest window then raises.
 */
import { judgeCondition, risesOf } from '../../../shared/alerts/condition.ts'
import type { Judgement } from '../../../shared/alerts/condition.ts'
import { follow } from '../../../shared/alerts/follow.ts'
import type { SeaFigures } from '../../../shared/alerts/figures.ts'
import { causeOf, isAside } from '../../../shared/alerts/transition.ts'
import type { Parts } from '../../config/parts.ts'
import { Alert } from '../../models/index.ts'
import { execute, select } from '../../models/sql.ts'
import { limitsInForce } from '../limits/rows.ts'
import type { LimitInForce } from '../limits/rows.ts'
import { followDesign, isSuppressed } from './design.ts'
import { atDesk, holdStates, keepStates } from './desk.ts'
import type { Desk, HeldState } from './desk.ts'
import { happen } from './lifecycle.ts'
import type { Office } from './office.ts'
import { placeSeaAt, placeSeaBetween } from './placeSea.ts'
import { seaAt, seaBetween } from './seaFigures.ts'
import type { SeaWindow } from './seaFigures.ts'
import { shelvedAmong } from './shelves.ts'

/** Stale windows only move delays: so many go into one transaction. */
const staleAtOnce = 500
const job = 'judgeLimits'

/** Whose windows are judged. */
interface Watched {
  subjectKind: 'station' | 'place'
  subjectId: number
}

async function judgedUpTo({ sequelize }: Parts, watched: Watched): Promise<number | null> {
  const [row] = await select<{ doneUpTo: Date | null }>(
    sequelize,
    'SELECT doneUpTo FROM watermarks WHERE job = :job AND subjectKind = :subjectKind AND subjectId = :subjectId',
    { job, ...watched },
  )
  return row?.doneUpTo?.getTime() ?? null
}

async function noteJudged({ parts, now, transaction }: Desk, watched: Watched, upTo: number): Promise<void> {
  await execute(
    parts.sequelize,
    `INSERT INTO watermarks (job, subjectKind, subjectId, doneUpTo, epoch, updatedAt)
     VALUES (:job, :subjectKind, :subjectId, :upTo, 0, :now)
     ON DUPLICATE KEY UPDATE doneUpTo = GREATEST(COALESCE(doneUpTo, VALUES(doneUpTo)), VALUES(doneUpTo)),
       updatedAt = VALUES(updatedAt)`,
    { job, ...watched, upTo: new Date(upTo), now: new Date(now) },
    transaction,
  )
}

/** Judges every window that is due; answers how many. */
export const judgeStation = (parts: Parts, office: Office, stationId: number): Promise<number> =>
  judgeSubject(parts, office, { subjectKind: 'station', subjectId: stationId })

export const judgePlace = (parts: Parts, office: Office, placeId: number): Promise<number> =>
  judgeSubject(parts, office, { subjectKind: 'place', subjectId: placeId })

async function judgeSubject(parts: Parts, office: Office, watched: Watched): Promise<number> {
  const which = `l.subjectKind = :subjectKind AND l.subjectId = :subjectId AND l.limitClass = 'wave'`
  const limits = await limitsInForce(parts.sequelize, which, { ...watched })
  const now = parts.clock.now().getTime()
  const staleMs = (limits[0]?.staleAfterSeconds ?? 0) * 1000
  const from = (await judgedUpTo(parts, watched)) ?? now - staleMs
  if (limits.length === 0) {
    await atDesk(parts, office, (desk) => noteJudged(desk, watched, Math.max(from, now - staleMs)))
    return 0
  }
  let judged = 0
  for (let after = from; ;) {
    const windows = await windowsBetween(parts, watched, after, now + staleMs)
    if (windows.length === 0) return judged
    const earlier = await earlierFigures(parts, watched, limits, windows)
    const isStale = ({ windowEndsAt }: SeaWindow) => now - windowEndsAt > staleMs
    const stale = windows.filter(isStale)
    for (const batch of [stale, ...windows.filter((window) => !isStale(window)).map((window) => [window])]) {
      if (batch.length === 0) continue
      await atDesk(parts, office, (desk) => judgeWindows(desk, watched, limits, batch, earlier, batch !== stale))
      judged += batch.length
    }
    after = windows[windows.length - 1].windowEndsAt
  }
}

const windowsBetween = ({ sequelize }: Parts, { subjectKind, subjectId }: Watched, from: number, to: number) =>
  subjectKind === 'station'
    ? seaBetween(sequelize, subjectId, from, to, staleAtOnce)
    : placeSeaBetween(sequelize, subjectId, from, to, staleAtOnce)

/** Of the windows that rises are counted from. */
function earlierFigures({ sequelize }: Parts, watched: Watched, limits: LimitInForce[], windows: SeaWindow[]) {
  const rises = [...new Set(limits.flatMap(({ condition }) => risesOf(condition)))]
  const ends = windows.flatMap(({ windowEndsAt }) => rises.map((seconds) => windowEndsAt - seconds * 1000))
  const { subjectKind, subjectId } = watched
  const at = subjectKind === 'station' ? seaAt : placeSeaAt
  return at(sequelize, subjectId, [...new Set(ends)])
}

async function judgeWindows(
  desk: Desk,
  watched: Watched,
  limits: LimitInForce[],
  windows: SeaWindow[],
  earlier: Map<number, SeaFigures>,
  isTold: boolean,
): Promise<void> {
  const ids = limits.map(({ limitId }) => limitId)
  const states = await holdStates(desk, ids)
  const shelved = await shelvedAmong(desk, ids)
  for (const { windowEndsAt, revision, sea } of windows) {
    for (const limit of limits) {
      const held = states.get(limit.limitId)
      if (!held || (held.lastWindowEndsAt !== null && held.lastWindowEndsAt >= windowEndsAt)) continue
      const judgement = judgeCondition(limit.condition, {
        at: windowEndsAt,
        seen: { sea, health: null },
        earlier: (seconds) => earlier.get(windowEndsAt - seconds * 1000) ?? null,
        timeZone: desk.office.timeZone,
      })
      const wasActive = held.track.isActive
      noteJudgement(limit, held, judgement, windowEndsAt, revision)
      const occasion = { at: windowEndsAt, sea, isShelved: shelved.has(limit.limitId), wasActive }
      if (isTold) await act(desk, limit, held, occasion)
    }
  }
  await refreshAlerts(desk, limits, states)
  await keepStates(desk, [...states.values()])
  await noteJudged(desk, watched, windows[windows.length - 1].windowEndsAt)
}

export function noteJudgement(
  limit: LimitInForce,
  held: HeldState,
  { verdict, value, sd, notJudged }: Judgement,
  at: number,
  revision: number | null,
): void {
  held.track = follow(held.track, verdict, at, limit.condition)
  Object.assign(held, { lastWindowEndsAt: at, lastRevision: revision, notJudged })
  // An alert holds its last value while nothing is known.
  if (value !== null) Object.assign(held, { value, valueSd: sd })
}

export interface Occasion {
  /** The window or moment judged, ms since 1970 UTC. */
  at: number
  sea: SeaFigures | null
  isShelved: boolean
  /** Before this moment was judged. */
  wasActive: boolean
}

/** Design logic first, so that a season's last minute raises nothing; then what the condition causes. */
export async function act(desk: Desk, limit: LimitInForce, held: HeldState, occasion: Occasion): Promise<void> {
  const { at, sea, isShelved, wasActive } = occasion
  await followDesign(desk, limit, held, isShelved)
  const facts = { isShelved, isSuppressed: isSuppressed(limit, desk.now, desk.office.timeZone) }
  const { isActive } = held.track
  // Put aside, what the condition does is still logged.
  const asideCause = isActive === wasActive ? null : isActive ? 'raise' : 'clear'
  const cause = isAside(held.state) ? asideCause : causeOf(held.state, isActive)
  if (cause) await happen(desk, limit, held, { cause, facts, at, sea, personId: null, note: null })
}

/** Newest value, and the extreme while active, of every alert that is open. */
export async function refreshAlerts(desk: Desk, limits: LimitInForce[], states: Map<number, HeldState>): Promise<void> {
  const active = limits.filter(({ limitId }) => {
    const held = states.get(limitId)
    return held && (held.state !== 'normal' || held.track.isActive)
  })
  if (active.length === 0) return
  const where = { limitId: active.map(({ limitId }) => limitId), isExercise: false, closedAt: null }
  for (const alert of await Alert.findAll({ where, transaction: desk.transaction })) {
    const limit = active.find(({ limitId }) => limitId === alert.limitId)
    const held = states.get(alert.limitId)
    if (!limit || !held || held.notJudged !== null || held.lastWindowEndsAt === null) continue
    const isBelow = limit.condition.comparisons[0].kind === 'below'
    const { value, valueSd } = held
    const isFurther = value !== null && (alert.extremeValue === null || (isBelow ? value < alert.extremeValue : value > alert.extremeValue)) // prettier-ignore
    const at = new Date(held.lastWindowEndsAt)
    await alert.update(
      {
        ...{ value, valueSd, windowEndsAt: at, revision: held.lastRevision ?? 0, version: alert.version + 1 },
        ...(isFurther && held.track.isActive && { extremeValue: value, extremeAt: at }),
      },
      { transaction: desk.transaction },
    )
    desk.changed.alerts.add(alert.id)
  }
}
