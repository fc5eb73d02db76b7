/** Limits made, changed as a new version with author and reason, retired. */
import { conditionWords, titleOf } from '../../../shared/alerts/describe.ts'
import { quantityOf } from '../../../shared/alerts/quantities.ts'
import type { LimitContent, Priority, SubjectKind } from '../../../shared/schemas/limit.ts'
import type { Parts } from '../../config/parts.ts'
import { Alert, Limit, LimitState, LimitVersion, Station } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { askConsent, noConsent, noteConsent } from '../alerts/consent.ts'
import type { Consent } from '../alerts/consent.ts'
import { atDesk, holdStates, keepStates } from '../alerts/desk.ts'
import type { Desk } from '../alerts/desk.ts'
import { isSuppressed } from '../alerts/design.ts'
import { addEvent, happen } from '../alerts/lifecycle.ts'
import type { Office } from '../alerts/office.ts'
import { endShelvings } from '../alerts/shelves.ts'
import { endSteps } from '../alerts/tell.ts'
import { changedMeanwhile, invalidInput, notFound, Refused } from '../problems.ts'
import { writeSystemLine } from '../watchLog.ts'
import { classOf } from './check.ts'
import { presentLimits } from './present.ts'
import { stationsBehind } from './subjects.ts'
import { limitsInForce } from './rows.ts'

export interface LimitOrder {
  content: LimitContent
  reason: string
  consent: Consent
}

export interface NewLimit extends LimitOrder {
  subjectKind: SubjectKind
  subjectId: number | null
}

const ranks: Priority[] = ['low', 'medium', 'high', 'urgent']

interface NewVersion {
  limitId: number
  number: number
  order: LimitOrder
  personId: number | null
}

async function addVersion(
  { now, transaction }: Desk,
  { limitId, number, order, personId }: NewVersion,
): Promise<LimitVersion> {
  const { content, reason, consent } = order
  const { recipients, ...rest } = content
  const made = { authorId: personId, reason, ...consent, validFrom: new Date(now) }
  return LimitVersion.create({ limitId, number, ...rest, steps: recipients, ...made }, { transaction })
}

/** The office's rule, where a limit is urgent or was: lowering it or retiring it silences it. Answers what is to be kept. */
async function askForUrgent(
  desk: Desk,
  priorities: (Priority | undefined)[],
  consent: Consent,
  personId: number | null,
): Promise<Consent> {
  if (!priorities.includes('urgent') || !desk.office.asksSecondPerson || personId === null) return noConsent
  await askConsent(desk, consent, personId)
  return consent
}

/** In a desk of the caller's; `personId` null: the program itself. */
export async function addLimit(desk: Desk, draft: NewLimit, personId: number | null): Promise<number> {
  const { parts, transaction } = desk
  const { subjectKind, subjectId, content, reason } = draft
  const limitClass = await classOf(draft, transaction)
  const consent = await askForUrgent(desk, [content.priority], draft.consent, personId)
  const now = new Date(desk.now)
  const limit = await Limit.create(
    {
      ...{
        subjectKind,
        subjectId,
        limitClass,
        currentVersionId: null,
        createdAt: now,
        updatedAt: now,
        retiredAt: null,
      },
      ...{ outOfServiceAt: null, outOfServiceReason: null, outOfServiceById: null },
    },
    { transaction },
  )
  const version = await addVersion(desk, { limitId: limit.id, number: 1, order: { ...draft, consent }, personId })
  await limit.update({ currentVersionId: version.id }, { transaction })
  await LimitState.create(
    {
      ...{ limitId: limit.id, state: 'normal', since: now, isActive: false, activeSince: null, crossedAt: null },
      ...{ pendingSince: null, lastKnownAt: null, lastWindowEndsAt: null, lastRevision: null },
      ...{ value: null, valueSd: null, notJudged: 'neverYet' },
    },
    { transaction },
  )
  const audit = { action: 'limit.add', entity: 'limit', entityId: limit.id, after: { subjectKind, subjectId, content } }
  await recordAudit(parts, { ...audit, personId }, transaction)
  const [row] = await limitsInForce(parts.sequelize, 'l.id = :id', { id: limit.id }, transaction)
  if (row) {
    const title = titleOf(content.title, content.condition, row.subjectName)
    const text = `Limit set: ${title}. ${conditionWords(content.condition)} ${reason}`
    await writeSystemLine(parts, { kind: 'limit', text, links: { limitId: limit.id } }, transaction)
    if (personId !== null) await noteConsent(desk, consent, { limitId: limit.id, title, done: 'set', reason, personId })
  }
  desk.changed.limits.add(limit.id)
  return limit.id
}

