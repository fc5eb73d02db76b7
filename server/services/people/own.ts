/** What people change of their own account: how their screens look, and their passphrase. */
import { preferences, usualPreferences } from '../../../shared/schemas/preferences.ts'
import type { Preferences, PreferencesChange } from '../../../shared/schemas/preferences.ts'
import type { PassphraseChange } from '../../../shared/schemas/account.ts'
import type { Parts } from '../../config/parts.ts'
import { Person, Session } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { faultOfPassword, hashPassword, passwordFits } from '../passwords.ts'
import { invalidInput, notFound } from '../problems.ts'
import { inTransaction } from '../transaction.ts'

/** Each choice stands by itself, so two screens of one person do not undo each other. */
export async function changePreferences(
  parts: Parts,
  personId: number,
  change: PreferencesChange,
): Promise<Preferences> {
  if (change.besideUtc && !isZone(change.besideUtc)) {
    throw invalidInput([{ path: 'besideUtc', message: 'is not a zone of the IANA list, such as Atlantic/Azores' }])
  }
  const after = await inTransaction(parts.sequelize, async (transaction) => {
    const person = await Person.findByPk(personId, { lock: true, transaction })
    if (!person) throw notFound('person', personId)
    const before = preferences.catch(usualPreferences).parse(person.preferences ?? {})
    const next = preferences.parse({ ...before, ...change })
    if (JSON.stringify(next) === JSON.stringify(before)) return next
    await person.update({ preferences: next, updatedAt: parts.clock.now() }, { transaction })
    const audited = { action: 'profile.changePreferences', entity: 'person', entityId: personId, before, after: next }
    await recordAudit(parts, { ...audited, personId }, transaction)
    return next
  })
  return after
}

function isZone(timeZone: string): boolean {
  try {
    new Intl.DateTimeFormat('en-GB', { timeZone })
    return true
  } catch {
    return false
  }
}

/** Everywhere else the person is signed out. */
export async function changePassphrase(
  parts: Parts,
  personId: number,
  { current, next }: PassphraseChange,
  thisSessionId: string,
): Promise<void> {
  const person = await Person.findByPk(personId)
  if (!person) throw notFound('person', personId)
  if (!(await passwordFits(current, person.passwordHash, parts.environment.bcryptCost))) {
    throw invalidInput([{ path: 'current', message: 'is not your passphrase' }])
  }
  const fault = faultOfPassword(next, [person.name, person.email?.split('@').at(0) ?? ''])
  if (fault) throw invalidInput([{ path: 'next', message: fault }])
  const passwordHash = await hashPassword(next, parts.environment.bcryptCost)
  const ended = await inTransaction(parts.sequelize, async (transaction) => {
    const now = parts.clock.now()
    await Person.update({ passwordHash, updatedAt: now }, { where: { id: personId }, transaction })
    const change = { action: 'profile.changePassphrase', entity: 'person', entityId: personId }
    await recordAudit(parts, { ...change, personId }, transaction)
    const sessions = (await Session.findAll({ where: { personId, endedAt: null }, transaction })).filter(
      ({ id }) => id !== thisSessionId,
    )
    const ids = sessions.map(({ id }) => id)
    await Session.update({ endedAt: now, endReason: 'new passphrase' }, { where: { id: ids }, transaction })
    return ids
  })
  for (const sessionId of ended) parts.bus.publish('session.ended', { sessionId })
}
