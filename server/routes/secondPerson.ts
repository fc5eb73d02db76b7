import type { Request } from 'express'
import type { SecondPerson } from '../../shared/schemas/consent.ts'
import type { Parts } from '../config/parts.ts'
import type { Consent } from '../services/alerts.ts'
import type { Caller } from '../services/sessions.ts'
import { proveSecondPerson } from '../services/sessions/secondPerson.ts'

/** Checking a passphrase is slow on purpose, and one waits for the other. */
export const consentDeadline = 20_000

interface Given {
  consent: SecondPerson | null
  aloneReason: string | null
}

/** Whose consent the body brings: proven before anything is changed, so that no row is locked meanwhile. */
export async function consentIn(
  parts: Parts,
  { consent, aloneReason }: Given,
  caller: Caller,
  request: Request,
): Promise<Consent> {
  if (consent === null) return { consentById: null, aloneReason }
  const from = { address: request.ip ?? 'unknown', byPersonId: caller.person.id }
  return { consentById: await proveSecondPerson(parts, consent, from), aloneReason: null }
}
