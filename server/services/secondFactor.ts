/** The second factor of an account: offered, put in force by a code of it, asked for at sign-in, taken back. */
import { generateSecret, generateURI } from 'otplib'
import QRCode from 'qrcode'
import type { Transaction } from 'sequelize'
import type { SecondFactorOffer, SecondFactorView } from '../../shared/schemas/secondFactor.ts'
import type { Parts } from '../config/parts.ts'
import { Person } from '../models/index.ts'
import { recordAudit } from './audit.ts'
import { passwordFits } from './passwords.ts'
import { invalidInput, notFound, Refused } from './problems.ts'
import {
  countRecoveryCodes,
  forgetRecoveryCodes,
  issueRecoveryCodes,
  useRecoveryCode,
} from './secondFactor/recoveryCodes.ts'
import { administratorsNeedSecondFactor } from './secondFactor/rule.ts'
import { seal, unseal } from './secondFactor/secretBox.ts'
import { stepOfCode } from './secondFactor/timedCode.ts'
import { inTransaction } from './transaction.ts'

export { administratorsNeedSecondFactor } from './secondFactor/rule.ts'

async function lockPerson(personId: number, transaction: Transaction): Promise<Person> {
  const person = await Person.findByPk(personId, { lock: true, transaction })
  if (!person) throw notFound('person', personId)
  return person
}

export async function readSecondFactor(parts: Parts, personId: number): Promise<SecondFactorView> {
  const person = await Person.findByPk(personId)
  if (!person) throw notFound('person', personId)
  return {
    isEnrolled: person.totpSince !== null,
    since: person.totpSince?.toISOString() ?? null,
    recoveryCodesLeft: await countRecoveryCodes(personId),
    isRequired: person.role === 'admin' && (await administratorsNeedSecondFactor(parts)),
  }
}

/** A new secret; the passphrase is asked, so that an unattended screen gives nobody a factor of their own. */
export async function offerSecondFactor(
  parts: Parts,
  personId: number,
  password: string,
  portName: string,
): Promise<SecondFactorOffer> {
  await provePassphrase(parts, personId, password)
  const secret = generateSecret()
  const email = await inTransaction(parts.sequelize, async (transaction) => {
    const person = await lockPerson(personId, transaction)
    if (person.totpSince) throw alreadyEnrolled()
    const totpSecret = seal(parts.environment.jwtSecret, personId, secret)
    await person.update({ totpSecret, totpLastStep: null }, { transaction })
    return person.email ?? person.name
  })
  const uri = generateURI({ issuer: `Offing ${portName}`.replaceAll(':', ' '), label: email, secret })
  return { secret, uri, ...drawn(uri) }
}

function drawn(uri: string): { size: number; path: string } {
  const { modules } = QRCode.create(uri, { errorCorrectionLevel: 'M' })
  const { size } = modules
  const dark = [...modules.data].flatMap((isDark, index) =>
    isDark ? [`M${index % size} ${Math.floor(index / size)}h1v1h-1z`] : [],
  )
  return { size, path: dark.join('') }
}

/** Puts the offered secret in force; the answer is shown once. */
export async function confirmSecondFactor(parts: Parts, personId: number, code: string): Promise<string[]> {
  const codes = await inTransaction(parts.sequelize, async (transaction) => {
    const person = await lockPerson(personId, transaction)
    if (person.totpSince) throw alreadyEnrolled()
    const secret = person.totpSecret && unseal(parts.environment.jwtSecret, personId, person.totpSecret)
    if (!secret) throw invalidInput([{ path: 'code', message: 'belongs to no offered code picture: begin again' }])
    const step = stepOfCode(secret, code, parts.clock.now(), null)
    if (step === null) throw doesNotFit()
    const now = parts.clock.now()
    await person.update({ totpSince: now, totpLastStep: step }, { transaction })
    await auditOf(parts, personId, personId, 'secondFactor.enrol', transaction)
    return issueRecoveryCodes(parts, personId, transaction)
  })
  parts.bus.publish('person.changed', { personId })
  return codes
}

