/** What belongs to every change of a notice, in one transaction: the row, its audit, a line of the watch log, the e-mail to the place's lists. */
import type { Transaction } from 'sequelize'
import { noticeLine, noticeSubject, noticeText } from '../../../shared/notices/words.ts'
import type { NoticeEvent } from '../../../shared/notices/words.ts'
import type { Parts } from '../../config/parts.ts'
import type { Notice, Place } from '../../models/index.ts';
import { Person } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { writeToLists } from '../messages.ts'
import { inTransaction } from '../transaction.ts'
import { writeSystemLine } from '../watchLog.ts'

/** What of the installation's settings notices speak of; read by whoever calls the service. */
export interface NoticeOffice {
  portName: string
  timeZone: string
  isDemonstration: boolean
  caution: string
  /** So long before its end a notice is told as about to expire. */
  warnMs: number
}

export type NoticeParts = Pick<Parts, 'bus' | 'clock' | 'environment' | 'sequelize'>

export interface NoticeDesk {
  parts: NoticeParts
  office: NoticeOffice
  transaction: Transaction
  now: Date
  changed: { places: Set<number>; messages: Set<number> }
}

/** News goes out after commit: an earlier try of the same work leaves none. */
export async function atNoticeDesk<Result>(
  parts: NoticeParts,
  office: NoticeOffice,
  work: (desk: NoticeDesk) => Promise<Result>,
): Promise<Result> {
  const { result, changed } = await inTransaction(parts.sequelize, async (transaction) => {
    const changes = { places: new Set<number>(), messages: new Set<number>() }
    const desk = { parts, office, transaction, now: parts.clock.now(), changed: changes }
    return { result: await work(desk), changed: changes }
  })
  for (const placeId of changed.places) parts.bus.publish('place.changed', { placeId })
  for (const messageId of changed.messages) parts.bus.publish('message.changed', { messageId, alertId: null })
  return result
}

export interface Telling {
  event: NoticeEvent
  notice: Notice
  place: Pick<Place, 'id' | 'name' | 'noticeListIds'>
  /** Of this event. */
  reason: string
  personId: number | null
  audit: { action: string; before?: unknown; after?: unknown }
}

export async function tell(
  desk: NoticeDesk,
  { event, notice, place, reason, personId, audit }: Telling,
): Promise<void> {
  const { parts, office, transaction, now, changed } = desk
  const person = personId === null ? null : await Person.findByPk(personId, { transaction })
  const facts = {
    ...{ event, reason, content: notice.content, placeName: place.name, by: person?.name ?? null },
    ...{ portName: office.portName, timeZone: office.timeZone, isDemonstration: office.isDemonstration },
    ...{ caution: office.caution, at: now.getTime(), startsAt: notice.startsAt.getTime() },
    expiresAt: notice.expiresAt?.getTime() ?? null,
  }
  await recordAudit(parts, { ...audit, entity: 'notice', entityId: notice.id, personId }, transaction)
  const told = await writeToLists(
    parts,
    { kind: 'notice', subject: noticeSubject(facts), text: noticeText(facts) },
    {
      listIds: place.noticeListIds,
      priority: notice.kind === 'advisory' ? 'medium' : 'high',
      timeZone: office.timeZone,
    },
    transaction,
  )
  if (told.messageId !== null) changed.messages.add(told.messageId)
  const missed = told.unreached.length === 0 ? '' : ` Not reachable: ${told.unreached.join(', ')}.`
  const whom = place.noticeListIds.length === 0 ? ' No list is set to be told.' : ` E-mail to ${told.count}.`
  const links = { placeId: place.id, noticeId: notice.id }
  await writeSystemLine(parts, { kind: 'notice', text: `${noticeLine(facts)}${whom}${missed}`, links }, transaction)
  changed.places.add(place.id)
}
