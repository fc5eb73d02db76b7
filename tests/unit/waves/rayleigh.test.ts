import { describe, expect, it } from 'vitest'
import { waveNumber } from '../../../shared/waves/dispersion.ts'
import { estimate } from '../../../shared/waves/estimate.ts'
import { defaultEstimateSettings } from '../../../shared/waves/window.ts'

/** A narrow long-crested swell of H_m0 1.6 m at 10 s, 20 min at 4 Hz, made of 240 sines of fixed height and seeded phase. */
const sampleRate = 4
const samples = 4800
const depth = 12
const positions = [
  [0, 0],
  [14, 3],
  [5, 15],
  [-9, 8],
] as const

function seededPhases(seed: number): () => number {
  let state = seed
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0
    return (state / 2 ** 32) * 2 * Math.PI
  }
}

function narrowSwell(seed: number): Float64Array[] {
  const phase = seededPhases(seed)
  const series = positions.map(() => new Float64Array(samples))
  const lines = 240
  const shape = Array.from({ length: lines }, (_, n) => Math.exp(-0.5 * ((n - 119.5) / 35) ** 2))
  const total = shape.reduce((sum, s) => sum + s, 0)
  shape.forEach((share, n) => {
    const frequency = 0.088 + 0.0001 * (n + 0.37 * Math.sin(n))
    const amplitude = Math.sqrt((2 * share * (1.6 / 4) ** 2) / total)
    const omega = 2 * Math.PI * frequency
    const k = waveNumber(omega, depth)
    const start = phase()
    positions.forEach(([east, north], m) => {
      const late = k * (east * 0.8 + north * 0.6)
      for (let i = 0; i < samples; i++) series[m][i] += amplitude * Math.cos((omega * i) / sampleRate - late + start)
    })
  })
  return series
}

/** Heights of single waves between zero up-crossings, highest first. */
function waveHeights(level: Float64Array): number[] {
  const heights: number[] = []
  let crest = -Infinity
  let trough = Infinity
  let isBegun = false
  for (let i = 1; i < level.length; i++) {
    if (level[i - 1] < 0 && level[i] >= 0) {
      if (isBegun) heights.push(crest - trough)
      isBegun = true
      crest = -Infinity
      trough = Infinity
    }
    crest = Math.max(crest, level[i])
    trough = Math.min(trough, level[i])
  }
  return heights.sort((a, b) => b - a)
}

const mean = (values: readonly number[]): number => values.reduce((sum, v) => sum + v, 0) / values.length

describe('the significant height of the spectrum beside single waves of a narrow sea', () => {
  const records = Array.from({ length: 24 }, (_, n) => {
    const series = narrowSwell(9000 + 77 * n)
    const heights = waveHeights(series[0])
    const third = mean(heights.slice(0, Math.round(heights.length / 3)))
    return { series, heights, third }
  })

  it('keeps the ratios of Rayleigh’s distribution (Longuet-Higgins 1952): mean 0.626, rms 0.706, highest tenth 1.271', () => {
    const over = (of: (heights: number[]) => number) => mean(records.map(({ heights, third }) => of(heights) / third))
    const rms = (heights: number[]) => Math.sqrt(mean(heights.map((height) => height * height)))
    const highestTenth = (heights: number[]) => mean(heights.slice(0, Math.round(heights.length / 10)))
    expect(Math.abs(over(mean) / 0.626 - 1)).toBeLessThan(0.03)
    expect(Math.abs(over(rms) / 0.706 - 1)).toBeLessThan(0.03)
    expect(Math.abs(over(highestTenth) / 1.271 - 1)).toBeLessThan(0.03)
  })

  it('is 4 √m0, within 3 % of the mean of the highest third, 4.004 √m0', () => {
    const ratios = records.slice(0, 6).map(({ series, third }) => {
      const sensors = positions.map(([east, north], m) => ({
        id: `S${m + 1}`,
        kind: 'surface' as const,
        east,
        north,
        heightAboveBed: depth,
      }))
      const window = { sampleRate, sensors, series, waterDepth: depth, waterDepthSource: 'nominal' as const }
      const { significantWaveHeight } = estimate({ ...window, settings: defaultEstimateSettings })
      return third / (significantWaveHeight ?? Number.NaN)
    })
    expect(Math.abs(mean(ratios) / (4.004 / 4) - 1)).toBeLessThan(0.03)
  })
})