export async function renewRecoveryCodes(parts: Parts, personId: number, code: string): Promise<string[]> {
  return inTransaction(parts.sequelize, async (transaction) => {
    if (!(await takeCode(parts, personId, code, transaction))) throw doesNotFit()
    await auditOf(parts, personId, personId, 'secondFactor.renewRecoveryCodes', transaction)
    return issueRecoveryCodes(parts, personId, transaction)
  })
}

/** By the person, with a code; not while the office asks for one. */
export async function removeSecondFactor(parts: Parts, personId: number, code: string): Promise<void> {
  if ((await readSecondFactor(parts, personId)).isRequired) throw isRequired()
  await inTransaction(parts.sequelize, async (transaction) => {
    if (!(await takeCode(parts, personId, code, transaction))) throw doesNotFit()
    await forget(parts, personId, personId, 'secondFactor.remove', transaction)
  })
  parts.bus.publish('person.changed', { personId })
}

/** By another administrator, for somebody who lost telephone and paper. */
export async function resetSecondFactor(parts: Parts, personId: number, byPersonId: number): Promise<void> {
  if (personId === byPersonId) throw notByOneself()
  await inTransaction(parts.sequelize, (transaction) =>
    forget(parts, personId, byPersonId, 'secondFactor.reset', transaction),
  )
  parts.bus.publish('person.changed', { personId })
}

async function forget(
  parts: Parts,
  personId: number,
  byPersonId: number,
  action: string,
  transaction: Transaction,
): Promise<void> {
  const person = await lockPerson(personId, transaction)
  await person.update({ totpSecret: null, totpSince: null, totpLastStep: null }, { transaction })
  await forgetRecoveryCodes(personId, transaction)
  await auditOf(parts, personId, byPersonId, action, transaction)
}

/** True where the code opens the door, and then never again: steps of the clock and recovery codes count once. */
export async function takeCode(
  parts: Parts,
  personId: number,
  code: string,
  transaction: Transaction,
): Promise<boolean> {
  const person = await lockPerson(personId, transaction)
  if (!person.totpSince || !person.totpSecret) return false
  const bare = code.replace(/[\s-]/g, '').toLowerCase()
  if (!/^\d{6}$/.test(bare)) {
    if (!(await useRecoveryCode(parts, personId, bare, transaction))) return false
    await auditOf(parts, personId, personId, 'secondFactor.useRecoveryCode', transaction)
    return true
  }
  const secret = unseal(parts.environment.jwtSecret, personId, person.totpSecret)
  const step = secret === null ? null : stepOfCode(secret, bare, parts.clock.now(), person.totpLastStep)
  if (step === null) return false
  await person.update({ totpLastStep: step }, { transaction })
  return true
}

/** Throws where it is not the person's own. */
export async function provePassphrase(parts: Parts, personId: number, password: string): Promise<void> {
  const person = await Person.findByPk(personId)
  if (!(await passwordFits(password, person?.passwordHash ?? null, parts.environment.bcryptCost))) {
    throw invalidInput([{ path: 'password', message: 'is not your passphrase' }])
  }
}

const auditOf = (
  parts: Parts,
  personId: number,
  byPersonId: number,
  action: string,
  transaction: Transaction,
): Promise<void> =>
  recordAudit(parts, { action, entity: 'person', entityId: personId, personId: byPersonId }, transaction)

const doesNotFit = (): Refused =>
  invalidInput([
    { path: 'code', message: 'does not fit; wait for the next one and look at the clock of the telephone' },
  ])

const alreadyEnrolled = (): Refused =>
  new Refused({
    status: 409,
    code: 'secondFactor.alreadyEnrolled',
    title: 'Already set up',
    detail: 'This account has a second factor. Remove it first to set up another.',
  })

const isRequired = (): Refused =>
  new Refused({
    status: 409,
    code: 'secondFactor.required',
    title: 'It is required',
    detail: 'Administrators of this installation need a second factor. Another administrator can reset yours.',
  })

const notByOneself = (): Refused =>
  new Refused({
    status: 409,
    code: 'secondFactor.notByOneself',
    title: 'Not by yourself',
    detail: 'Another administrator resets a second factor. Your own is removed under My settings, with a code of it.',
  })
