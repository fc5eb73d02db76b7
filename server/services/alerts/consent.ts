/**
 * Urgent limits are not one person's business: a second operator consents, or whoever is alone on watch writes down
 * why. Consent is audited under the name of who gave it; standing alone goes into the watch log and to the
 * administrators by e-mail, all in the transaction of the change.
 */
import { clockUtc, dateUtc } from '../../../shared/times.ts'
import { Message, Person } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { invalidInput } from '../problems.ts'
import { writeSystemLine } from '../watchLog.ts'
import type { Desk } from './desk.ts'

/** `consentById`: who has proven at the desk who they are. */
export interface Consent {
  consentById: number | null
  aloneReason: string | null
}

export const noConsent: Consent = { consentById: null, aloneReason: null }

export interface ConsentedAct {
  limitId: number
  /** `Total height, Outer Ledge`. */
  title: string
  /** `set`, `changed`, `put on the shelf until 18:00 UTC`. */
  done: string
  reason: string
  personId: number
}

/** A second operator, not oneself and not disabled, or a reason why there is none. */
export async function askConsent(
  { transaction }: Pick<Desk, 'transaction'>,
  { consentById, aloneReason }: Consent,
  personId: number,
): Promise<void> {
  if (consentById === null) {
    if (aloneReason !== null) return
    const message = 'an urgent limit needs a second operator or, alone, a written reason'
    throw invalidInput([{ path: 'consent', message }])
  }
  const second = await Person.findByPk(consentById, { transaction })
  if (second?.role !== 'operator' || second.disabledAt !== null || second.id === personId) {
    throw invalidInput([{ path: 'consent.email', message: 'must be another operator' }])
  }
}

/** What was consented to, or done alone; nothing where no consent was asked for. */
export async function noteConsent(desk: Desk, { consentById, aloneReason }: Consent, act: ConsentedAct): Promise<void> {
  const { parts, transaction } = desk
  const { limitId, title, done, personId } = act
  if (consentById !== null) {
    const change = {
      action: 'limit.consent',
      entity: 'limit',
      entityId: limitId,
      after: { done, byPersonId: personId },
    }
    await recordAudit(parts, { ...change, personId: consentById }, transaction)
  }
  if (aloneReason === null) return
  const author = await Person.findByPk(personId, { attributes: ['name'], transaction })
  const who = author?.name ?? `Person ${personId}`
  const line = `Alone on watch: ${who}. Urgent limit ${done}: ${title}. ${aloneReason}`
  await writeSystemLine(parts, { kind: 'limit', text: line, links: { limitId } }, transaction)
  await tellAdministrators(desk, {
    subject: `Urgent limit ${done} by one person alone: ${title}`,
    who,
    aloneReason,
    ...act,
  })
}

async function tellAdministrators(
  { office, now, transaction, changed }: Desk,
  {
    subject,
    who,
    done,
    title,
    reason,
    aloneReason,
  }: ConsentedAct & { subject: string; who: string; aloneReason: string },
): Promise<void> {
  const mark = office.isDemonstration ? 'DEMONSTRATION ' : ''
  const text = [
    `${who} was alone on watch, and no second person consented.`,
    '',
    `Urgent limit ${done}: ${title}.`,
    `Reason of the change: ${reason}`,
    `Why alone: ${aloneReason}`,
    `Done ${dateUtc(now)}, ${clockUtc(now)} UTC.`,
    '',
    'It holds as it was done. The watch log and the history of the limit keep it; nothing is asked of you by this e-mail.',
  ].join('\n')
  const row = { alertId: null, bulletinId: null, rootMessageId: null, step: null, html: null, content: null }
  const message = await Message.create(
    { ...row, kind: 'alone', subject: (mark + subject).slice(0, 200), text, isExercise: false, createdAt: new Date(now), queuedAt: null }, // prettier-ignore
    { transaction },
  )
  changed.messages.set(message.id, null)
}
