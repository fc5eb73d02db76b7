/** Peaks of a noisy one-dimensional spectrum that are more than its sampling error makes. */

export interface SpectralPeak {
  /** Hz. */
  frequency: number
  /** Lowest points on either side, or the ends of the spectrum, Hz. */
  from: number
  to: number
  /** Share of the energy between them, 0 to 1. */
  share: number
}

/** Half width of the smoothing in ln f. */
const smoothing = 0.07

/**
 * Peaks by falling frequency share of energy. A valley counts when the lower of its two peaks stands above it by `sureness`
 * standard deviations of the sampling error (χ² with the averages gathered by the smoothing). `density` is freed of
 * `noise`; a peak must stand four of the noise's own deviations above zero.
 */
export function spectralPeaks(
  frequency: ArrayLike<number>,
  width: ArrayLike<number>,
  density: ArrayLike<number>,
  averages: ArrayLike<number>,
  noise: ArrayLike<number>,
  sureness = 3,
): SpectralPeak[] {
  const n = frequency.length
  const smooth = new Float64Array(n)
  const gathered = new Float64Array(n)
  let low = 0
  for (let g = 0; g < n; g++) {
    let sum = 0
    let weights = 0
    let squares = 0
    while (frequency[low] < frequency[g] * (1 - 2.6 * smoothing)) low++
    for (let h = low; h < n && frequency[h] < frequency[g] * (1 + 2.9 * smoothing); h++) {
      const off = Math.log(frequency[h] / frequency[g]) / smoothing
      const weight = averages[h] * Math.exp(-0.5 * off * off)
      sum += weight * density[h]
      weights += weight
      squares += (weight * weight) / averages[h]
    }
    smooth[g] = sum / weights
    gathered[g] = (weights * weights) / squares
  }
  let tops: number[] = []
  const overNoise = (g: number) => smooth[g] > (4 * noise[g]) / Math.sqrt(gathered[g])
  for (let g = 0; g < n; g++) {
    const left = g === 0 ? -Infinity : smooth[g - 1]
    const right = g === n - 1 ? -Infinity : smooth[g + 1]
    if (smooth[g] > 0 && overNoise(g) && smooth[g] >= left && smooth[g] > right) tops.push(g)
  }
  tops = mergeShallow(tops, smooth, gathered, sureness)
  const bounds = [0, ...tops.slice(1).map((top, i) => lowest(smooth, tops[i], top)), n]
  let total = 0
  for (let g = 0; g < n; g++) total += Math.max(0, density[g]) * width[g]
  return tops
    .map((top, i) => {
      let energy = 0
      for (let g = bounds[i]; g < bounds[i + 1]; g++) energy += Math.max(0, density[g]) * width[g]
      return {
        frequency: frequency[top],
        from: frequency[bounds[i]],
        to: frequency[Math.min(n - 1, bounds[i + 1])],
        share: total > 0 ? energy / total : 0,
      }
    })
    .sort((a, b) => b.share - a.share)
}

function lowest(smooth: Float64Array, from: number, to: number): number {
  let at = from
  for (let g = from; g <= to; g++) if (smooth[g] < smooth[at]) at = g
  return at
}

function mergeShallow(tops: number[], smooth: Float64Array, gathered: Float64Array, sureness: number): number[] {
  const kept = [...tops]
  for (;;) {
    let worst = -1
    let leastMargin = 0
    for (let i = 0; i + 1 < kept.length; i++) {
      const valley = lowest(smooth, kept[i], kept[i + 1])
      const lower = smooth[kept[i]] < smooth[kept[i + 1]] ? kept[i] : kept[i + 1]
      const depth = Math.log(smooth[lower] / Math.max(smooth[valley], 1e-30))
      const margin = depth - sureness * Math.sqrt(1 / gathered[valley] + 1 / gathered[lower])
      if (margin >= leastMargin) continue
      leastMargin = margin
      worst = lower === kept[i] ? i : i + 1
    }
    if (worst < 0) return kept
    kept.splice(worst, 1)
  }
}
