/**
 * The fingerprint of a result: same readings, settings, software and kind of machine give the same one. The keys of
 * wave systems are left out, for they depend on the windows around.
 */
import { createHash } from 'node:crypto'
import type { EstimateResult } from '../../shared/schemas/estimate.ts'

/** JSON with the names of every object in alphabetical order. */
export function canonicalJson(value: unknown): string {
  return JSON.stringify(value, (_, part: unknown) =>
    part !== null && typeof part === 'object' && !Array.isArray(part)
      ? Object.fromEntries(Object.entries(part).sort(([a], [b]) => (a < b ? -1 : 1)))
      : part,
  )
}

/** SHA-256, hexadecimal. */
export function resultDigest(result: EstimateResult): string {
  const systems = result.systems.map((system) => ({ ...system, key: 0 }))
  return createHash('sha256')
    .update(canonicalJson({ ...result, systems }))
    .digest('hex')
}
