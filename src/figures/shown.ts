/**
 * Wave heights and speeds as this person reads them: one place decides the unit for every page and drawing, and what
 * shows a figure follows at once. Values come in SI units and stay so everywhere else. Depths, distances, degrees,
 * seconds never change.
 */
import { shallowReactive } from 'vue'
import { spokenBearings } from '../../shared/directions.ts'
import { usualPreferences } from '../../shared/schemas/preferences.ts'
import type { HeightUnit, SpeedUnit } from '../../shared/schemas/preferences.ts'
import { decimals, heightIn, heightPlaces, noValue, plusMinus, speedIn } from '../../shared/units.ts'

interface Shown {
  heightUnit: HeightUnit
  speedUnit: SpeedUnit
  /** Voices say bearings digit by digit. */
  spokenDigits: boolean
}

const { heightUnit: usualHeight, speedUnit: usualSpeed, spokenDigits } = usualPreferences
const shown = shallowReactive<Shown>({ heightUnit: usualHeight, speedUnit: usualSpeed, spokenDigits })

export function showIn(choice: Shown): void {
  Object.assign(shown, choice)
}

export const heightUnit = (): HeightUnit => shown.heightUnit
export const speedUnit = (): SpeedUnit => shown.speedUnit

/** Feet have one decimal; metres the decimals asked for, by their size where none are. */
const placesOf = (metres: number | null, places: number | undefined): number =>
  shown.heightUnit === 'ft' ? 1 : (places ?? heightPlaces(metres))

const withUnit = (written: string, unit: string): string => (written === noValue ? noValue : `${written} ${unit}`)

/** The number alone, where the unit stands in the heading. */
export const heightNumber = (metres: number | null, places?: number): string =>
  decimals(heightIn(shown.heightUnit, metres), placesOf(metres, places))

/** `2.1 m` or `6.9 ft`. */
export const heightWords = (metres: number | null, places?: number): string =>
  withUnit(heightNumber(metres, places), shown.heightUnit)

/** `± 0.1`, with the decimals of the height it belongs to. */
export const heightSd = (metres: number | null, places: number): string =>
  plusMinus(heightIn(shown.heightUnit, metres), placesOf(null, places))

export const speedNumber = (metresPerSecond: number | null, places = 1): string =>
  decimals(speedIn(shown.speedUnit, metresPerSecond), places)

/** `11.4 m/s` or `22.2 kn`. */
export const speedWords = (metresPerSecond: number | null): string =>
  withUnit(speedNumber(metresPerSecond), shown.speedUnit)

export const speedSd = (metresPerSecond: number | null): string =>
  plusMinus(speedIn(shown.speedUnit, metresPerSecond), 1)

/** What a voice reads for a figure or a drawing. */
export const spoken = (sentence: string): string => (shown.spokenDigits ? spokenBearings(sentence) : sentence)

/** After a limit or what is set against it, which keep the unit they were set in: `, 3.3 ft` for who reads feet, else nothing. */
export function alsoIn(unit: string, value: number | null): string {
  if (value === null) return ''
  if (unit === 'm' && shown.heightUnit === 'ft') return `, ${heightWords(value)}`
  return unit === 'm/s' && shown.speedUnit === 'kn' ? `, ${speedWords(value)}` : ''
}