/** Missing data raises no wave alert: it raises this one, which comes with the first wave limit that needs a station. */
async function addStaleLimits(desk: Desk, draft: NewLimit, personId: number): Promise<void> {
  const { transaction } = desk
  for (const subjectId of await stationsBehind(draft, transaction)) {
    const where = { subjectKind: 'station', subjectId, limitClass: 'dataHealth', retiredAt: null }
    const known = await Limit.findOne({ where, transaction })
    const station = known ? null : await Station.findByPk(subjectId, { transaction })
    if (!station || station.retiredAt !== null) continue
    const content = staleContent(station.staleAfterSeconds, draft.content.recipients)
    const reason = 'Comes with the first limit that needs the station'
    await addLimit(desk, { subjectKind: 'station', subjectId, content, reason, consent: noConsent }, personId)
  }
}

/** No usable figure for the station's stale limit; clears with the first one. */
export const staleContent = (staleAfterSeconds: number, recipients: LimitContent['recipients']): LimitContent => ({
  title: null,
  condition: {
    comparisons: [
      { kind: 'above', quantity: 'dataAge', raise: staleAfterSeconds, clear: staleAfterSeconds, riseOverSeconds: null },
    ],
    when: null,
    onDelaySeconds: 0,
    offDelaySeconds: 0,
    clearSigmas: 0,
    worstQuality: 3,
    latches: false,
  },
  priority: 'medium',
  recipients,
  schedule: null,
  note: "The station's own stale limit.",
  toCheck:
    'The telemetry link, the power of the station and its sensors. Limits of this station are not judged meanwhile.',
  reviewOn: null,
  isPublished: false,
})

export const createLimit = (parts: Parts, office: Office, draft: NewLimit, personId: number): Promise<number> =>
  atDesk(parts, office, async (desk) => {
    const id = await addLimit(desk, draft, personId)
    if (quantityOf(draft.content.condition.comparisons[0].quantity).limitClass === 'wave') {
      await addStaleLimits(desk, draft, personId)
    }
    return id
  })

async function lockedLimit(desk: Desk, limitId: number, version: number): Promise<Limit> {
  const limit = await Limit.findByPk(limitId, { lock: true, transaction: desk.transaction })
  if (!limit) throw notFound('limit', limitId)
  if (limit.version !== version) {
    const [current] = await presentLimits(desk.parts, [limit])
    throw changedMeanwhile('limit', limit.version, current)
  }
  if (limit.retiredAt !== null) {
    const detail = 'It was retired and is kept for the record alone.'
    throw new Refused({ status: 409, code: 'limit.retired', title: 'Retired', detail })
  }
  return limit
}

