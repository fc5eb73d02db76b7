/** Signing in and out, and who a token belongs to. */
import { randomBytes } from 'node:crypto'
import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import { preferences, usualPreferences } from '../../shared/schemas/preferences.ts'
import type { Preferences } from '../../shared/schemas/preferences.ts'
import type { Role, SessionView, SignInRequest, Team } from '../../shared/schemas/session.ts'
import type { Parts } from '../config/parts.ts'
import { Person, Session } from '../models/index.ts'
import { recordAudit } from './audit.ts'
import { passwordFits } from './passwords.ts'
import { Refused } from './problems.ts'
import { administratorsNeedSecondFactor, takeCode } from './secondFactor.ts'
import { absoluteMilliseconds, idleMilliseconds } from './sessions/limits.ts'
import { readToken, signToken } from './sessions/token.ts'
import type { SignInThrottle } from './sessions/signInThrottle.ts'
import { inTransaction } from './transaction.ts'

/** `lastSeenAt` is written no more often than this. */
const touchMilliseconds = 60_000

/** A person with a session that is in force now. */
export interface Caller {
  person: { id: number; name: string; email: string; role: Role; team: Team | null; timeZone: string }
  preferences: Preferences
  sessionId: string
  /** The office asks for a second factor that this account does not have: nothing but setting it up is allowed. */
  mustEnrol: boolean
  /** Past the absolute limit: may look at everything and change nothing until signing in again. */
  readOnly: boolean
  absoluteUntil: Date
}

export interface SignedIn {
  token: string
  caller: Caller
}

const randomId = (): string => randomBytes(32).toString('base64url')
export const accountName = (typed: string): string => typed.trim().toLowerCase()

/** Checks the password and begins a session, or renews the one that the same person has in this browser. */
export async function signIn(
  parts: Parts,
  throttle: SignInThrottle,
  { email, password, code }: SignInRequest,
  from: { address: string; visitor: Caller | null; device: string | null },
): Promise<SignedIn> {
  const account = accountName(email)
  const wait = throttle.begin(account, from.address)
  if (wait > 0) throw tooManyTries(wait)
  const person = await findAccount(account)
  const fits = await passwordFits(password, person?.passwordHash ?? null, parts.environment.bcryptCost)
  if (!person || !fits || person.disabledAt || !person.role) {
    parts.logger.warn({ personId: person?.id ?? null, address: from.address }, 'sign-in refused')
    throw wrongPassword()
  }
  const asksCode = person.totpSince !== null
  if (asksCode && !code) {
    throttle.uncount(account, from.address)
    throw codeNeeded()
  }
  const session = await inTransaction(parts.sequelize, async (transaction) =>
    asksCode && !(await takeCode(parts, person.id, code ?? '', transaction))
      ? null
      : beginOrRenew(parts, person, from, transaction),
  )
  if (!session) {
    parts.logger.warn({ personId: person.id, address: from.address }, 'sign-in refused: the code does not fit')
    throw wrongCode()
  }
  throttle.succeeded(account, from.address)
  if (from.visitor && from.visitor.sessionId !== session.id) {
    await endSession(parts, from.visitor.sessionId, 'another person')
  }
  parts.logger.info({ personId: person.id, address: from.address }, 'signed in')
  const { id: sessionId, tokenId } = session
  return {
    token: signToken(parts.environment.jwtSecret, parts.clock, { personId: person.id, sessionId, tokenId }),
    caller: await callerOf(parts, person, session),
  }
}

/** By e-mail, or by the name shown beside the account where only one person who may sign in bears it. */
export async function findAccount(account: string): Promise<Person | null> {
  const byEmail = await Person.findOne({ where: { email: account } })
  if (byEmail) return byEmail
  const byName = await Person.findAll({ where: { name: account, role: { [Op.not]: null } }, limit: 2 })
  return byName.length === 1 ? (byName[0] ?? null) : null
}

/** A renewed session keeps its row, so that its live feed goes on; the older token ends either way. */
async function beginOrRenew(
  parts: Parts,
  person: Person,
  { visitor, device }: { visitor: Caller | null; device: string | null },
  transaction: Transaction,
): Promise<Session> {
  const now = parts.clock.now()
  const absoluteUntil = new Date(now.getTime() + absoluteMilliseconds)
  const fresh = { tokenId: randomId(), lastSeenAt: now, absoluteUntil, device }
  const renewed =
    visitor?.person.id === person.id
      ? await Session.findOne({ where: { id: visitor.sessionId, endedAt: null }, lock: true, transaction })
      : null
  const session = renewed
    ? await renewed.update(fresh, { transaction })
    : await Session.create(
        { ...fresh, id: randomId(), personId: person.id, kind: 'browser', createdAt: now },
        { transaction },
      )
  const change = { personId: person.id, entity: 'person', entityId: person.id }
  await recordAudit(parts, { ...change, action: renewed ? 'session.renew' : 'session.begin' }, transaction)
  return session
}

