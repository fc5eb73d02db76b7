/**
 * A second factor's secret as the database keeps it: sealed (AES-256-GCM) with a key of the installation's own secret,
 * so that a copy of the database alone gives no codes. With another secret it cannot be opened, and the factor has to be
 * set up again.
 */
import { createCipheriv, createDecipheriv, hkdfSync, randomBytes } from 'node:crypto'

const ivBytes = 12
const tagBytes = 16

const keyOf = (installationSecret: string): Buffer =>
  Buffer.from(hkdfSync('sha256', installationSecret, '', 'offing.secondFactor.1', 32))

/** `owner` is bound in: a sealed secret moved to another person does not open. */
export function seal(installationSecret: string, owner: number, secret: string): string {
  const iv = randomBytes(ivBytes)
  const cipher = createCipheriv('aes-256-gcm', keyOf(installationSecret), iv).setAAD(Buffer.from(String(owner)))
  const sealed = Buffer.concat([cipher.update(secret, 'utf8'), cipher.final()])
  return Buffer.concat([iv, cipher.getAuthTag(), sealed]).toString('base64url')
}

/** Null where it was sealed with another secret, for another person, or altered. */
export function unseal(installationSecret: string, owner: number, text: string): string | null {
  const bytes = Buffer.from(text, 'base64url')
  try {
    const decipher = createDecipheriv('aes-256-gcm', keyOf(installationSecret), bytes.subarray(0, ivBytes))
    decipher.setAAD(Buffer.from(String(owner))).setAuthTag(bytes.subarray(ivBytes, ivBytes + tagBytes))
    return Buffer.concat([decipher.update(bytes.subarray(ivBytes + tagBytes)), decipher.final()]).toString('utf8')
  } catch {
    return null
  }
}
