/**
 * Directional spreading D(δ) ∝ cos^{2s}(δ/2) (Longuet-Higgins, Cartwright & Smith 1963; Mitsuyasu et al. 1975) and the circular
 * spread σ = √(2(1−m₁)) (Kuik, van Vledder & Holthuijsen 1988), which for it is √(2/(s+1)).
 */

/** s from σ in radians; σ must be below √2. */
export const spreadExponent = (spread: number): number => 2 / (spread * spread) - 1

/** First moment m₁ = s/(s+1) = 1 − σ²/2. */
export const firstMoment = (spread: number): number => 1 - (spread * spread) / 2

export interface SpreadingNodes {
  count: number
  /** Offsets from the mean direction, rad. */
  offset: Float64Array
  cos: Float64Array
  sin: Float64Array
  /** Weights, sum 1. */
  weight: Float64Array
  /** Derivative of the weights to ln σ. */
  weightByLogSpread: Float64Array
}

export const makeSpreadingNodes = (): SpreadingNodes => ({
  count: 0,
  offset: new Float64Array(0),
  cos: new Float64Array(0),
  sin: new Float64Array(0),
  weight: new Float64Array(0),
  weightByLogSpread: new Float64Array(0),
})

/** Relative weight below which a direction is left out. */
const leastWeight = 1e-7

/**
 * Directions for the trapezoidal rule on the circle, exact to about 1e-7 for exp(−i k r cos) of reach k r (rad): the integrand is
 * periodic and its harmonics above k r + 6/σ vanish (Trefethen & Weideman 2014).
 */
export function spreadingNodes(spread: number, reach: number, nodes: SpreadingNodes): void {
  const s = spreadExponent(spread)
  const around = Math.min(720, Math.max(24, Math.ceil(reach + 6 / spread + 4)))
  const step = (2 * Math.PI) / around
  const half = Math.floor(around / 2)
  let reachOut = half
  for (let n = 1; n <= half; n++) {
    if (Math.pow(Math.cos((n * step) / 2), 2 * s) > leastWeight) continue
    reachOut = n - 1
    break
  }
  const full = reachOut === half && around % 2 === 0
  const count = 2 * reachOut + (full ? 0 : 1)
  if (nodes.offset.length < count) {
    nodes.offset = new Float64Array(2 * count)
    nodes.cos = new Float64Array(2 * count)
    nodes.sin = new Float64Array(2 * count)
    nodes.weight = new Float64Array(2 * count)
    nodes.weightByLogSpread = new Float64Array(2 * count)
  }
  nodes.count = count
  let sum = 0
  let sumLog = 0
  for (let i = 0; i < count; i++) {
    const offset = (i - reachOut + (full ? 1 : 0)) * step
    const cosHalf = Math.abs(Math.cos(offset / 2))
    const log = cosHalf > 1e-12 ? 2 * Math.log(cosHalf) : -55
    const weight = Math.exp(s * log)
    nodes.offset[i] = offset
    nodes.cos[i] = Math.cos(offset)
    nodes.sin[i] = Math.sin(offset)
    nodes.weight[i] = weight
    nodes.weightByLogSpread[i] = log
    sum += weight
    sumLog += weight * log
  }
  const meanLog = sumLog / sum
  const exponentByLogSpread = -4 / (spread * spread)
  for (let i = 0; i < count; i++) {
    nodes.weight[i] /= sum
    nodes.weightByLogSpread[i] = nodes.weight[i] * exponentByLogSpread * (nodes.weightByLogSpread[i] - meanLog)
  }
}
