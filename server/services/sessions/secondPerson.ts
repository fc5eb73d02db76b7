/** A second operator at the same desk proves who they are: asked and slowed down as at signing in, signed in nowhere. */
import type { SecondPerson } from '../../../shared/schemas/consent.ts'
import type { Parts } from '../../config/parts.ts'
import { passwordFits } from '../passwords.ts'
import { invalidInput } from '../problems.ts'
import { accountName, findAccount, tooManyTries } from '../sessions.ts'
import { throttleOf } from './signInThrottle.ts'

/** Answers whose word it is; `field` names the part of the form that faults belong to. A wrong passphrase counts against that account as a wrong sign-in does. */
export async function proveSecondPerson(
  parts: Parts,
  { email, password }: SecondPerson,
  from: { address: string; byPersonId: number },
  field = 'consent',
): Promise<number> {
  const throttle = throttleOf(parts)
  const account = accountName(email)
  const wait = throttle.begin(account, from.address)
  if (wait > 0) throw tooManyTries(wait)
  const person = await findAccount(account)
  const fits = await passwordFits(password, person?.passwordHash ?? null, parts.environment.bcryptCost)
  if (!person || !fits || person.disabledAt) {
    parts.logger.warn({ personId: person?.id ?? null, ...from }, 'consent of a second person refused')
    throw invalidInput([{ path: `${field}.password`, message: 'does not fit this name or e-mail' }])
  }
  throttle.succeeded(account, from.address)
  if (person.role !== 'operator' || person.id === from.byPersonId) {
    throw invalidInput([{ path: `${field}.email`, message: 'must be another operator' }])
  }
  return person.id
}
