import { describe, expect, it } from 'vitest'
import { fitPeak, jonswapShape } from '../../../shared/waves/jonswap.ts'
import { spectralParameters } from '../../../shared/waves/spectralParameters.ts'
import { fullyDevelopedPeak, systemName } from '../../../shared/waves/windSea.ts'

function jonswap(gamma: number, peak: number) {
  const step = peak / 400
  const frequency = Float64Array.from({ length: 8000 }, (_, n) => (n + 40) * step)
  const width = frequency.map(() => step)
  return { frequency, width, density: frequency.map((f) => jonswapShape(f, peak, gamma)) }
}

describe('parameters of a JONSWAP spectrum', () => {
  /** γ, T_m01/T_p, T_m02/T_p, T_e/T_p, integrated to 20 f_p. */
  it.each([
    [1, 0.772, 0.711, 0.857],
    [3.3, 0.834, 0.778, 0.903],
    [7, 0.878, 0.829, 0.931],
  ])('with γ = %s have the known ratios of mean to peak period', (gamma, tm01, tm02, te) => {
    const { frequency, width, density } = jonswap(gamma, 0.1)
    const found = spectralParameters(frequency, width, density, 20, 9.81, 1025, 1200)
    expect((found?.firstMomentPeriod ?? 0) / 10).toBeCloseTo(tm01, 2)
    expect((found?.meanPeriod ?? 0) / 10).toBeCloseTo(tm02, 2)
    expect((found?.energyPeriod ?? 0) / 10).toBeCloseTo(te, 2)
  })

  /** Coefficient of variation of H_m0 over 20 min at T_p = 10 s. */
  it.each([
    [1, 4.3],
    [3.3, 5.6],
    [7, 6.9],
  ])('with γ = %s have a height uncertain by %s %% in 20 minutes', (gamma, cv) => {
    const { frequency, width, density } = jonswap(gamma, 0.1)
    const found = spectralParameters(frequency, width, density, 20, 9.81, 1025, 1200)
    expect(50 * (found?.samplingError ?? 0)).toBeCloseTo(cv, 0)
  })

  it('of 2 m and an energy period of 9 s carry 17.66 kW/m in deep water', () => {
    const frequency = Float64Array.of(1 / 9)
    const found = spectralParameters(
      frequency,
      Float64Array.of(0.01),
      Float64Array.of(0.25 / 0.01),
      5000,
      9.81,
      1025,
      1200,
    )
    expect(found?.significantWaveHeight).toBeCloseTo(2, 9)
    expect((found?.energyFlux ?? 0) / 1000).toBeCloseTo(17.66, 1)
  })

  it('without energy are not given', () => {
    const zero = new Float64Array(3)
    expect(spectralParameters(Float64Array.of(0.1, 0.2, 0.3), zero, zero, 10, 9.81, 1025, 1200)).toBeNull()
  })
})

describe('the peak of a spectrum', () => {
  it.each([1, 3.3, 6])('of JONSWAP shape with γ = %s is found between the bins', (gamma) => {
    const frequency = Float64Array.from({ length: 60 }, (_, n) => 0.05 + 0.005 * n)
    const density = frequency.map((f) => 3 * jonswapShape(f, 0.1234, gamma))
    const zero = new Float64Array(60)
    const found = fitPeak(frequency, density, new Float64Array(60).fill(6), zero, 0.13)
    expect(found.peak).toBeCloseTo(0.1234, 3)
    expect(found.density).toBeCloseTo(3, 0)
  })
})

describe('a system of waves', () => {
  it('is wind sea when its peak stands above the fully developed one of Pierson & Moskowitz, else swell', () => {
    const full = fullyDevelopedPeak(0.1, 9.81)
    expect(systemName(0.1, 1.1 * full, 9.81)).toBe('wind sea')
    expect(systemName(0.1, 0.9 * full, 9.81)).toBe('swell')
  })
})
