/** A secret for signing: long, and not made of a few repeated characters or of a word that stands in examples. */
const placeholders = /secret|change|example|password|default|offing/i

export function isWeakSecret(secret: string): boolean {
  if (secret.length < 32 || new Set(secret).size < 10) return true
  return placeholders.test(secret) && !/[0-9a-f]{32}|[A-Za-z0-9+/_-]{43}/.test(secret.replace(placeholders, ''))
}
