import { changes, may } from '../../shared/access.ts'
import type { Action } from '../../shared/access.ts'
import { isReadOnly, notAllowed, notSignedIn } from '../services/problems.ts'
import type { Caller } from '../services/sessions.ts'

/** Throws the refusal where this visitor may not do this now. */
export function authorize(visitor: Caller | null, action: Action): void {
  if (!may(visitor?.person.role ?? null, action)) throw visitor ? notAllowed() : notSignedIn()
  // What anybody may do does not ask who is signed in: a link in an e-mail speaks for itself.
  if (visitor?.readOnly && changes(action) && !may(null, action)) throw isReadOnly()
}
