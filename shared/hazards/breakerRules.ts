/**
 * Published rules for the height at which a wave breaks in a depth, each with its source and range. Those made for regular waves are
 * applied here to the significant height, which breaks as a whole only roughly; those for a random sea are made for it. No rule is
 * right for every beach: their spread is part of the answer.
 */
import { standardGravity, waveNumber } from '../waves/dispersion.ts'
import { deepWaterLength } from './shoaling.ts'

export interface BreakerRule {
  key: 'mccowan' | 'miche' | 'weggel' | 'goda' | 'saturation'
  name: string
  source: string
  madeFor: 'regular waves' | 'a random sea'
  fromMemory: boolean
  /** Slopes (tan β) the rule was made for. */
  slopes: { from: number; to: number }
  /** Highest unbroken wave, m, at a depth (m), period (s) and slope (tan β). */
  limit(depth: number, period: number, slope: number, gravity?: number): number
}

/**
 * γ_b = H_b/h_b = b − a H_b/(g T²), a = 43.8 (1 − e^{−19 tan β}), b = 1.56/(1 + e^{−19.5 tan β}) (Weggel 1972; CEM II-4-5 to 7).
 * Height in m, period in s.
 */
export function weggelIndex(breakerHeight: number, period: number, slope: number, gravity = standardGravity): number {
  const { a, b } = weggelFactors(slope)
  return b - (a * breakerHeight) / (gravity * period * period)
}

const weggelFactors = (slope: number): { a: number; b: number } => ({
  a: 43.8 * (1 - Math.exp(-19 * slope)),
  b: 1.56 / (1 + Math.exp(-19.5 * slope)),
})

/** H_b/L₀ = A {1 − exp[−1.5 π (h/L₀) (1 + K tan^{4/3} β)]} with the revised K = 11 (Goda 2010) and A = 0.17 for regular waves. */
export function godaLimit(
  depth: number,
  period: number,
  slope: number,
  { amplitude = 0.17, slopeFactor = 11, gravity = standardGravity } = {},
): number {
  const length = deepWaterLength(period, gravity)
  const steepness = 1 + slopeFactor * Math.max(0, slope) ** (4 / 3)
  return amplitude * length * (1 - Math.exp((-1.5 * Math.PI * depth * steepness) / length))
}

/**
 * H_b = 0.56 (H₀/L₀)^{−1/5} H₀ (Komar & Gaughan 1972; CEM II-4-8). H₀ is the deep-water height with refraction but without shoaling, m.
 */
export const komarGaughanHeight = (deepHeight: number, period: number, gravity = standardGravity): number =>
  0.56 * (deepHeight / deepWaterLength(period, gravity)) ** -0.2 * deepHeight

export const breakerRules: BreakerRule[] = [
  {
    ...{ key: 'mccowan', name: 'height 0.78 of the depth', source: 'McCowan 1894', madeFor: 'regular waves' },
    ...{ fromMemory: false, slopes: { from: 0, to: 0.02 } },
    limit: (depth) => 0.78 * depth,
  },
  {
    ...{ key: 'miche', name: 'H = 0.142 L tanh kh', source: 'Miche 1944', madeFor: 'regular waves' },
    ...{ fromMemory: false, slopes: { from: 0, to: 0.02 } },
    limit: (depth, period, _slope, gravity = standardGravity) => {
      const k = waveNumber((2 * Math.PI) / period, depth, gravity)
      return ((0.142 * 2 * Math.PI) / k) * Math.tanh(k * depth)
    },
  },
  {
    ...{ key: 'weggel', name: 'Weggel’s index', source: 'Weggel 1972; CEM II-4-5 to 7', madeFor: 'regular waves' },
    ...{ fromMemory: false, slopes: { from: 0, to: 0.1 } },
    limit: (depth, period, slope, gravity = standardGravity) => {
      const { a, b } = weggelFactors(slope)
      return (b * depth) / (1 + (a * depth) / (gravity * period * period))
    },
  },
  {
    ...{ key: 'goda', name: 'Goda’s formula, 0.7 of regular waves', source: 'Goda 1974, revised 2010' },
    ...{ madeFor: 'a random sea', fromMemory: false, slopes: { from: 0, to: 0.1 } },
    // Significant height at incipient breaking about 30 % below that of regular waves (Goda 2010).
    limit: (depth, period, slope, gravity = standardGravity) => 0.7 * godaLimit(depth, period, slope, { gravity }),
  },
  {
    ...{ key: 'saturation', name: 'significant height 0.6 of the depth', source: 'Thornton & Guza 1982' },
    ...{ madeFor: 'a random sea', fromMemory: true, slopes: { from: 0, to: 0.05 } },
    limit: (depth) => 0.6 * depth,
  },
]
