/**
 * One event in the life of a limit, with everything that belongs to it in the same transaction: state, alert, its
 * timeline, the watch log, the audit, and what people are told.
 */
import { stateWords, titleOf, valueWithSd } from '../../../shared/alerts/describe.ts'
import type { SeaFigures } from '../../../shared/alerts/figures.ts'
import { quantityOf } from '../../../shared/alerts/quantities.ts'
import { isAside, transition } from '../../../shared/alerts/transition.ts'
import type { AlertCause, Facts } from '../../../shared/alerts/transition.ts'
import { clockUtc } from '../../../shared/times.ts'
import type { AlertEventKind } from '../../../shared/schemas/alert.ts'
import type { AlertState } from '../../../shared/schemas/limit.ts'
import { Alert, AlertEvent } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import type { LimitInForce } from '../limits/rows.ts'
import { writeSystemLine } from '../watchLog.ts'
import type { Desk, HeldState } from './desk.ts'
import { announce, endSteps, tellAllClear } from './tell.ts'

export interface Happening {
  cause: AlertCause
  facts: Omit<Facts, 'isActive' | 'latches'>
  /** The window or moment behind it, ms since 1970 UTC. */
  at: number
  sea: SeaFigures | null
  /** Null: the program itself. */
  personId: number | null
  note: string | null
  /** What the timeline calls it, where the cause alone does not say it. */
  eventKind?: AlertEventKind
}

const eventKinds: Record<AlertCause, AlertEventKind> = {
  raise: 'raised',
  clear: 'cleared',
  acknowledge: 'acknowledged',
  reset: 'reset',
  shelve: 'shelved',
  unshelve: 'unshelved',
  suppress: 'suppressed',
  resume: 'resumed',
  takeOut: 'outOfService',
  putBack: 'returned',
}

export const openAlertOf = (desk: Desk, limitId: number): Promise<Alert | null> =>
  Alert.findOne({ where: { limitId, isExercise: false, closedAt: null }, lock: true, transaction: desk.transaction })

export async function addEvent(
  desk: Desk,
  alertId: number,
  event: { at?: number; kind: AlertEventKind; text: string; personId?: number | null; note?: string | null; value?: number | null }, // prettier-ignore
): Promise<void> {
  const { at = desk.now, kind, text, personId = null, note = null, value = null } = event
  const row = { alertId, at: new Date(at), kind, text: text.slice(0, 400), personId, note, value }
  await AlertEvent.create(row, { transaction: desk.transaction })
  desk.changed.alerts.add(alertId)
}

const valueOf = (limit: LimitInForce, held: HeldState): string =>
  valueWithSd(quantityOf(limit.condition.comparisons[0].quantity), held.value, held.valueSd)

function sentence(limit: LimitInForce, held: HeldState, cause: AlertCause, to: AlertState): string {
  const value = valueOf(limit, held)
  if (cause === 'raise') return isAside(to) ? `Exceeded while ${stateWords[to].toLowerCase()}: ${value}` : `Raised: ${value}` // prettier-ignore
  if (cause === 'clear') return limit.limitClass === 'wave' ? `Cleared: ${value}` : 'Cleared'
  if (cause === 'acknowledge') return 'Acknowledged'
  if (cause === 'unshelve' || cause === 'resume' || cause === 'putBack') {
    const from = { unshelve: 'Off the shelf', resume: 'No longer suppressed', putBack: 'Back in service' }[cause]
    return `${from}, asked afresh: ${to === 'normal' ? 'not exceeded' : stateWords[to].toLowerCase()}`
  }
  return stateWords[to]
}

async function openAlert(desk: Desk, limit: LimitInForce, held: HeldState, at: number): Promise<Alert> {
  const { limitId, versionId, priority } = limit
  const { crossedAt } = held.track
  const alert = await Alert.create(
    {
      ...{ limitId, limitVersionId: versionId, priority, state: held.state },
      ...{
        crossedAt: new Date(crossedAt ?? at),
        raisedAt: new Date(at),
        announcedAt: null,
        windowEndsAt: new Date(at),
      },
      revision: held.lastRevision ?? 0,
      ...{ value: held.value, valueSd: held.valueSd, extremeValue: held.value, extremeAt: new Date(at) },
      ...{ acknowledgedAt: null, acknowledgedById: null, clearedAt: null, closedAt: null, isExercise: false },
    },
    { transaction: desk.transaction },
  )
  if (crossedAt !== null && crossedAt < at) {
    await addEvent(desk, alert.id, { at: crossedAt, kind: 'crossed', text: `Crossed the limit at ${clockUtc(crossedAt)} UTC` }) // prettier-ignore
  }
  return alert
}

