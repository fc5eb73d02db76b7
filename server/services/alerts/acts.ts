/** What operators do: acknowledge, reset, shelve, take off the shelf, take out of service and back. */
import { titleOf } from '../../../shared/alerts/describe.ts'
import { clockUtc } from '../../../shared/times.ts'
import type { AlertCause } from '../../../shared/alerts/transition.ts'
import type { Parts } from '../../config/parts.ts'
import { Alert, Limit, Shelving } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { limitsInForce } from '../limits/rows.ts'
import type { LimitInForce } from '../limits/rows.ts'
import { invalidInput, notFound, Refused } from '../problems.ts'
import { askConsent, noConsent, noteConsent } from './consent.ts'
import type { Consent } from './consent.ts'
import { isSuppressed } from './design.ts'
import { atDesk, holdStates, keepStates } from './desk.ts'
import type { Desk, HeldState } from './desk.ts'
import { addEvent, happen } from './lifecycle.ts'
import type { Office } from './office.ts'
import { endShelvings, shelvedAmong } from './shelves.ts'
import { endSteps } from './tell.ts'

const notNow = (detail: string): Refused =>
  new Refused({ status: 409, code: 'limit.notNow', title: 'Not in this state', detail })

interface HeldLimit {
  desk: Desk
  limit: LimitInForce
  held: HeldState
  /** The event with the facts as they are. */
  cause(cause: AlertCause, by: { personId: number; note: string | null; isShelved?: boolean }): Promise<boolean>
}

/** A limit with its state locked; throws the 404. */
const withLimit = <Result>(parts: Parts, office: Office, limitId: number, work: (held: HeldLimit) => Promise<Result>) =>
  atDesk(parts, office, async (desk) => {
    const [limit] = await limitsInForce(parts.sequelize, 'l.id = :limitId', { limitId }, desk.transaction)
    const held = limit && (await holdStates(desk, [limitId])).get(limitId)
    if (!limit || !held) throw notFound('limit', limitId)
    const shelved = (await shelvedAmong(desk, [limitId])).has(limitId)
    const result = await work({
      ...{ desk, limit, held },
      cause: (cause, { personId, note, isShelved = shelved }) => {
        const facts = { isShelved, isSuppressed: isSuppressed(limit, desk.now, office.timeZone) }
        const at = held.lastWindowEndsAt ?? desk.now
        return happen(desk, limit, held, { cause, facts, at, sea: null, personId, note })
      },
    })
    await keepStates(desk, [held])
    return result
  })

async function alertRow(alertId: number): Promise<Alert> {
  const alert = await Alert.findByPk(alertId)
  if (!alert) throw notFound('alert', alertId)
  return alert
}

/** Bound to this very alert. Answers whether this was the first acknowledgement; a later one changes nothing. */
export async function acknowledgeAlert(
  parts: Parts,
  office: Office,
  alertId: number,
  by: { personId: number; note: string | null },
): Promise<boolean> {
  const { limitId, isExercise } = await alertRow(alertId)
  if (isExercise) return acknowledgeExercise(parts, office, alertId, by)
  return withLimit(parts, office, limitId, async ({ desk, cause }) => {
    const alert = await Alert.findByPk(alertId, { lock: true, transaction: desk.transaction })
    if (!alert || alert.closedAt !== null || alert.acknowledgedAt !== null) return false
    if (await cause('acknowledge', by)) return true
    throw notNow('An alert that is shelved, suppressed or out of service is not acknowledged.')
  })
}

const acknowledgeExercise = (
  parts: Parts,
  office: Office,
  alertId: number,
  by: { personId: number; note: string | null },
) =>
  atDesk(parts, office, async (desk) => {
    const { transaction } = desk
    const alert = await Alert.findByPk(alertId, { lock: true, transaction })
    if (!alert || alert.closedAt !== null || alert.acknowledgedAt !== null) return false
    const change = {
      state: 'acknowledgedActive',
      acknowledgedAt: new Date(desk.now),
      acknowledgedById: by.personId,
    } as const
    await alert.update({ ...change, version: alert.version + 1 }, { transaction })
    await addEvent(desk, alertId, { kind: 'acknowledged', text: 'EXERCISE: acknowledged', ...by })
    await endSteps(desk, alertId, false)
    const audit = { action: 'drill.acknowledge', entity: 'alert', entityId: alertId }
    await recordAudit(parts, { ...audit, personId: by.personId, after: { note: by.note } }, transaction)
    return true
  })