/** Who the token belongs to; null where it, its session or its person is no longer in force. */
export async function identify(parts: Parts, token: string): Promise<Caller | null> {
  const claims = readToken(parts.environment.jwtSecret, parts.clock, token)
  if (!claims) return null
  const session = await Session.findByPk(claims.sessionId)
  if (!session || session.tokenId !== claims.tokenId || session.personId !== claims.personId) return null
  return inForce(parts, session)
}

/** The same for a socket that was let in before: asked at every heartbeat and when the bus says that something changed. */
export async function callerOfSession(parts: Parts, sessionId: string): Promise<Caller | null> {
  const session = await Session.findByPk(sessionId)
  return session && inForce(parts, session)
}

/** Being asked is being seen: requests and the live feed's heartbeats keep a session from standing idle. */
async function inForce(parts: Parts, session: Session): Promise<Caller | null> {
  if (session.endedAt) return null
  const now = parts.clock.now()
  const unseen = now.getTime() - session.lastSeenAt.getTime()
  if (unseen > idleMilliseconds) {
    await endSession(parts, session.id, 'idle')
    return null
  }
  const person = await Person.findByPk(session.personId)
  if (!person?.role || person.disabledAt) return null
  if (unseen > touchMilliseconds) await Session.update({ lastSeenAt: now }, { where: { id: session.id } })
  return callerOf(parts, person, session)
}

async function callerOf(parts: Parts, person: Person, session: Session): Promise<Caller> {
  const { id, name, email, role, team, timeZone } = person
  if (!role) throw new Error(`person ${id} has no role`)
  return {
    person: { id, name, email: email ?? '', role, team, timeZone },
    preferences: preferences.catch(usualPreferences).parse(person.preferences ?? {}),
    sessionId: session.id,
    mustEnrol: role === 'admin' && !person.totpSince && (await administratorsNeedSecondFactor(parts)),
    readOnly: session.absoluteUntil <= parts.clock.now(),
    absoluteUntil: session.absoluteUntil,
  }
}

type EndReason = 'signed out' | 'idle' | 'another person'

/** Ends it at once, on open sockets too. Ending an ended session changes nothing. */
export async function endSession(parts: Parts, sessionId: string, reason: EndReason): Promise<void> {
  const ended = await inTransaction(parts.sequelize, async (transaction) => {
    const session = await Session.findByPk(sessionId, { lock: true, transaction })
    if (!session || session.endedAt) return false
    await session.update({ endedAt: parts.clock.now(), endReason: reason }, { transaction })
    const { personId } = session
    await recordAudit(
      parts,
      { personId, action: 'session.end', entity: 'person', entityId: personId, after: { reason } },
      transaction,
    )
    return true
  })
  if (ended) parts.bus.publish('session.ended', { sessionId })
}

/** Sessions that nobody used for so long are of no more use to anybody. */
const keptMilliseconds = 90 * 24 * 3600_000

export function forgetOldSessions({ clock }: Pick<Parts, 'clock'>): Promise<number> {
  return Session.destroy({ where: { lastSeenAt: { [Op.lt]: new Date(clock.now().getTime() - keptMilliseconds) } } })
}

export function presentSession(parts: Parts, caller: Caller): SessionView {
  const { person, readOnly, absoluteUntil, mustEnrol } = caller
  return {
    person,
    preferences: caller.preferences,
    mustEnrol,
    readOnly,
    absoluteUntil: absoluteUntil.toISOString(),
    serverTime: parts.clock.now().toISOString(),
  }
}

const wrongPassword = (): Refused =>
  new Refused({
    status: 401,
    code: 'session.wrongPassword',
    title: 'Not signed in',
    detail: 'E-mail or password do not fit an account.',
  })

export const codeNeeded = (): Refused =>
  new Refused({
    status: 401,
    code: 'session.codeNeeded',
    title: 'A code is needed',
    detail: 'This account has a second factor: give the code that your telephone shows, or a recovery code.',
  })

const wrongCode = (): Refused =>
  new Refused({
    status: 401,
    code: 'session.wrongCode',
    title: 'Not signed in',
    detail: 'The code does not fit, or was used before. Wait for the next one.',
  })

export const tooManyTries = (seconds: number): Refused =>
  new Refused({
    status: 429,
    code: 'session.tooManyTries',
    title: 'Too many tries',
    detail: `Wait ${Math.ceil(seconds)} s before the next try. Other people and other desks are not held up.`,
    retryAfterSeconds: seconds,
  })