export const changeLimit = (
  parts: Parts,
  office: Office,
  { limitId, version, change, personId }: { limitId: number; version: number; change: LimitOrder; personId: number },
): Promise<void> =>
  atDesk(parts, office, async (desk) => {
    const { transaction } = desk
    const held = (await holdStates(desk, [limitId])).get(limitId)
    const limit = await lockedLimit(desk, limitId, version)
    const { subjectKind, subjectId } = limit
    const limitClass = await classOf({ subjectKind, subjectId, content: change.content }, transaction)
    if (limitClass !== limit.limitClass) {
      throw invalidInput([{ path: 'content.condition.comparisons.0.quantity', message: 'is of another class' }])
    }
    const before = await LimitVersion.findByPk(limit.currentVersionId ?? 0, { transaction })
    const priorities = [before?.priority, change.content.priority]
    const consent = await askForUrgent(desk, priorities, change.consent, personId)
    const order = { ...change, consent }
    const next = await addVersion(desk, { limitId, number: (before?.number ?? 0) + 1, order, personId })
    await limit.update(
      { currentVersionId: next.id, version: limit.version + 1, updatedAt: new Date(desk.now) },
      { transaction },
    )
    const audit = { action: 'limit.change', entity: 'limit', entityId: limitId, before, after: change.content }
    await recordAudit(parts, { ...audit, personId }, transaction)
    desk.changed.limits.add(limitId)
    const [row] = await limitsInForce(parts.sequelize, 'l.id = :limitId', { limitId }, transaction)
    if (!row || !held) return
    const title = titleOf(row.title, row.condition, row.subjectName)
    const text = `Limit changed to version ${next.number}: ${title}. ${conditionWords(row.condition)} ${change.reason}`
    await writeSystemLine(parts, { kind: 'limit', text, links: { limitId } }, transaction)
    const open = { limitId, isExercise: false, closedAt: null }
    const alert = await Alert.findOne({ where: open, lock: true, transaction })
    await noteConsent(desk, consent, { limitId, title, done: 'changed', reason: change.reason, personId })
    const hasRisen = ranks.indexOf(row.priority) > ranks.indexOf(before?.priority ?? 'urgent')
    if (alert) {
      await alert.update({ priority: row.priority, version: alert.version + 1 }, { transaction })
      const kind = hasRisen ? 'priorityRose' : 'limitChanged'
      await addEvent(desk, alert.id, {
        kind,
        text: `Limit changed to version ${next.number}`,
        personId,
        note: change.reason,
      })
    }
    // What is on the shelf returns at once when its priority rises.
    if (hasRisen && held.state === 'shelved') {
      await endShelvings(desk, limitId, personId)
      const facts = { isShelved: false, isSuppressed: isSuppressed(row, desk.now, office.timeZone) }
      const at = held.lastWindowEndsAt ?? desk.now
      await happen(desk, row, held, { cause: 'unshelve', facts, at, sea: null, personId, note: 'The priority rose' })
    }
    // A delay under way was counted by the old condition.
    held.track = { ...held.track, pendingSince: null }
    await keepStates(desk, [held])
  })

/** The limit is kept, with its alerts; an open one is closed. */
export const retireLimit = (
  parts: Parts,
  office: Office,
  order: { limitId: number; version: number; reason: string; consent: Consent; personId: number },
): Promise<void> =>
  atDesk(parts, office, async (desk) => {
    const { transaction } = desk
    const { limitId, version, reason, personId } = order
    const held = (await holdStates(desk, [limitId])).get(limitId)
    const limit = await lockedLimit(desk, limitId, version)
    const [row] = await limitsInForce(parts.sequelize, 'l.id = :limitId', { limitId }, transaction)
    const consent = await askForUrgent(desk, [row?.priority], order.consent, personId)
    const title = row ? titleOf(row.title, row.condition, row.subjectName) : `limit ${limitId}`
    await noteConsent(desk, consent, { limitId, title, done: 'retired', reason, personId })
    const now = new Date(desk.now)
    await limit.update({ retiredAt: now, version: limit.version + 1, updatedAt: now }, { transaction })
    await endShelvings(desk, limitId, personId)
    for (const alert of await Alert.findAll({ where: { limitId, closedAt: null }, lock: true, transaction })) {
      await alert.update({ state: 'normal', closedAt: now, version: alert.version + 1 }, { transaction })
      await addEvent(desk, alert.id, { kind: 'closed', text: 'The limit was retired', personId, note: reason })
      await endSteps(desk, alert.id, true)
    }
    if (held) {
      const track = { isActive: false, activeSince: null, crossedAt: null, pendingSince: null, lastKnownAt: null }
      await keepStates(desk, [{ ...held, state: 'normal', since: desk.now, track }])
    }
    const audit = { action: 'limit.retire', entity: 'limit', entityId: limitId, after: { reason } }
    await recordAudit(parts, { ...audit, personId }, transaction)
    await writeSystemLine(
      parts,
      { kind: 'limit', text: `Limit retired: ${title}. ${reason}`, links: { limitId } },
      transaction,
    )
    desk.changed.limits.add(limitId)
  })
