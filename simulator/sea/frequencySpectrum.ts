/** JONSWAP's shape (Hasselmann et al. 1973), scaled to the wanted height over the frequencies given. */
export interface SpectrumWanted {
  significantWaveHeight: number
  peakPeriod: number
  /** Peak enhancement: 1 is Pierson and Moskowitz' fully grown sea, 3.3 a growing one, more a narrow swell. */
  peakedness: number
}

/** Below this share of the highest density a frequency is left out: it costs time and shows nowhere. */
const leastShare = 2e-5

/**
 * Variance in m² of each frequency k × `resolution` Hz, k from 0 up to `highest` Hz, so that the sum is exactly
 * H_m0² / 16. Zero where nothing is.
 */
export function spectralVariances(wanted: SpectrumWanted, resolution: number, highest: number): Float64Array {
  const count = Math.floor(highest / resolution) + 1
  const variances = new Float64Array(count)
  if (!(wanted.significantWaveHeight > 0)) return variances
  let peak = 0
  for (let k = 1; k < count; k++) {
    variances[k] = jonswapShape(k * resolution * wanted.peakPeriod, wanted.peakedness)
    peak = Math.max(peak, variances[k])
  }
  let sum = 0
  for (let k = 1; k < count; k++) {
    if (variances[k] < leastShare * peak) variances[k] = 0
    sum += variances[k]
  }
  const scale = wanted.significantWaveHeight ** 2 / 16 / sum
  for (let k = 1; k < count; k++) variances[k] *= scale
  return variances
}

/** Shape over frequency as a multiple of the peak's. */
function jonswapShape(ratio: number, peakedness: number): number {
  const width = ratio <= 1 ? 0.07 : 0.09
  const enhancement = peakedness ** Math.exp(-((ratio - 1) ** 2) / (2 * width * width))
  return ratio ** -5 * Math.exp(-1.25 * ratio ** -4) * enhancement
}
