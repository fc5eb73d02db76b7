/**
 * Seeded chance. Everything that looks random in the simulator is a pure function of a text or of an index, so a
 * sea made again for the same moment is the same to the last bit.
 */

/** 32-bit hash of a text (FNV-1a with MurmurHash3's final mix). */
export function hashText(text: string): number {
  let hash = 0x811c9dc5
  for (let index = 0; index < text.length; index++) {
    hash = Math.imul(hash ^ text.charCodeAt(index), 0x01000193)
  }
  return mix(hash)
}

function mix(hash: number): number {
  let mixed = Math.imul(hash ^ (hash >>> 16), 0x85ebca6b)
  mixed = Math.imul(mixed ^ (mixed >>> 13), 0xc2b2ae35)
  return (mixed ^ (mixed >>> 16)) >>> 0
}

/** A stream of numbers from 0 (included) to 1 (excluded): mulberry32. */
export function uniforms(seed: number): () => number {
  let state = seed | 0
  return () => {
    state = (state + 0x6d2b79f5) | 0
    let value = Math.imul(state ^ (state >>> 15), 1 | state)
    value = (value + Math.imul(value ^ (value >>> 7), 61 | value)) ^ value
    return ((value ^ (value >>> 14)) >>> 0) / 4294967296
  }
}

/** One uniform number that belongs to an index (which may pass 2³²) of the sequence named by `seed`. */
export function uniformAt(seed: number, index: number): number {
  const high = Math.floor(index / 4294967296)
  return mix(mix(seed ^ Math.imul(high + 1, 0x9e3779b9)) ^ (index >>> 0)) / 4294967296
}

/** One standard normal number that belongs to an index (Box and Muller 1958). */
export function normalAt(seed: number, index: number): number {
  const radius = Math.sqrt(-2 * Math.log(1 - uniformAt(seed, index)))
  return radius * Math.cos(2 * Math.PI * uniformAt(seed ^ 0x5bd1e995, index))
}
