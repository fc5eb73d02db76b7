/** What stands in the form for a second person, and what of it is sent. Pure. */
import type { SecondPerson } from '../../../shared/schemas/consent.ts'

export interface ConsentForm {
  isAlone: boolean
  email: string
  password: string
  aloneReason: string
}

export interface Consented {
  consent: SecondPerson | null
  aloneReason: string | null
}

export const nobodyAsked: Consented = { consent: null, aloneReason: null }

/** Enough to be sent; whether it holds, the server says. */
export const isConsentGiven = ({ isAlone, email, password, aloneReason }: ConsentForm): boolean =>
  isAlone ? aloneReason.trim().length >= 10 : email.trim() !== '' && password !== ''

/** One of the two, never both. */
export function consentOf(form: ConsentForm): Consented {
  if (!isConsentGiven(form)) return nobodyAsked
  if (form.isAlone) return { consent: null, aloneReason: form.aloneReason.trim() }
  return { consent: { email: form.email.trim(), password: form.password }, aloneReason: null }
}
