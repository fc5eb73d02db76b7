/** How a figure was made, in words: inputs, ranges and uncertainty in the units people read. Pure. */
import { bothSenses, degreesTrue } from '../../../shared/directions.ts'
import type { Figure, FigureInput, FigureUnit, RangeCheck } from '../../../shared/hazards/figure.ts'
import { decimals } from '../../../shared/units.ts'
import { twoDigits } from './placeFigures.ts'

const degree = Math.PI / 180
/** Of a heading inside a figure, whose radians count from east. */
const headingNote = 'from east, anticlockwise'

/** Inside its range a number keeps about three digits. */
function number(value: number): string {
  const size = Math.abs(value)
  if (size === 0) return '0'
  if (size >= 100) return decimals(value, 0)
  if (size >= 10) return decimals(value, 1)
  return size >= 0.1 ? decimals(value, 2) : `${value < 0 ? '−' : ''}${twoDigits(size)}`
}

const shown: Record<FigureUnit, { unit: string; factor: number }> = {
  m: { unit: ' m', factor: 1 },
  s: { unit: ' s', factor: 1 },
  'm/s': { unit: ' m/s', factor: 1 },
  rad: { unit: '°', factor: 1 / degree },
  '1': { unit: '', factor: 1 },
  Hz: { unit: ' Hz', factor: 1 },
  'm²': { unit: ' m²', factor: 1 },
  'm²/Hz': { unit: ' m²/Hz', factor: 1 },
  'm³/s/m': { unit: ' l/s per m', factor: 1000 },
  'm³/m': { unit: ' l per m', factor: 1000 },
}

/** `12.5 s`, `13.0°`, `1.2 l/s per m`. */
export function inUnit(value: number, unit: FigureUnit): string {
  const { unit: written, factor } = shown[unit]
  return `${number(value * factor)}${written}`
}

export interface InputWords {
  name: string
  value: string
  sd: string
  note: string
}

export function inputWords({ name, value, unit, sd, note }: FigureInput): InputWords {
  if (typeof value === 'string' || unit === null) return { name, value: String(value), sd: '', note: note ?? '' }
  const uncertainty = sd === null ? '± not known' : sd === 0 ? '' : `± ${inUnit(sd, unit)}`
  if (note === headingNote) return { name, value: bothSenses(degreesTrue(value)), sd: uncertainty, note: '' }
  return { name, value: inUnit(value, unit), sd: uncertainty, note: note ?? '' }
}

/** `free crest over height 1.1: inside 0.5 to 3.5`. */
export function checkWords({ name, value, unit, from, to, inside }: RangeCheck): string {
  const range =
    from === null
      ? to === null
        ? 'any'
        : `up to ${inUnit(to, unit)}`
      : to === null
        ? `from ${inUnit(from, unit)}`
        : `${inUnit(from, unit)} to ${inUnit(to, unit)}`
  return `${name} ${inUnit(value, unit)}: ${inside ? 'inside' : 'OUTSIDE'} ${range}`
}

/** The whole range of validity in a few words; `null` where the method names none. */
export function rangeWords({ validity }: Figure): string | null {
  if (validity.checks.length === 0) return null
  const outside = validity.checks.filter(({ inside }) => !inside)
  if (outside.length === 0) return `inside: ${validity.checks.map(checkWords).join('; ')}`
  return `outside its range: ${outside.map(checkWords).join('; ')}. The value is no better than a hint`
}

/** `±` or likely range of a figure of any unit. */
export function plusMinusWords({ value, sd, likely, unit }: Figure): string {
  if (value === null) return ''
  if (likely) return `likely ${inUnit(likely.from, unit)} to ${inUnit(likely.to, unit)}`
  return sd === null ? '± not known' : `± ${inUnit(sd, unit)}`
}

/** `about 3 min`, `40 s`. */
export function travelWords(seconds: number): string {
  if (seconds < 90) return `about ${Math.round(seconds / 10) * 10} s`
  return `about ${decimals(seconds / 60, seconds < 600 && seconds % 60 > 20 && seconds % 60 < 40 ? 1 : 0)} min`
}
