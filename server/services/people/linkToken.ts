/**
 * The secret in a link that lets somebody choose a passphrase: it names one e-mail and its end, and is signed, so that it
 * can be made again for every try of that e-mail while the database keeps its hash alone.
 */
import { createHash, createHmac, timingSafeEqual } from 'node:crypto'

const signatureOf = (secret: string, claim: string): Buffer =>
  createHmac('sha256', secret).update(`offing.passphraseLink.1\n${claim}`).digest()

export const hashOfLink = (token: string): Buffer => createHash('sha256').update(token).digest()

export function signLink(secret: string, { messageId, expiresAt }: { messageId: number; expiresAt: Date }): string {
  const claim = `${messageId.toString(36)}.${Math.floor(expiresAt.getTime() / 1000).toString(36)}`
  return `${claim}.${signatureOf(secret, claim).toString('base64url')}`
}

const form = /^([0-9a-z]{1,12}\.[0-9a-z]{1,8})\.([\w-]{43})$/

/** False for anything that this installation has not signed. */
export function isSignedLink(secret: string, token: string): boolean {
  const [, claim, signature] = form.exec(token) ?? []
  if (claim === undefined || signature === undefined) return false
  return timingSafeEqual(signatureOf(secret, claim), Buffer.from(signature, 'base64url'))
}
