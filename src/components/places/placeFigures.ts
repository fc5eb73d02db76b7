/**
 * Figures of places as this person reads them: heights and currents in their units, overtopping in two significant digits with its likely
 * range. Pure but for the units; values come in SI.
 */
import { placeQuantityOf } from '../../../shared/places/quantities.ts'
import type { Figure } from '../../../shared/hazards/figure.ts'
import type { PlaceQuantityKey } from '../../../shared/schemas/placeQuantity.ts'
import { noValue } from '../../../shared/units.ts'
import { heightNumber, heightSd, heightUnit, speedNumber, speedUnit } from '../../figures/shown.ts'

const isFlow = (key: PlaceQuantityKey): boolean => key === 'overtopping' || key === 'largestVolume'
const isSpeed = (key: PlaceQuantityKey): boolean => key === 'longshoreCurrent'

/** Two significant digits, never in powers of ten: 0.0045, 0.4, 1.0, 12, 340. */
export function twoDigits(value: number): string {
  if (!Number.isFinite(value)) return noValue
  if (value === 0) return '0'
  const rounded = Number(value.toPrecision(2))
  if (rounded < 1e-6) return rounded.toExponential(0)
  const written = rounded < 1 ? rounded.toFixed(Math.min(7, 1 - Math.floor(Math.log10(rounded)))) : String(rounded)
  const short = written.includes('.') ? written.replace(/0+$/, '').replace(/\.$/, '') : written
  return rounded < 10 && !short.includes('.') ? `${short}.0` : short
}

export function unitOf(key: PlaceQuantityKey): string {
  if (isFlow(key)) return placeQuantityOf(key).unit
  return isSpeed(key) ? speedUnit() : heightUnit()
}

/** The number alone; `none` for what cannot be determined. */
export function numberOf(key: PlaceQuantityKey, value: number | null): string {
  if (value === null) return noValue
  const { toUnit, decimals } = placeQuantityOf(key)
  if (isFlow(key)) return twoDigits(value * toUnit)
  return isSpeed(key) ? speedNumber(value, decimals) : heightNumber(value, decimals)
}

/** `1.11 m`. */
export const wordsOf = (key: PlaceQuantityKey, value: number | null): string =>
  value === null ? noValue : `${numberOf(key, value)} ${unitOf(key)}`

/** Of the mean discharge below which none is predicted the number says nothing. */
export const isNonePredicted = ({ words }: Pick<Figure, 'words'>): boolean => words === 'no overtopping predicted'

/** `± 0.09`, or `likely 0.4 to 3.6` where the band says it better. */
export function uncertaintyOf(
  key: PlaceQuantityKey,
  { sd, likely, value }: Pick<Figure, 'sd' | 'likely' | 'value'>,
): string {
  if (value === null) return ''
  if (likely) return `likely ${numberOf(key, likely.from)} to ${numberOf(key, likely.to)}`
  const { decimals } = placeQuantityOf(key)
  if (sd === null) return '± not known'
  return isSpeed(key) ? `± ${speedNumber(Math.max(sd, 10 ** -decimals), decimals)}` : heightSd(sd, decimals)
}

/** `1.11 m ± 0.09`, `1.2 l/s per m, likely 0.4 to 3.6`, `no overtopping predicted`. */
export function figureWords(key: PlaceQuantityKey, figure: Figure): string {
  if (figure.value === null) return `cannot be determined: ${figure.reason ?? 'no reason was given'}`
  if (isNonePredicted(figure)) return 'no overtopping predicted'
  const sd = uncertaintyOf(key, figure)
  return `${wordsOf(key, figure.value)}${figure.likely ? `, ${sd}` : ` ${sd}`}`
}
