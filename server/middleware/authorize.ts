import { changes, may } from '../../shared/access.ts'
import type { Action } from '../../shared/access.ts'
import { isReadOnly, needsSecondFactor, notAllowed, notSignedIn } from '../services/problems.ts'
import type { Caller } from '../services/sessions.ts'

/** What is left to somebody whose second factor is still to be set up. */
const beforeEnrolling: Action[] = ['session.read', 'secondFactor.read', 'secondFactor.change']

/** Throws the refusal where this visitor may not do this now. */
export function authorize(visitor: Caller | null, action: Action): void {
  if (!may(visitor?.person.role ?? null, action)) throw visitor ? notAllowed() : notSignedIn()
  if (visitor?.mustEnrol && !may(null, action) && !beforeEnrolling.includes(action)) throw needsSecondFactor()
  // What anybody may do does not ask who is signed in: a link in an e-mail speaks for itself.
  if (visitor?.readOnly && changes(action) && !may(null, action)) throw isReadOnly()
}