/** Lets go an alert that latched. */
export const resetLimit = (parts: Parts, office: Office, limitId: number, by: { personId: number; note: string }) =>
  withLimit(parts, office, limitId, async ({ cause }) => {
    if (!(await cause('reset', by))) throw notNow('Only what has cleared, latched and been acknowledged is reset.')
  })

/** At most one watch; an urgent one needs a second person or, alone, a written reason. */
export const shelveLimit = (
  parts: Parts,
  office: Office,
  limitId: number,
  order: { reason: string; endsAt: string; consent: Consent },
  personId: number,
) =>
  withLimit(parts, office, limitId, async ({ desk, limit, cause }) => {
    const endsAt = Date.parse(order.endsAt)
    const longest = office.longestShelfSeconds
    if (endsAt <= desk.now) throw invalidInput([{ path: 'endsAt', message: 'must be in the future' }])
    if (endsAt > desk.now + longest * 1000) {
      throw invalidInput([{ path: 'endsAt', message: `must be at most ${longest / 3600} hours from now: one watch` }])
    }
    const { reason } = order
    const { consentById: secondPersonId, aloneReason } = await consentOf(limit, desk, order.consent, {
      ...{ personId, reason, done: `put on the shelf until ${clockUtc(endsAt)} UTC` },
    })
    const note = `Until ${clockUtc(endsAt)} UTC: ${reason}${aloneReason === null ? '' : `. Alone: ${aloneReason}`}`
    if (!(await cause('shelve', { personId, note, isShelved: true }))) {
      throw notNow('It is shelved, suppressed or out of service already.')
    }
    const times = { startsAt: new Date(desk.now), endsAt: new Date(endsAt), endedAt: null, endedById: null }
    await Shelving.create(
      { limitId, ...times, reason, personId, secondPersonId, aloneReason },
      { transaction: desk.transaction },
    )
  })

/** Asked of an urgent limit alone; answers what is to be kept. */
async function consentOf(
  limit: LimitInForce,
  desk: Desk,
  consent: Consent,
  act: { personId: number; reason: string; done: string },
): Promise<Consent> {
  if (limit.priority !== 'urgent') return noConsent
  await askConsent(desk, consent, act.personId)
  const title = titleOf(limit.title, limit.condition, limit.subjectName)
  await noteConsent(desk, consent, { ...act, limitId: limit.limitId, title })
  return consent
}

export const unshelveLimit = (
  parts: Parts,
  office: Office,
  limitId: number,
  by: { personId: number; note: string | null },
) =>
  withLimit(parts, office, limitId, async ({ desk, held, cause }) => {
    if (held.state !== 'shelved') throw notNow('It is not on the shelf.')
    await endShelvings(desk, limitId, by.personId)
    await cause('unshelve', { ...by, isShelved: false })
  })

export const takeOutOfService = (
  parts: Parts,
  office: Office,
  limitId: number,
  by: { personId: number; note: string; consent: Consent },
) =>
  withLimit(parts, office, limitId, async ({ desk, limit, cause }) => {
    if (limit.isOutOfService) throw notNow('It is out of service already.')
    const { personId, note: reason } = by
    await consentOf(limit, desk, by.consent, { personId, reason, done: 'taken out of service' })
    await endShelvings(desk, limitId, by.personId)
    const change = { outOfServiceAt: new Date(desk.now), outOfServiceReason: by.note, outOfServiceById: by.personId }
    await Limit.update(change, { where: { id: limitId }, transaction: desk.transaction })
    await cause('takeOut', { ...by, isShelved: false })
  })

export const returnToService = (
  parts: Parts,
  office: Office,
  limitId: number,
  by: { personId: number; note: string },
) =>
  withLimit(parts, office, limitId, async ({ desk, limit, cause }) => {
    if (!limit.isOutOfService) throw notNow('It is in service.')
    const change = { outOfServiceAt: null, outOfServiceReason: null, outOfServiceById: null }
    await Limit.update(change, { where: { id: limitId }, transaction: desk.transaction })
    await cause('putBack', by)
  })
