/** The cookie that carries the session's token; over https its name binds it to this host and to Secure. */
import type { Environment } from './environment.ts'

const isSecure = ({ publicUrl }: Environment): boolean => publicUrl.startsWith('https:')

export const sessionCookieName = (environment: Environment): string =>
  isSecure(environment) ? '__Host-offing_session' : 'offing_session'

/** Lax, so that a link in an e-mail opens signed in. Without an age it ends with the browser. */
export const sessionCookieOptions = (environment: Environment) => ({
  httpOnly: true,
  sameSite: 'lax' as const,
  secure: isSecure(environment),
  path: '/',
})

/** The token out of a `Cookie` header, for a socket before its upgrade. */
export function tokenOfCookieHeader(environment: Environment, header: string | undefined): string | null {
  const name = sessionCookieName(environment)
  for (const pair of (header ?? '').split(';')) {
    const [key, ...rest] = pair.trim().split('=')
    if (key === name) return rest.join('=')
  }
  return null
}
