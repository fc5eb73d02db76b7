/** Conditions, values and states in plain words. Directions carry their sense; nothing here says that it is safe. */
import { threeDigits } from '../directions.ts'
import type { AlertState, Comparison, Condition, Priority, TimeSpan } from '../schemas/limit.ts'
import { age, decimals, plusMinus } from '../units.ts'
import { quantityOf } from './quantities.ts'
import type { Quantity } from './quantities.ts'

/** `2.50 m`, `from 247° T`, `12 min`; `cannot be told` for null. Values are SI. */
export function valueWords(quantity: Quantity, value: number | null): string {
  if (value === null) return 'cannot be told'
  if (quantity.key === 'arrayDisagreement') return value > 0 ? 'disagree' : 'agree'
  if (quantity.isCircular) return `from ${threeDigits(value)} T`
  const written = decimals(value * quantity.toUnit, quantity.decimals)
  return quantity.unit === '' ? written : `${written} ${quantity.unit}`
}

/** With one standard deviation where it is known: `2.61 m ± 0.14`. */
export function valueWithSd(quantity: Quantity, value: number | null, sd: number | null): string {
  const written = valueWords(quantity, value)
  if (value === null || sd === null || quantity.limitClass === 'dataHealth') return written
  return `${written} ${plusMinus(sd * quantity.toUnit, quantity.decimals)}${quantity.isCircular ? '°' : ''}`
}

const lowered = (text: string): string => text.charAt(0).toLowerCase() + text.slice(1)

/** `total height above 2.50 m`, `swell from 200° T to 290° T, clockwise`. */
export function comparisonWords(comparison: Comparison): string {
  const quantity = quantityOf(comparison.quantity)
  const name = lowered(quantity.name)
  if (comparison.kind === 'sector') {
    return `${name} ${threeDigits(comparison.from)} T to ${threeDigits(comparison.to)} T, clockwise`
  }
  if (comparison.quantity === 'arrayDisagreement') return 'parts of the array disagree'
  if (comparison.kind === 'below') return `${name} below ${valueWords(quantity, comparison.raise)}`
  const raise = valueWords(quantity, comparison.raise)
  if (comparison.riseOverSeconds !== null)
    return `${name} risen by more than ${raise} in ${age(comparison.riseOverSeconds)}`
  return comparison.quantity === 'dataAge' ? `no usable figure for ${raise}` : `${name} above ${raise}`
}

/** `clears below 2.10 m`. */
export function clearWords(comparison: Comparison): string {
  const quantity = quantityOf(comparison.quantity)
  if (comparison.kind === 'sector') return `${comparison.deadBand}° outside the sector`
  if (comparison.quantity === 'arrayDisagreement') return 'when they agree again'
  // A count comes back to its line.
  if (comparison.quantity === 'usableSensors' && comparison.kind === 'below')
    return `at ${valueWords(quantity, comparison.clear)} or more`
  return `${comparison.kind === 'above' ? 'below' : 'above'} ${valueWords(quantity, comparison.clear)}`
}

const dayNames = ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun']
const monthNames = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec']
const dayWords = (monthDay: string): string =>
  `${Number(monthDay.slice(3))} ${monthNames[Number(monthDay.slice(0, 2)) - 1]}`

/** `20:00 to 06:00 local on Fri, Sat, from 15 May to 15 Sep`. */
export function spanWords({ hours, season }: TimeSpan): string {
  const parts: string[] = []
  if (hours) {
    const days = hours.days.length === 7 ? '' : ` on ${[...hours.days].sort().map((day) => dayNames[day - 1]).join(', ')}` // prettier-ignore
    parts.push(`${hours.from} to ${hours.to} local${days}`)
  }
  if (season) parts.push(`from ${dayWords(season.from)} to ${dayWords(season.to)}`)
  return parts.length === 0 ? 'at all times' : parts.join(', ')
}

const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1)
const forLong = (seconds: number): string => (seconds === 0 ? '' : ` for ${age(seconds)}`)

/** The whole condition, one or two sentences. */
export function conditionWords(condition: Condition): string {
  const all = condition.comparisons.map(comparisonWords).join(' and ')
  const when = condition.when ? `, ${spanWords(condition.when)}` : ''
  const clears = condition.comparisons.map(clearWords).join(' or ')
  const margin = condition.clearSigmas === 0 ? '' : ` with its ± ${condition.clearSigmas === 1 ? '' : `times ${condition.clearSigmas} `}counted` // prettier-ignore
  const latch = condition.latches ? ' It stays until it is reset.' : ''
  return `${capital(all)}${forLong(condition.onDelaySeconds)}${when}. Clears ${clears}${margin}${forLong(condition.offDelaySeconds)}.${latch}`
}

/** The quantity that heads the alert, and where: `Total height, Outer Ledge`. A title of one's own stands for the quantity. */
export function titleOf(title: string | null, condition: Condition, subjectName: string): string {
  const [first] = condition.comparisons
  const isRise = first.kind === 'above' && first.riseOverSeconds !== null
  const name = quantityOf(first.quantity).name
  return `${title ?? (isRise ? `Rise of ${lowered(name)}` : name)}, ${subjectName}`
}

/** `High, second most serious of four`. */
export const priorityWords: Record<Priority, string> = {
  urgent: 'Urgent, most serious of four',
  high: 'High, second most serious of four',
  medium: 'Medium, third most serious of four',
  low: 'Low, least serious of four',
}

export const stateWords: Record<AlertState, string> = {
  normal: 'Over',
  unacknowledgedActive: 'Active, not acknowledged',
  acknowledgedActive: 'Active, acknowledged',
  returnedUnacknowledged: 'Cleared, not acknowledged',
  latchedUnacknowledged: 'Cleared, latched, not acknowledged',
  latchedAcknowledged: 'Cleared, latched, acknowledged',
  shelved: 'Shelved',
  suppressed: 'Suppressed by design',
  outOfService: 'Out of service',
}

/** Thresholds of the first comparison for a drawing; null where it is a sector. */
export const thresholdsOf = ({ comparisons: [first] }: Condition): { raise: number | null; clear: number | null } =>
  first.kind === 'sector' ? { raise: null, clear: null } : { raise: first.raise, clear: first.clear }
