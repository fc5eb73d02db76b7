/** Behind the link of an invitation or a reset: looking changes nothing, choosing a passphrase uses the link up. */
import type { Transaction } from 'sequelize'
import type { PassphraseLinkView } from '../../../shared/schemas/account.ts'
import type { Parts } from '../../config/parts.ts'
import { LinkToken, Person, Session } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { faultOfPassword, hashPassword } from '../passwords.ts'
import { invalidInput, notFound, Refused } from '../problems.ts'
import { inTransaction } from '../transaction.ts'
import { hashOfLink, isSignedLink } from './linkToken.ts'
import { linkKinds, writeLinkMail } from './sendLink.ts'
import type { PortWords } from './sendLink.ts'

export async function showPassphraseLink(parts: Parts, token: string, portName: string): Promise<PassphraseLinkView> {
  const { row, person } = await linkOf(parts, token)
  return {
    kind: row.kind === 'reset' ? 'reset' : 'invitation',
    name: person.name,
    email: person.email ?? '',
    portName,
    isDemonstration: parts.environment.installationKind === 'demonstration',
    expiresAt: row.expiresAt.toISOString(),
    state: row.usedAt ? 'used' : isOver(parts, row, person) ? 'ended' : 'open',
  }
}

/** Whoever was signed in as this person is signed out. */
export async function choosePassphrase(parts: Parts, token: string, password: string): Promise<void> {
  const { row, person } = await linkOf(parts, token)
  if (row.usedAt || isOver(parts, row, person)) throw linkEnded()
  const fault = faultOfPassword(password, [person.name, person.email?.split('@').at(0) ?? ''])
  if (fault) throw invalidInput([{ path: 'password', message: fault }])
  const passwordHash = await hashPassword(password, parts.environment.bcryptCost)
  const ended = await inTransaction(parts.sequelize, async (transaction) => {
    const link = await linkOf(parts, token, transaction)
    if (link.row.usedAt || isOver(parts, link.row, link.person)) throw linkEnded()
    const now = parts.clock.now()
    await link.row.update({ usedAt: now }, { transaction })
    await link.person.update({ passwordHash, updatedAt: now }, { transaction })
    const change = { action: 'person.choosePassphrase', entity: 'person', entityId: person.id }
    await recordAudit(parts, { ...change, personId: person.id, after: { by: row.kind } }, transaction)
    const where = { personId: person.id, endedAt: null }
    const sessions = await Session.findAll({ where, transaction })
    await Session.update({ endedAt: now, endReason: 'new passphrase' }, { where, transaction })
    return sessions.map(({ id }) => id)
  })
  for (const sessionId of ended) parts.bus.publish('session.ended', { sessionId })
}

const mostLinksAnHour = 3

/** Nothing that is answered tells whether the address is known; a few links an hour for each person. */
export async function askForReset(parts: Parts, email: string, port: PortWords): Promise<void> {
  const known = await Person.findOne({ where: { email: email.trim().toLowerCase() } })
  if (!known?.role || known.disabledAt || known.email === null) return
  const messageId = await inTransaction(parts.sequelize, async (transaction) => {
    const person = await Person.findByPk(known.id, { lock: true, transaction })
    if (!person) return null
    const since = new Date(parts.clock.now().getTime() - 3_600_000)
    const rows = await LinkToken.findAll({ where: { personId: person.id, kind: linkKinds }, transaction })
    if (rows.filter(({ createdAt }) => createdAt > since).length >= mostLinksAnHour) return null
    return writeLinkMail(parts, person, null, port, transaction)
  })
  if (messageId !== null) parts.bus.publish('message.changed', { messageId, alertId: null })
}

const isOver = ({ clock }: Parts, row: LinkToken, person: Person): boolean =>
  row.expiresAt <= clock.now() || person.disabledAt !== null || person.role === null

async function linkOf(parts: Parts, token: string, transaction?: Transaction) {
  if (!isSignedLink(parts.environment.jwtSecret, token)) throw unknownLink()
  const where = { tokenHash: hashOfLink(token), kind: linkKinds }
  const within = transaction ? { transaction, lock: true as const } : {}
  const row = await LinkToken.findOne({ where, ...within })
  const person = row?.personId ? await Person.findByPk(row.personId, within) : null
  if (!row || !person) throw unknownLink()
  return { row, person }
}

const unknownLink = (): Refused => notFound('passphraseLink', 'behind this address')

const linkEnded = (): Refused =>
  new Refused({
    status: 410,
    code: 'passphraseLink.ended',
    title: 'The link has ended',
    detail: 'It was used, is too old, or a newer one was sent. Nothing was changed. Ask for a new link.',
  })
