/**
 * Issuing and cancelling: content frozen, the one before it replaced, e-mail to the lists, a line of the watch log and the audit, all in one
 * transaction. A stop after it loses no e-mail, for the outbox holds them.
 */
import { chosenFigures } from '../../../shared/bulletins/figureKey.ts'
import { bulletinPlainText, bulletinTitle } from '../../../shared/bulletins/plainText.ts'
import { draftFaults } from '../../../shared/bulletins/term.ts'
import type { BulletinContent } from '../../../shared/schemas/bulletin.ts'
import { clockUtc, dateUtc } from '../../../shared/times.ts'
import { Bulletin, Person } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { writeMessage, writeToLists } from '../messages.ts'
import { invalidInput, notFound } from '../problems.ts'
import { writeSystemLine } from '../watchLog.ts'
import { atBulletinDesk, lockBulletin } from './desk.ts'
import type { BulletinChange, BulletinDesk, BulletinParts } from './desk.ts'
import type { BulletinOffice } from './office.ts'
import { contentOf, priorityOfBulletin } from './present.ts'

/** Who looked at it too: proven before; or why nobody could. */
export interface SecondLook {
  consentById: number | null
  aloneReason: string | null
}

/** The running number of the year, UTC. The unique key refuses a number given twice. */
async function nextNumber({ transaction, now }: BulletinDesk): Promise<string> {
  const year = now.getUTCFullYear()
  const from = new Date(Date.UTC(year, 0, 1))
  const issued = await Bulletin.findAll({ attributes: ['number', 'issuedAt'], lock: true, transaction })
  const numbers = issued
    .filter(({ issuedAt }) => issuedAt !== null && issuedAt >= from)
    .map(({ number }) => Number(number?.split('-')[1] ?? 0))
  return `${year}-${Math.max(0, ...numbers) + 1}`
}

function refuseUnready(bulletin: Bulletin, now: Date): void {
  const faults = draftFaults(bulletin.draft, now.getTime()).map(({ field, fault }) => ({ path: field, message: fault }))
  if (chosenFigures(bulletin.figures, bulletin.draft.chosen).length < bulletin.draft.chosen.length) {
    faults.push({
      path: 'chosen',
      message: 'names a station or place that is no longer there: freeze the figures again',
    })
  }
  if (faults.length > 0) throw invalidInput(faults)
}

async function askSecondLook(desk: BulletinDesk, look: SecondLook, personId: number): Promise<void> {
  if (!desk.office.asksSecondPerson || look.aloneReason !== null) return
  if (look.consentById === null) {
    const message = 'this office asks for a second operator or, alone, a written reason'
    throw invalidInput([{ path: 'consent', message }])
  }
  const second = await Person.findByPk(look.consentById, { transaction: desk.transaction })
  if (second?.role !== 'operator' || second.disabledAt !== null || second.id === personId) {
    throw invalidInput([{ path: 'consent.email', message: 'must be another operator' }])
  }
}

export const issueBulletin = (
  parts: BulletinParts,
  office: BulletinOffice,
  change: BulletinChange & { look: SecondLook },
): Promise<void> =>
  atBulletinDesk(parts, office, async (desk) => {
    const { transaction, now, changed } = desk
    const { look, personId } = change
    const bulletin = await lockBulletin(desk, change, 'draft')
    refuseUnready(bulletin, now)
    await askSecondLook(desk, look, personId)
    const number = await nextNumber(desk)
    const replaced = await replacePrevious(desk, bulletin)
    const content = contentOf(bulletin, office, { number, issuedAt: now, replaces: replaced?.number ?? null })
    const told = await tellLists(desk, bulletin, {
      subject: `${content.marker === 'warning' ? 'Warning' : 'Information'}: ${content.headline}`,
      text: bulletinPlainText(content),
      shown: content,
    })
    await bulletin.update(
      {
        ...{ status: 'issued', number, content, issuedAt: now, people: told.count, authorId: personId },
        ...{ chainId: replaced?.chainId ?? replaced?.id ?? bulletin.id, updatedAt: now, version: bulletin.version + 1 },
        ...{ consentById: look.consentById, aloneReason: look.aloneReason },
        validUntil: content.validUntil === null ? null : new Date(content.validUntil),
        nextIssueAt: content.nextIssueAt === null ? null : new Date(content.nextIssueAt),
      },
      { transaction },
    )
    const audit = {
      action: 'bulletin.issue',
      entity: 'bulletin',
      entityId: bulletin.id,
      personId,
      after: { number, ...look },
    }
    await recordAudit(parts, audit, transaction)
    await noteSecondLook(desk, bulletin, look, personId)
    const also = replaced === null ? '' : ` It replaces ${replaced.number}.`
    await noteLine(desk, bulletin, `Bulletin ${number} issued: ${content.headline}.${also}${told.words}`)
    changed.bulletins.add(bulletin.id)
  })

async function replacePrevious(
  { transaction, now, changed }: BulletinDesk,
  bulletin: Bulletin,
): Promise<Bulletin | null> {
  if (bulletin.replacesId === null) return null
  const previous = await Bulletin.findByPk(bulletin.replacesId, { lock: true, transaction })
  if (previous?.status !== 'issued') {
    throw invalidInput([
      { path: 'replacesId', message: 'is no longer in force: it was replaced or cancelled meanwhile' },
    ])
  }
  await previous.update({ status: 'replaced', version: previous.version + 1, updatedAt: now }, { transaction })
  changed.bulletins.add(previous.id)
  return previous
}

interface Told {
  count: number
  /** A sentence for the watch log. */
  words: string
}

