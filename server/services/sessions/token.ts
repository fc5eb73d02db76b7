/** The token in the cookie: HS256 and nothing else. It names a session row, which has the last word. */
import jwt from 'jsonwebtoken'
import { z } from 'zod'
import type { Clock } from '../../config/clock.ts'

const issuer = 'offing'
const audience = 'offing.browser'
const type = 'session'

/** Far past the absolute limit: a duty desk goes on reading until it signs in again or stands idle. */
const lifetimeSeconds = 30 * 24 * 3600

const claims = z.object({ sub: z.string().regex(/^\d+$/), sid: z.string(), jti: z.string(), typ: z.literal(type) })

export interface TokenClaims {
  personId: number
  sessionId: string
  tokenId: string
}

const seconds = (clock: Clock): number => Math.floor(clock.now().getTime() / 1000)

export function signToken(secret: string, clock: Clock, { personId, sessionId, tokenId }: TokenClaims): string {
  const now = seconds(clock)
  return jwt.sign({ sid: sessionId, typ: type, iat: now, exp: now + lifetimeSeconds }, secret, {
    algorithm: 'HS256',
    issuer,
    audience,
    subject: String(personId),
    jwtid: tokenId,
  })
}

/** Null for any token that is not ours, altered, of another kind, or past its time. */
export function readToken(secret: string, clock: Clock, token: string): TokenClaims | null {
  try {
    const payload = jwt.verify(token, secret, {
      algorithms: ['HS256'],
      issuer,
      audience,
      clockTimestamp: seconds(clock),
    })
    const { sub, sid, jti } = claims.parse(payload)
    return { personId: Number(sub), sessionId: sid, tokenId: jti }
  } catch {
    return null
  }
}
