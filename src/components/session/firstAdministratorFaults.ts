/** What is wrong with the details of the first administrator, field by field, in words. */
import { longestPasswordBytes, setUpRequest, shortestPassword } from '../../../shared/schemas/session.ts'
import type { SetUpRequest } from '../../../shared/schemas/session.ts'

export type FirstAdministratorFaults = Partial<Record<keyof SetUpRequest, string>>

const words: Record<keyof SetUpRequest, string> = {
  token: 'Copy the whole token from the server’s first lines.',
  name: 'Write the name that others will see, at most 80 characters.',
  email: 'Write a whole e-mail address.',
  password: `Use at least ${shortestPassword} characters.`,
}

export function firstAdministratorFaults(details: SetUpRequest): FirstAdministratorFaults {
  const faults: FirstAdministratorFaults = {}
  const parsed = setUpRequest.safeParse(details)
  for (const issue of parsed.error?.issues ?? []) {
    const field = issue.path[0]
    if (field === 'token' || field === 'name' || field === 'email' || field === 'password') faults[field] = words[field]
  }
  if (new TextEncoder().encode(details.password).length > longestPasswordBytes) {
    faults.password = `Use at most ${longestPasswordBytes} bytes: ${longestPasswordBytes} plain letters, fewer with accents.`
  }
  return faults
}
