/** Codes of six digits by the clock (RFC 6238: SHA-1, 30 s), which is what authenticator programs of telephones make. */
import { generateSync, verifySync } from 'otplib'

export const stepSeconds = 30

export const stepAt = (at: Date): number => Math.floor(at.getTime() / 1000 / stepSeconds)

/**
 * The step whose code this is, one either side of now because no two clocks agree; null where it is none, or where this
 * code or a later one was taken before.
 */
export function stepOfCode(secret: string, code: string, at: Date, lastStep: number | null): number | null {
  if (!/^\d{6}$/.test(code)) return null
  for (const step of [stepAt(at), stepAt(at) - 1, stepAt(at) + 1]) {
    const epoch = step * stepSeconds
    if (!verifySync({ secret, token: code, epoch, period: stepSeconds, digits: 6, algorithm: 'sha1' }).valid) continue
    return lastStep !== null && step <= lastStep ? null : step
  }
  return null
}

/** As the telephone shows it at this moment. */
export const codeAt = (secret: string, at: Date): string =>
  generateSync({ secret, epoch: at.getTime() / 1000, period: stepSeconds, digits: 6, algorithm: 'sha1' })
