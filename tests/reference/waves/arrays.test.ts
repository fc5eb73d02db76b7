/** Held against numbers of numpy and scipy: `arrays.py` makes `arrays.json`. */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { capon, conventional, iteratedCapon, steering } from '../../../shared/waves/directionalMethods.ts'
import { makeSpreadingNodes, spreadingNodes } from '../../../shared/waves/spreading.ts'
import { meanOfHighestThird } from '../../../shared/waves/waveByWave.ts'
import { fillWaveMatrices, waveMatrices } from '../../../shared/waves/waveMatrices.ts'
import { cramerRaoBound } from '../../bench/cramerRao.ts'
import { jonswapDensity } from '../../bench/seededSea.ts'

const numbers = z.array(z.number())
const reference = z
  .object({
    positions: z.array(z.tuple([z.number(), z.number()])),
    k: z.number(),
    direction: z.number(),
    spread: z.number(),
    noise: z.number(),
    real: numbers,
    imag: numbers,
    conventional: numbers,
    capon: numbers,
    iterated: numbers,
    steps: z.number(),
    bound: z.object({
      depth: z.number(),
      seconds: z.number(),
      peak: z.number(),
      height: z.number(),
      noise: z.number(),
      headingDegrees: z.number(),
      logSpeed: z.number(),
    }),
    rayleigh: z.object({ third: z.number(), heights: numbers }),
  })
  .parse(JSON.parse(readFileSync(join(import.meta.dirname, 'arrays.json'), 'utf8')))

const { k, direction, spread, noise, positions } = reference
const x = Float64Array.from(positions, ([east]) => east)
const y = Float64Array.from(positions, ([, north]) => north)
const sensors = positions.length
const diagonal = (n: number) => Math.floor(n / sensors) === n % sensors
const matrix = {
  real: Float64Array.from(reference.real, (v, n) => v + (diagonal(n) ? noise : 0)),
  imag: Float64Array.from(reference.imag),
}
const steer = steering(x, y, k, reference.capon.length, 0)

function furthest(found: ArrayLike<number>, told: readonly number[]): number {
  expect(found).toHaveLength(told.length)
  return told.reduce((most, value, n) => Math.max(most, Math.abs(found[n] - value)), 0)
}

describe('a spread sea over an array, against quadrature by scipy', () => {
  it('has coherences right to 1e-6', () => {
    const nodes = makeSpreadingNodes()
    spreadingNodes(spread, k * 2 * Math.max(...positions.map(([e, n]) => Math.hypot(e, n))), nodes)
    const waves = waveMatrices(sensors)
    fillWaveMatrices(x, y, direction, k, 0, nodes, waves)
    expect(furthest(waves.gamma.real, reference.real)).toBeLessThan(1e-6)
    expect(furthest(waves.gamma.imag, reference.imag)).toBeLessThan(1e-6)
  })

  it('has a Cramér-Rao bound of heading and speed right to 1 %', () => {
    const { depth, seconds, peak, height, noise: sensorNoise, headingDegrees, logSpeed } = reference.bound
    const degrees = 180 / Math.PI
    const bound = cramerRaoBound({
      positions: positions.map(([east, north]) => ({ east, north })),
      depth,
      seconds,
      toward: 90 - direction * degrees,
      spread: spread * degrees,
      density: jonswapDensity({ toward: 0, peakPeriod: 1 / peak, height, spread: 0, gamma: 3.3 }),
      noise: sensorNoise,
      from: 0.7 * peak,
      to: 1.9 * peak,
    })
    expect(Math.abs(bound.heading / headingDegrees - 1)).toBeLessThan(0.01)
    expect(Math.abs(bound.logSpeed / logSpeed - 1)).toBeLessThan(0.01)
  })
})

describe('directional densities of one matrix, against linear algebra by numpy', () => {
  it('agree for the conventional beam and for Capon’s method to 1e-10', () => {
    expect(furthest(conventional(steer, matrix), reference.conventional)).toBeLessThan(1e-10)
    expect(furthest(capon(steer, matrix) ?? [], reference.capon)).toBeLessThan(1e-10)
  })

  it('agree for IMLM, with as many steps, to 1e-8', () => {
    const found = iteratedCapon(steer, matrix, noise)
    expect(found).toMatchObject({ converged: true, steps: reference.steps })
    expect(furthest(found?.share ?? [], reference.iterated)).toBeLessThan(1e-8)
  })
})

describe('the mean of the highest third', () => {
  it('of heights at the quantiles of Rayleigh’s distribution is its conditional mean, 4.004 √m0', () => {
    const found = meanOfHighestThird(reference.rayleigh.heights.map((height) => ({ height, period: 10 })))
    expect(reference.rayleigh.third).toBeCloseTo(4.0043, 4)
    expect(Math.abs(found / reference.rayleigh.third - 1)).toBeLessThan(0.002)
  })
})
