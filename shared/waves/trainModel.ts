/** The sea model of trains about known peaks: what is expected before the record is seen, and where the fit starts. */
import type { BandMatrices } from './bandMatrices.ts'
import { groupSpeed } from './dispersion.ts'
import type { PeakFit } from './jonswap.ts'
import { jonswapShape } from './jonswap.ts'
import type { SeaModel } from './seaModel.ts'

/**
 * Usual errors of linear theory at the stated depth: current along and across the waves, m/s, and of ln depth, one standard deviation.
 * Where the record leaves speed and bend open (few sensors, much noise) these hold the fit near theory; their heavy tails let go of
 * it as soon as a strong current or a wrong depth is plainly there.
 */
const usualCurrent = 0.2
const usualCrossCurrent = 0.1
const usualDepthError = 0.05
const tails = 3

/** First group at or above a frequency. */
export function firstGroup(bands: BandMatrices, frequency: number): number {
  let g = 0
  while (g < bands.groups && bands.frequency[g] < frequency) g++
  return g
}

export function seaModel(
  bands: BandMatrices,
  x: Float64Array,
  y: Float64Array,
  depth: number,
  gravity: number,
  peaks: readonly PeakFit[],
): SeaModel {
  const systems = peaks.length
  const priors = peaks.flatMap(() => [
    // No heading is likelier than another.
    { mean: 0, sd: 1e9 },
    { mean: 0, sd: usualCurrent, freedom: tails },
    { mean: Math.log(depth), sd: usualDepthError, freedom: tails },
    { mean: Math.log(0.3), sd: 1 },
    { mean: 0, sd: usualCrossCurrent, freedom: tails },
  ])
  priors.push({ mean: 0, sd: 0.7 })
  let densityPrior = null
  if (systems > 1) {
    const mean = new Float64Array(systems * bands.groups)
    peaks.forEach((peak, j) => {
      for (let g = 0; g < bands.groups; g++) {
        const shape = peak.density * jonswapShape(bands.frequency[g], peak.peak, peak.gamma)
        mean[j * bands.groups + g] = Math.log(Math.max(shape, 1e-3 * bands.density[g]))
      }
    })
    densityPrior = { mean, sd: 1 }
  }
  return {
    bands: withModelError(bands, x, y, depth, gravity),
    x,
    y,
    systems,
    gravity,
    faults: [],
    priors,
    densityPrior,
  }
}

/**
 * What no model of the sea explains of a group's own energy: the turn φ of phase across a group's width over the array costs φ²/24 of
 * coherence, and a thousandth is granted for sensors that are not quite alike. Without this floor a record with little
 * noise trusts its quietest frequencies without bound, and they turn the heading.
 */
const usualModelError = 0.001

function withModelError(
  bands: BandMatrices,
  x: Float64Array,
  y: Float64Array,
  depth: number,
  gravity: number,
): BandMatrices {
  const m = bands.sensors
  const aperture = 2 * Math.max(...Array.from(x, (xi, i) => Math.hypot(xi, y[i])))
  const floor = Array.from(bands.frequency, (f, g) => {
    const turn = (2 * Math.PI * bands.width[g] * aperture) / groupSpeed(1 / f, depth, gravity)
    return bands.density[g] * (usualModelError + (turn * turn) / 24)
  })
  return { ...bands, noise: bands.noise.map((own, n) => own + floor[Math.floor(n / m)]) }
}

export function startDensity(model: SeaModel): Float64Array {
  const { bands, systems, densityPrior } = model
  const start = new Float64Array(systems * bands.groups)
  for (let g = 0; g < bands.groups; g++) {
    let noise = 0
    for (let i = 0; i < bands.sensors; i++) noise += bands.noise[g * bands.sensors + i] / bands.sensors
    const surface = Math.max(bands.density[g] - noise, 0.05 * bands.density[g])
    let expected = 0
    for (let j = 0; j < systems; j++) expected += densityPrior ? Math.exp(densityPrior.mean[j * bands.groups + g]) : 1
    for (let j = 0; j < systems; j++) {
      const share = densityPrior ? Math.exp(densityPrior.mean[j * bands.groups + g]) / expected : 1
      start[j * bands.groups + g] = Math.log(surface * Math.max(share, 1e-3))
    }
  }
  return start
}

/** ln L of sensors that share nothing but have their own energies. */
export function unrelatedLikelihood(bands: BandMatrices): number {
  const m = bands.sensors
  let value = 0
  for (let g = 0; g < bands.groups; g++)
    for (let i = 0; i < m; i++) value -= bands.averages[g] * (Math.log(bands.real[g * m * m + i * m + i] + 1e-300) + 1)
  return value
}