async function tellLists(
  { parts, office, transaction, changed }: BulletinDesk,
  bulletin: Bulletin,
  { subject, text, shown }: { subject: string; text: string; shown: BulletinContent | null },
): Promise<Told> {
  const { isExercise } = bulletin.draft
  const marks = [isExercise && 'EXERCISE', office.isDemonstration && 'DEMONSTRATION'].filter(Boolean)
  const message = {
    ...{ kind: 'bulletin' as const, bulletinId: bulletin.id, isExercise, text, bulletin: shown },
    subject: [...marks, subject].join(' '),
  }
  const order = { listIds: bulletin.draft.listIds, priority: priorityOfBulletin(bulletin), timeZone: office.timeZone }
  const told = await writeToLists(parts, message, order, transaction)
  if (told.messageId !== null) changed.messages.add(told.messageId)
  const missed = told.unreached.length === 0 ? '' : ` Not reachable: ${told.unreached.join(', ')}.`
  const count = told.count === 1 ? '1 person' : `${told.count} people`
  return {
    count: told.count,
    words: ` ${told.count === 0 ? 'Nobody could be told by e-mail.' : `E-mail to ${count}.`}${missed}`,
  }
}

const noteLine = ({ parts, transaction }: BulletinDesk, bulletin: Bulletin, text: string): Promise<void> =>
  writeSystemLine(
    parts,
    {
      kind: 'bulletin',
      text: `${bulletin.draft.isExercise ? 'EXERCISE. ' : ''}${text}`,
      links: { bulletinId: bulletin.id },
    },
    transaction,
  )

/** Consent is audited under the name of who gave it; issuing alone goes to the log and to the administrators. */
async function noteSecondLook(
  desk: BulletinDesk,
  bulletin: Bulletin,
  { consentById, aloneReason }: SecondLook,
  personId: number,
): Promise<void> {
  const { parts, transaction, now, changed, office } = desk
  if (consentById !== null) {
    const audit = { action: 'bulletin.consent', entity: 'bulletin', entityId: bulletin.id, personId: consentById }
    await recordAudit(parts, { ...audit, after: { byPersonId: personId } }, transaction)
  }
  if (aloneReason === null) return
  const author = await Person.findByPk(personId, { attributes: ['name'], transaction })
  const who = author?.name ?? `Person ${personId}`
  await noteLine(desk, bulletin, `Alone on watch: ${who} issued bulletin ${bulletin.number}. ${aloneReason}`)
  const text = [
    `${who} was alone on watch and issued bulletin ${bulletin.number} without a second pair of eyes.`,
    '',
    `Headline: ${bulletin.draft.headline}`,
    `Why alone: ${aloneReason}`,
    `Done ${dateUtc(now.getTime())}, ${clockUtc(now.getTime())} UTC.`,
    '',
    'It holds as it was issued. The watch log keeps it; nothing is asked of you by this e-mail.',
  ].join('\n')
  const mark = office.isDemonstration ? 'DEMONSTRATION ' : ''
  const subject = `${mark}Bulletin ${bulletin.number} issued by one person alone`
  const message = await writeMessage(parts, { kind: 'alone', subject, text, bulletinId: bulletin.id }, transaction)
  changed.messages.add(message.id)
}

/** Who got it is told that it holds no longer. */
export const cancelBulletin = (
  parts: BulletinParts,
  office: BulletinOffice,
  change: BulletinChange & { reason: string },
): Promise<void> =>
  atBulletinDesk(parts, office, async (desk) => {
    const { transaction, now, changed } = desk
    const { reason, personId } = change
    const bulletin = await lockBulletin(desk, change, 'issued')
    await bulletin.update(
      {
        ...{ status: 'cancelled', cancelledAt: now, cancelReason: reason, cancelledById: personId },
        ...{ version: bulletin.version + 1, updatedAt: now },
      },
      { transaction },
    )
    const { content } = bulletin
    const cancelled = { at: now.toISOString(), reason }
    const told = await tellLists(desk, bulletin, {
      subject: `Cancelled: bulletin ${bulletin.number}, ${content?.headline ?? bulletin.draft.headline}`,
      text: content
        ? bulletinPlainText({ ...content, cancelled })
        : `Bulletin ${bulletin.number} is cancelled: ${reason}\n`,
      shown: content && { ...content, cancelled },
    })
    const audit = { action: 'bulletin.cancel', entity: 'bulletin', entityId: bulletin.id, personId, after: { reason } }
    await recordAudit(parts, audit, transaction)
    await noteLine(desk, bulletin, `Bulletin ${bulletin.number} cancelled: ${reason}.${told.words}`)
    changed.bulletins.add(bulletin.id)
  })

/** The e-mail as it would go out, to oneself alone. */
export const proofBulletin = (
  parts: BulletinParts,
  office: BulletinOffice,
  { bulletinId, personId }: { bulletinId: number; personId: number },
): Promise<void> =>
  atBulletinDesk(parts, office, async (desk) => {
    const { transaction, changed } = desk
    const bulletin = await Bulletin.findByPk(bulletinId, { transaction })
    if (!bulletin) throw notFound('bulletin', bulletinId)
    const person = await Person.findByPk(personId, { transaction, rejectOnEmpty: true })
    if (person.email === null) throw invalidInput([{ path: 'email', message: 'your account has no e-mail address' }])
    const content = bulletin.content ?? contentOf(bulletin, office, { number: null, issuedAt: null, replaces: null })
    const text = `PROOF, not issued. It went to you alone.\n\n${bulletinPlainText(content)}`
    const subject = `PROOF ${bulletinTitle(content)}: ${content.headline}`
    const recipients = [{ personId, address: person.email }]
    const proof = { kind: 'bulletin' as const, bulletinId, subject, text, bulletin: content }
    const message = await writeMessage(parts, proof, transaction, recipients)
    changed.messages.add(message.id)
  })
