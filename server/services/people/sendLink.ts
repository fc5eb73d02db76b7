/** E-mails that let somebody choose a passphrase: an invitation, or a reset for who has chosen one before. */
import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import { english, filled } from '../../../shared/catalogue/english.ts'
import { clockLocal, clockUtc, dateUtc } from '../../../shared/times.ts'
import type { Parts } from '../../config/parts.ts'
import { LinkToken } from '../../models/index.ts'
import type { Person } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { writeMessage } from '../messages.ts'
import { hashOfLink, signLink } from './linkToken.ts'

export interface PortWords {
  portName: string
  timeZone: string
}

const hour = 3_600_000
const livesMilliseconds = { invitation: 7 * 24 * hour, reset: 2 * hour }
export const linkKinds: ('invitation' | 'reset')[] = ['invitation', 'reset']

/** Links sent before are worth nothing from now on. Answers the message. */
export async function writeLinkMail(
  parts: Parts,
  person: Person,
  by: { id: number; name: string } | null,
  port: PortWords,
  transaction: Transaction,
): Promise<number> {
  if (person.email === null) throw new Error(`person ${person.id} has no address`)
  const kind = person.passwordHash ? ('reset' as const) : ('invitation' as const)
  const now = parts.clock.now()
  // Whole seconds, as the link itself counts.
  const expiresAt = new Date(Math.floor((now.getTime() + livesMilliseconds[kind]) / 1000) * 1000)
  const words = english.mail[kind]
  const values = {
    port: port.portName,
    by: by?.name ?? english.mail.somebody,
    role: person.role ? english.roles[person.role] : '',
    until: `${dateUtc(expiresAt.getTime())} ${clockUtc(expiresAt.getTime())} UTC (${clockLocal(expiresAt.getTime(), port.timeZone)} local)`,
  }
  const mark = parts.environment.installationKind === 'demonstration' ? 'DEMONSTRATION ' : ''
  const subject = `${mark}${filled(words.subject, values)}`
  const text = [...words.text, words.after].map((line) => filled(line, values)).join('\n')
  await LinkToken.update(
    { expiresAt: now },
    { where: { personId: person.id, kind: linkKinds, usedAt: null, expiresAt: { [Op.gt]: now } }, transaction },
  )
  const to = [{ personId: person.id, address: person.email }]
  const { id: messageId } = await writeMessage(parts, { kind, subject, text }, transaction, to)
  const tokenHash = hashOfLink(signLink(parts.environment.jwtSecret, { messageId, expiresAt }))
  const row = { tokenHash, kind, personId: person.id, subjectId: messageId, createdAt: now, expiresAt }
  await LinkToken.create(row, { transaction })
  const change = { action: kind === 'reset' ? 'person.sendReset' : 'person.invite', entity: 'person' }
  const after = { email: person.email, linkUntil: expiresAt.toISOString() }
  await recordAudit(parts, { ...change, entityId: person.id, personId: by?.id ?? null, after }, transaction)
  return messageId
}

/** The link of such an e-mail, made again when it goes out; null for any other e-mail. */
export async function linkOfMessage(
  { environment }: Pick<Parts, 'environment'>,
  message: { id: number; kind: string },
  transaction: Transaction,
): Promise<{ path: string; words: string } | null> {
  if (message.kind !== 'invitation' && message.kind !== 'reset') return null
  const row = await LinkToken.findOne({ where: { kind: message.kind, subjectId: message.id }, transaction })
  if (!row) return null
  const token = signLink(environment.jwtSecret, { messageId: message.id, expiresAt: row.expiresAt })
  return { path: `/welcome/${token}`, words: english.mail[message.kind].button }
}
