/**
 * Errors that look as an estimator's do: standard normal, and as windows of twenty minutes overlap, so neighbours
 * share what they have in common. A pure function of a name and a minute.
 */
const windowMinutes = 20

/** 32-bit hash of a name (FNV-1a). */
export function hashName(name: string): number {
  let hash = 0x811c9dc5
  for (let index = 0; index < name.length; index++) hash = Math.imul(hash ^ name.charCodeAt(index), 0x01000193)
  return hash >>> 0
}

/** Mean 0, standard deviation 1; two of them n minutes apart correlate by 1 − n/20. Minutes since 1970. */
export function windowError(seed: number, minute: number): number {
  let sum = 0
  for (let back = 0; back < windowMinutes; back++) sum += uniform(seed, minute - back) - 0.5
  return sum * Math.sqrt(12 / windowMinutes)
}

/** MurmurHash3's final mix. */
function uniform(seed: number, index: number): number {
  let hash = seed ^ Math.imul(index, 0x9e3779b1)
  hash = Math.imul(hash ^ (hash >>> 16), 0x85ebca6b)
  hash = Math.imul(hash ^ (hash >>> 13), 0xc2b2ae35)
  return ((hash ^ (hash >>> 16)) >>> 0) / 4294967296
}
