/** Directions as they are said: degrees true, three digits, always with their sense. */

/** The opposite bearing. */
export const opposite = (degrees: number): number => normalise(degrees + 180)

/** Into 0 (included) to 360 (excluded). */
export function normalise(degrees: number): number {
  const turned = degrees % 360
  return turned < 0 ? turned + 360 : turned
}

/** Signed smallest turn from b to a, −180 (excluded) to 180. */
export function turnBetween(a: number, b: number): number {
  const turned = normalise(a - b)
  return turned > 180 ? turned - 360 : turned
}

/** Three digits and the degree sign: 7 gives `007°`. 359.6 gives `000°`. */
export const threeDigits = (degrees: number): string =>
  `${String(Math.round(normalise(degrees)) % 360).padStart(3, '0')}°`

/** The one formatter of a direction of waves, both senses in this order: `from 247° T, toward 067° T`. */
export function bothSenses(toward: number, separator = ', '): string {
  return `from ${threeDigits(opposite(toward))} T${separator}toward ${threeDigits(toward)} T`
}

const digitWords = ['zero', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine']

/** A sentence for a voice, its bearings digit by digit: `from 247° T` becomes `from two four seven degrees true`. */
export const spokenBearings = (sentence: string): string =>
  sentence.replace(
    /\b(\d{3})° T\b/g,
    (_, digits: string) => `${[...digits].map((digit) => digitWords[Number(digit)]).join(' ')} degrees true`,
  )

/** Heading (radians anticlockwise from east, as inside `shared/waves`) to degrees true clockwise from north. */
export const degreesTrue = (radiansFromEast: number): number => normalise(90 - (radiansFromEast * 180) / Math.PI)

/** Degrees true to radians anticlockwise from east. */
export const radiansFromEast = (degrees: number): number => ((90 - degrees) * Math.PI) / 180
