/** Chance that can be had again: the same seed gives the same moments. Marsaglia's xorshift with 32 bits (2003). */
export function chance(seed: number): () => number {
  let state = (seed | 0) ^ 0x9e3779b9 || 1
  return () => {
    state ^= state << 13
    state ^= state >>> 17
    state ^= state << 5
    return (state >>> 0) / 2 ** 32
  }
}

/** A number for a name and two counters that looks like chance and is always the same. */
export function hashed(name: string, a: number, b: number): number {
  let hash = 2_166_136_261
  for (const code of [...name].map((letter) => letter.charCodeAt(0)).concat([a & 0xffff, a >>> 16, b])) {
    hash = Math.imul(hash ^ code, 16_777_619)
    hash ^= hash >>> 13
  }
  return (hash >>> 0) / 2 ** 32
}
