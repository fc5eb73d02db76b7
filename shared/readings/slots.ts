/**
 * A station's grid: slot k is the instant k / sampleRate seconds after 1970-01-01T00:00Z. Every sample is kept in the
 * slot nearest to its time. Times in milliseconds since 1970 UTC, rates in Hz.
 */
const minuteMilliseconds = 60_000

/** Slots are whole numbers far below 2^53; this much is rounding, not time. */
const slack = 1e-3

export const nearestSlot = (timeMs: number, sampleRate: number): number => Math.round((timeMs / 1000) * sampleRate)

export const timeOfSlot = (slot: number, sampleRate: number): number => (slot / sampleRate) * 1000

/** First slot at or after an instant. */
export const firstSlotFrom = (timeMs: number, sampleRate: number): number =>
  Math.ceil((timeMs / 1000) * sampleRate - slack)

/** Start of the minute that a slot belongs to. */
export const minuteOfSlot = (slot: number, sampleRate: number): number =>
  Math.floor((slot + slack) / (sampleRate * 60)) * minuteMilliseconds

/** First slot of the minute after the one that a slot belongs to. */
export const nextMinuteSlot = (slot: number, sampleRate: number): number =>
  firstSlotFrom(minuteOfSlot(slot, sampleRate) + minuteMilliseconds, sampleRate)
