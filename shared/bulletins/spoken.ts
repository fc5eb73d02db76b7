/**
 * Figures as they are read out by voice: digit by digit, `decimal` for the point, bearings in three digits with `degrees true`, hours in
 * four digits with `UTC`. Source: IMO Resolution A.918(22), Standard Marine Communication Phrases, part A "General": numbers are spoken in
 * separate digits and decimals by the word "decimal", bearings and courses in 360-degree notation from north, times in the 24-hour notation
 * naming the zone; written down from memory of its wording, not held against the paper itself.
 */
import { normalise, opposite } from '../directions.ts'

const digitWords = ['zero', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine']

/** `1430` becomes `one four three zero`. Throws RangeError for anything but digits: a voice must not guess. */
export function spokenDigits(digits: string): string {
  if (!/^\d+$/.test(digits)) throw new RangeError(`"${digits}" is no row of digits`)
  return [...digits].map((digit) => digitWords[Number(digit)]).join(' ')
}

/**
 * A number with so many decimals: 12.4 becomes `one two decimal four`, −0.31 `minus zero decimal three one`. What rounds to zero has no
 * sign. Throws RangeError for what is not finite.
 */
export function spokenNumber(value: number, places: number): string {
  if (!Number.isFinite(value)) throw new RangeError(`${value} cannot be read out`)
  const written = Math.abs(value).toFixed(places)
  const [whole, fraction] = written.split('.')
  const words =
    fraction === undefined ? spokenDigits(whole) : `${spokenDigits(whole)} decimal ${spokenDigits(fraction)}`
  return value < 0 && Number(written) !== 0 ? `minus ${words}` : words
}

/** `two four seven degrees true`. Degrees true, any turn. */
export const spokenBearing = (degrees: number): string =>
  `${spokenDigits(String(Math.round(normalise(degrees)) % 360).padStart(3, '0'))} degrees true`

/** Both senses of a direction, in the order in which they are written. `toward` in degrees true. */
export const spokenBothSenses = (toward: number): string =>
  `from ${spokenBearing(opposite(toward))}, toward ${spokenBearing(toward)}`

/** `one four three two UTC`, of ms since 1970 UTC. */
export const spokenTime = (ms: number): string =>
  `${spokenDigits(new Date(ms).toISOString().slice(11, 16).replace(':', ''))} UTC`

/** `2026-316` becomes `two zero two six, three one six`. */
export const spokenBulletinNumber = (number: string): string => number.split('-').map(spokenDigits).join(', ')