/** Answers whether the table has such a row; changes `held`, which the caller keeps. */
export async function happen(desk: Desk, limit: LimitInForce, held: HeldState, happening: Happening): Promise<boolean> {
  const { cause, at, sea, personId, note } = happening
  const { isActive, activeSince } = held.track
  const step = transition(held.state, cause, { ...happening.facts, isActive, latches: limit.condition.latches })
  if (!step) return false
  const from = held.state
  if (step.to !== from) Object.assign(held, { state: step.to, since: desk.now })
  const known = await openAlertOf(desk, limit.limitId)
  const alert =
    known ?? (isActive && (cause === 'raise' || step.isAnnounced) ? await openAlert(desk, limit, held, at) : null)
  const text = sentence(limit, held, cause, step.to)
  if (alert) await moveAlert(desk, alert, { ...step, cause, at, personId })
  if (alert) {
    const isAgain = cause === 'raise' && known !== null && !isAside(step.to)
    const kind = happening.eventKind ?? (isAgain ? 'raisedAgain' : eventKinds[cause])
    await addEvent(desk, alert.id, { kind, text, personId, note, value: held.value })
  }
  if (alert && step.isAnnounced) {
    const isCaughtUp = activeSince !== null && activeSince < at
    await announce(desk, { alert, limit, sea, isCaughtUp })
  } else if (alert && step.isAllClear) {
    await endSteps(desk, alert.id, true)
    await tellAllClear(desk, { alert, limit, sea })
  } else if (alert && (step.to === 'normal' || isAside(step.to))) await endSteps(desk, alert.id, true)
  else if (alert && cause === 'acknowledge') await endSteps(desk, alert.id, false)
  await writeDown(desk, limit, { ...happening, from, to: step.to, text, alertId: alert?.id ?? null })
  desk.changed.limits.add(limit.limitId)
  return true
}

interface Move {
  to: AlertState
  isAnnounced: boolean
  cause: AlertCause
  at: number
  personId: number | null
}

async function moveAlert(desk: Desk, alert: Alert, { to, isAnnounced, cause, at, personId }: Move): Promise<void> {
  const now = new Date(desk.now)
  await alert.update(
    {
      state: to,
      ...(isAnnounced && { announcedAt: alert.announcedAt ?? now, acknowledgedAt: null, acknowledgedById: null }),
      ...(cause === 'acknowledge' && { acknowledgedAt: now, acknowledgedById: personId }),
      ...(cause === 'clear' && { clearedAt: new Date(at) }),
      ...(cause === 'raise' && { clearedAt: null, windowEndsAt: new Date(at) }),
      ...(to === 'normal' && { closedAt: now }),
      version: alert.version + 1,
    },
    { transaction: desk.transaction },
  )
}

interface Written extends Happening {
  from: AlertState
  to: AlertState
  text: string
  alertId: number | null
}

async function writeDown(desk: Desk, limit: LimitInForce, written: Written): Promise<void> {
  const { parts, transaction } = desk
  const { cause, from, to, text, personId, note, alertId } = written
  const title = titleOf(limit.title, limit.condition, limit.subjectName)
  const because = note === null ? '' : `. ${note}`
  const links = { limitId: limit.limitId, ...(alertId !== null && { alertId }) }
  const line = `${title}: ${text}${because}`
  await writeSystemLine(
    parts,
    { kind: 'alert', text: line, figures: { state: to, priority: limit.priority }, links },
    transaction,
  )
  const entity = { action: `limit.${cause}`, entity: 'limit', entityId: limit.limitId }
  const after = { state: to, alertId, note }
  await recordAudit(parts, { ...entity, personId, before: { state: from }, after }, transaction)
}
