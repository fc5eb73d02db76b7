/** Latitude and longitude as people type and read them: decimal degrees, or degrees, minutes and seconds. Pure. */

const sign: Record<string, number> = { N: 1, E: 1, S: -1, W: -1 }

/**
 * Degrees with their sign; NaN where nothing sensible stands there. Takes `47.4865`, `-21,0222`, `47° 29.19′ N`,
 * `21 1 19.9 W`.
 */
export function degreesIn(typed: string, axis: 'latitude' | 'longitude'): number {
  const letters = axis === 'latitude' ? 'NS' : 'EW'
  const text = typed.trim().toUpperCase().replaceAll(',', '.').replaceAll('\u2212', '-')
  const found = new RegExp(`^(-?)(\\d+(?:\\.\\d+)?)(?:[°\\s]+(\\d+(?:\\.\\d+)?))?(?:['′\\s]+(\\d+(?:\\.\\d+)?))?['′"″°\\s]*([${letters}]?)$`).exec(text) // prettier-ignore
  if (!found) return NaN
  const [, minus, degrees, minutes = '0', seconds = '0', letter] = found
  if (Number(minutes) >= 60 || Number(seconds) >= 60 || (minus && letter)) return NaN
  const value = Number(degrees) + Number(minutes) / 60 + Number(seconds) / 3600
  return value * (minus ? -1 : letter ? sign[letter] : 1)
}

/** `47.486500`: a tenth of a metre. */
export const degreesTyped = (value: number): string => String(Math.round(value * 1e6) / 1e6)

/** `47° 29.190′ N`. */
export function degreesWords(value: number, axis: 'latitude' | 'longitude'): string {
  const thousandths = Math.round(Math.abs(value) * 60_000)
  const degrees = Math.floor(thousandths / 60_000)
  const minutes = (thousandths % 60_000) / 1_000
  const letter = axis === 'latitude' ? (value < 0 ? 'S' : 'N') : value < 0 ? 'W' : 'E'
  return `${degrees}° ${minutes.toFixed(3).padStart(6, '0')}′ ${letter}`
}
