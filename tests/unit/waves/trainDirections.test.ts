import { describe, expect, it } from 'vitest'
import { estimate } from '../../../shared/waves/estimate.ts'
import { fiveSensors, spreadSea } from './spreadSea.ts'

describe('the directional spectrum of the trains', () => {
  const result = estimate(
    spreadSea({ seed: 21, toward: 200, peakPeriod: 10, height: 1, spread: 16, depth: 12, positions: fiveSensors }),
  )
  const found = result.directionalSpectrum

  it('integrates over direction to the density of the fitted trains and peaks at their heading', () => {
    expect(found?.converged).toBe(true)
    const peak = found?.density.reduce((best, row) => (Math.max(...row) > Math.max(...best) ? row : best)) ?? []
    const heading = found?.directions[peak.indexOf(Math.max(...peak))] ?? NaN
    expect(Math.abs(heading - result.systems[0].toward)).toBeLessThanOrEqual(3)
  })

  it('holds no negative and no undetermined number', () => {
    expect(found?.density.flat().every((value) => value >= 0 && Number.isFinite(value))).toBe(true)
  })
})
