/** Does the key open a connection now? Pure. */
export const isValidKey = (key: { revokedAt: string | null; validUntil: string | null }, nowMs: number): boolean =>
  key.revokedAt === null && (key.validUntil === null || Date.parse(key.validUntil) > nowMs)
