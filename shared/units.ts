/**
 * How figures are written: decimals by quantity, a true minus, thin groups from 10 000, an uncertainty with the
 * decimals of its figure. Values come in SI units; null (cannot be determined) is written as a word, never as 0.
 */
const minus = '\u2212'
const thinSpace = '\u202f'

/** Word for a value that is not there. */
export const noValue = 'none'

/** A number with so many decimals; `none` for null or what is not finite. −0.04 at one decimal is 0.0, not −0.0. */
export function decimals(value: number | null, places: number): string {
  if (value === null || !Number.isFinite(value)) return noValue
  const digits = Math.abs(value).toFixed(places)
  const [whole, fraction] = digits.split('.')
  const grouped = whole.length > 4 ? whole.replace(/\B(?=(\d{3})+$)/g, thinSpace) : whole
  const written = fraction === undefined ? grouped : `${grouped}.${fraction}`
  return value < 0 && Number(digits) !== 0 ? minus + written : written
}

/**
 * One standard deviation with the decimals of its figure: `± 0.3`. It is never written smaller than the last digit
 * shown, because `± 0.0` would read as exact.
 */
export function plusMinus(sd: number | null, places: number): string {
  if (sd === null || !Number.isFinite(sd)) return '± not known'
  return `± ${decimals(Math.max(Math.abs(sd), 10 ** -places), places)}`
}

/** Speed, height, period, each with its unit and usual decimals. */
export const metresPerSecond = (value: number | null): string => withUnit(value, 1, 'm/s')
export const metres = (value: number | null, places = 1): string => withUnit(value, places, 'm')
export const seconds = (value: number | null, places = 1): string => withUnit(value, places, 's')
export const hertz = (value: number | null): string => withUnit(value, 3, 'Hz')

/** A share of one as whole per cent. */
export const percent = (share: number | null): string => withUnit(share === null ? null : share * 100, 0, '%')

function withUnit(value: number | null, places: number, unit: string): string {
  const written = decimals(value, places)
  return written === noValue ? noValue : `${written} ${unit}`
}

/** Decimals of a height: two below half a metre, where one would hide the figure, else one. */
export const heightPlaces = (height: number | null): number => (height !== null && Math.abs(height) < 0.5 ? 2 : 1)

/** Metres in one international foot, exactly (1959). */
export const metresAFoot = 0.3048
/** Metres a second in one knot, exactly: a nautical mile of 1852 m in an hour. */
export const metresPerSecondAKnot = 1852 / 3600

/** A height or its uncertainty, given in metres, in the unit that a person reads. */
export const heightIn = (unit: 'm' | 'ft', metresGiven: number | null): number | null =>
  metresGiven === null ? null : unit === 'ft' ? metresGiven / metresAFoot : metresGiven

/** A speed or its uncertainty, given in metres a second, in the unit that a person reads. */
export const speedIn = (unit: 'm/s' | 'kn', metresPerSecondGiven: number | null): number | null =>
  metresPerSecondGiven === null
    ? null
    : unit === 'kn'
      ? metresPerSecondGiven / metresPerSecondAKnot
      : metresPerSecondGiven

/** Age in seconds as `38 s`, `22 min`, `3 h 10 min`, `2 d 4 h`; seconds up to two minutes. Below zero counts as none. */
export function age(ageSeconds: number): string {
  const whole = Math.max(0, Math.floor(ageSeconds))
  if (whole < 120) return `${whole} s`
  const minutes = Math.floor(whole / 60)
  if (minutes < 60) return `${minutes} min`
  const hours = Math.floor(minutes / 60)
  if (hours < 48) return minutes % 60 === 0 ? `${hours} h` : `${hours} h ${minutes % 60} min`
  const days = Math.floor(hours / 24)
  return hours % 24 === 0 ? `${days} d` : `${days} d ${hours % 24} h`
}
