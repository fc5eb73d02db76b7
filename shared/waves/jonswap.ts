/** The JONSWAP shape (Hasselmann et al. 1973) and the peak that fits a measured spectrum best. */

/** f⁻⁵ exp(−1.25 (f/fp)⁻⁴) γ^r with r = exp(−(f/fp−1)²/2σ²), scaled to 1 at the peak. */
export function jonswapShape(frequency: number, peak: number, gamma: number): number {
  const ratio = frequency / peak
  if (ratio < 0.25) return 0
  const sigma = ratio <= 1 ? 0.07 : 0.09
  const r = Math.exp(-((ratio - 1) ** 2) / (2 * sigma * sigma))
  return Math.pow(ratio, -5) * Math.exp(1.25 * (1 - Math.pow(ratio, -4))) * Math.pow(gamma, r - 1)
}

export interface PeakFit {
  peak: number
  gamma: number
  /** Density at the peak, in the unit of the densities. */
  density: number
}

const gammas = [1, 1.8, 3.3, 6, 10]

/**
 * Peak frequency by Whittle's likelihood of a JONSWAP shape over noise: Σ ν [ln s + d/s]. Steadier than the highest bin of a
 * 20-minute record, which wanders by several per cent. Looks within
 * ±22 % of `near`, at the frequencies of `range` alone.
 */
export function fitPeak(
  frequency: ArrayLike<number>,
  density: ArrayLike<number>,
  averages: ArrayLike<number>,
  noise: ArrayLike<number>,
  near: number,
  range: { from: number; to: number } = { from: 0, to: Infinity },
): PeakFit {
  const from = Math.max(0.6 * near, range.from)
  const to = Math.min(1.9 * near, range.to)
  let best = { cost: Infinity, peak: near, gamma: 3.3, density: 0 }
  const costAt = (peak: number, gamma: number) => {
    const trial = costOf(frequency, density, averages, noise, peak, gamma, from, to)
    if (trial.cost < best.cost) best = { ...trial, peak, gamma }
    return trial.cost
  }
  const steps = 12
  for (const gamma of gammas) for (let n = -steps; n <= steps; n++) costAt(near * Math.exp((0.2 * n) / steps), gamma)
  let width = 0.2 / steps
  for (let round = 0; round < 3; round++) {
    const centre = best.peak
    const gamma = best.gamma
    for (let n = -2; n <= 2; n++)
      for (const factor of [0.87, 1, 1.15]) costAt(centre * Math.exp(width * 0.5 * n), gamma * factor)
    width /= 2
  }
  // A parabola through the best three takes the grid out.
  const h = 0.01
  const gamma = best.gamma
  const centre = best.peak
  const low = costOf(frequency, density, averages, noise, centre * Math.exp(-h), gamma, from, to).cost
  const mid = costOf(frequency, density, averages, noise, centre, gamma, from, to).cost
  const high = costOf(frequency, density, averages, noise, centre * Math.exp(h), gamma, from, to).cost
  const bend = low - 2 * mid + high
  const shift = bend > 0 ? Math.max(-1, Math.min(1, (0.5 * (low - high)) / bend)) : 0
  return { peak: centre * Math.exp(shift * h), gamma, density: best.density }
}

const shapes = new Float64Array(4096)

function costOf(
  frequency: ArrayLike<number>,
  density: ArrayLike<number>,
  averages: ArrayLike<number>,
  noise: ArrayLike<number>,
  peak: number,
  gamma: number,
  from: number,
  to: number,
): { cost: number; density: number } {
  let first = 0
  while (first < frequency.length && frequency[first] < from) first++
  let end = first
  // Scale in two passes: a weighted ratio, then steps of the likelihood.
  let above = 0
  let below = 0
  for (; end < frequency.length && frequency[end] <= to; end++) {
    const shape = jonswapShape(frequency[end], peak, gamma)
    shapes[end - first] = shape
    above += averages[end] * shape * (density[end] - noise[end])
    below += averages[end] * shape * shape
  }
  if (!(below > 0) || !(above > 0)) return { cost: Infinity, density: 0 }
  let scale = above / below
  let cost = Infinity
  for (let pass = 0; pass < 3; pass++) {
    let gradient = 0
    let information = 0
    cost = 0
    for (let g = first; g < end; g++) {
      const shape = scale * shapes[g - first]
      const model = shape + noise[g] + 1e-12
      const ratio = density[g] / model
      if (pass === 2) cost += averages[g] * (Math.log(model) + ratio)
      gradient += (averages[g] * shape * (ratio - 1)) / model
      information += (averages[g] * shape * shape) / (model * model)
    }
    if (pass < 2) scale *= Math.exp(Math.max(-1, Math.min(1, gradient / (information + 1e-9))))
  }
  return { cost, density: scale }
}
