/** Windows that came after newer ones had been judged: noted on the alert or in the log, never raised. */
import { judgeCondition } from '../../../shared/alerts/condition.ts'
import { titleOf, valueWords } from '../../../shared/alerts/describe.ts'
import { quantityOf } from '../../../shared/alerts/quantities.ts'
import { momentUtc } from '../../../shared/times.ts'
import type { Parts } from '../../config/parts.ts'
import { Alert } from '../../models/index.ts'
import { execute, select } from '../../models/sql.ts'
import { limitsInForce } from '../limits/rows.ts'
import type { LimitInForce } from '../limits/rows.ts'
import { writeSystemLine } from '../watchLog.ts'
import { atDesk } from './desk.ts'
import type { Desk } from './desk.ts'
import { addEvent } from './lifecycle.ts'
import type { Office } from './office.ts'
import { seaComputedBetween } from './seaFigures.ts'
import type { SeaWindow } from './seaFigures.ts'

/** What is filled in from further back is history, not news. */
const lookBackMs = 2 * 86_400_000
/** A window is written at most so long after it was computed: until then it may still be on its way. */
const settledAfterMs = 60_000
/** While more of them come they are told of together, but not later than this. */
const longestWaitMs = 3_600_000
const job = { job: 'judgeLate', subjectKind: 'station' }

async function notedUpTo({ sequelize }: Parts, stationId: number): Promise<number | null> {
  const [row] = await select<{ doneUpTo: Date | null }>(
    sequelize,
    'SELECT doneUpTo FROM watermarks WHERE job = :job AND subjectKind = :subjectKind AND subjectId = :stationId',
    { ...job, stationId },
  )
  return row?.doneUpTo?.getTime() ?? null
}

async function areStillComing({ sequelize }: Parts, stationId: number, until: number): Promise<boolean> {
  const rows = await select(
    sequelize,
    `SELECT 1 FROM estimates WHERE stationId = :stationId AND runId = 0 AND windowEndsAt > :from AND computedAt > :until
     AND origin IN ('late', 'import') LIMIT 1`,
    { stationId, from: new Date(until - lookBackMs), until: new Date(until) },
  )
  return rows.length > 0
}

/** Looks at what was computed late since the last time. Without a last time nothing is old news yet. */
export async function noteLateWindows(parts: Parts, office: Office, stationId: number): Promise<void> {
  const now = parts.clock.now().getTime()
  const until = now - settledAfterMs
  const since = await notedUpTo(parts, stationId)
  const mayWait = since !== null && now - since < longestWaitMs
  if (mayWait && (await areStillComing(parts, stationId, until))) return
  const which = `l.subjectKind = 'station' AND l.subjectId = :stationId AND l.limitClass = 'wave'`
  const limits = since === null ? [] : await limitsInForce(parts.sequelize, which, { stationId })
  const windows =
    since === null || limits.length === 0
      ? []
      : await seaComputedBetween(parts.sequelize, stationId, { since, until }, now - lookBackMs, now)
  await atDesk(parts, office, async (desk) => {
    for (const limit of limits) await noteLate(desk, limit, windows)
    await execute(
      parts.sequelize,
      `INSERT INTO watermarks (job, subjectKind, subjectId, doneUpTo, epoch, updatedAt)
       VALUES (:job, :subjectKind, :stationId, :until, 0, :now)
       ON DUPLICATE KEY UPDATE doneUpTo = VALUES(doneUpTo), updatedAt = VALUES(updatedAt)`,
      { ...job, stationId, until: new Date(until), now: new Date(now) },
      desk.transaction,
    )
  })
}

async function lastJudged({ parts, transaction }: Desk, limitId: number): Promise<number> {
  const [row] = await select<{ lastWindowEndsAt: Date | null }>(
    parts.sequelize,
    'SELECT lastWindowEndsAt FROM limitStates WHERE limitId = :limitId',
    { limitId },
    transaction,
  )
  return row?.lastWindowEndsAt?.getTime() ?? 0
}

/** One sentence for all of them. Rises are left out: what they are counted from may have come late too. */
async function noteLate(desk: Desk, limit: LimitInForce, windows: SeaWindow[]): Promise<void> {
  const judgedUpTo = await lastJudged(desk, limit.limitId)
  const exceeded = windows.flatMap(({ windowEndsAt, sea }) => {
    if (windowEndsAt > judgedUpTo) return []
    const moment = {
      at: windowEndsAt,
      seen: { sea, health: null },
      earlier: () => null,
      timeZone: desk.office.timeZone,
    }
    const { verdict, value } = judgeCondition(limit.condition, moment)
    return verdict === 'raise' ? [{ windowEndsAt, value }] : []
  })
  const [first, last] = [exceeded[0], exceeded.at(-1)]
  if (!first || !last) return
  const quantity = quantityOf(limit.condition.comparisons[0].quantity)
  const most = exceeded.reduce((best, one) => ((one.value ?? -Infinity) > (best.value ?? -Infinity) ? one : best))
  const [from, to] = [first, last].map(({ windowEndsAt }) => momentUtc(windowEndsAt, desk.now))
  const span = `${from === to ? from : `${from} to ${to}`} UTC`
  const windowsWords = exceeded.length === 1 ? '1 window' : `${exceeded.length} windows`
  const text = `Filled in late, ${span}: exceeded in ${windowsWords}, most ${valueWords(quantity, most.value)}. Nobody was told.`
  const where = { limitId: limit.limitId, isExercise: false, closedAt: null }
  const alert = await Alert.findOne({ where, transaction: desk.transaction })
  if (alert) await addEvent(desk, alert.id, { kind: 'late', text, value: most.value })
  const title = titleOf(limit.title, limit.condition, limit.subjectName)
  const links = { limitId: limit.limitId, ...(alert && { alertId: alert.id }) }
  await writeSystemLine(desk.parts, { kind: 'alert', text: `${title}. ${text}`, links }, desk.transaction)
}
