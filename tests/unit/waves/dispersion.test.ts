import { describe, expect, it } from 'vitest'
import { groupRatio, groupSpeed, phaseSpeed, pressureResponse, waveNumber } from '../../../shared/waves/dispersion.ts'
import { dopplerWaveNumber } from '../../../shared/waves/dopplerDispersion.ts'

/** d/L0, d/L, tanh kd, K = 1/cosh kd, n: Shore Protection Manual 1984, Table C-1. */
const tableC1 = [
  [0.001, 0.01263, 0.0792, 0.9969, 0.9979],
  [0.005, 0.02836, 0.1763, 0.9843, 0.9896],
  [0.01, 0.04032, 0.248, 0.9688, 0.9792],
  [0.02, 0.05763, 0.3471, 0.9378, 0.9588],
  [0.05, 0.09415, 0.531, 0.8473, 0.8999],
  [0.1, 0.14098, 0.7093, 0.7049, 0.8102],
  [0.15, 0.1833, 0.8183, 0.5748, 0.7325],
  [0.2, 0.22512, 0.8884, 0.459, 0.6677],
  [0.25, 0.26788, 0.9333, 0.3592, 0.6163],
  [0.3, 0.31212, 0.9612, 0.2759, 0.5777],
  [0.5, 0.50183, 0.9964, 0.0853, 0.5115],
  [1, 1.00001, 1, 0.0037, 0.5],
]

/** T s, d m, L m, c m/s, C_g m/s, K_p at the bed, g = 9.81: computed apart by bisection. */
const worked = [
  [6, 8, 45.224, 7.537, 5.605, 0.5938],
  [8, 10, 70.898, 8.862, 7.18, 0.7047],
  [10, 3, 53.156, 5.316, 5.105, 0.9403],
  [12, 9, 108.013, 9.001, 8.273, 0.877],
  [15, 35, 248.827, 16.588, 13.451, 0.7059],
  [20, 10, 194.764, 9.738, 9.416, 0.9501],
]

describe('linear dispersion', () => {
  it.each(tableC1)('at d/L0 = %s gives the row of the Shore Protection Manual', (ratio, dL, tanhKd, response, n) => {
    const period = 10
    const depth = (ratio * 9.81 * period * period) / (2 * Math.PI)
    const k = waveNumber((2 * Math.PI) / period, depth)
    expect((k * depth) / (2 * Math.PI)).toBeCloseTo(dL, 4)
    expect(Math.tanh(k * depth)).toBeCloseTo(tanhKd, 3)
    expect(pressureResponse(k, depth, 0)).toBeCloseTo(response, 3)
    expect(groupRatio(k, depth)).toBeCloseTo(n, 3)
  })

  it('in the Coastal Engineering Manual example II-1-1 (10 s, 3 m) gives 53.2 m and 5.32 m/s', () => {
    const speed = phaseSpeed(10, 3)
    expect(speed).toBeCloseTo(5.32, 2)
    expect(speed * 10).toBeCloseTo(53.2, 1)
  })

  it.each(worked)('of %s s in %s m agrees with values computed apart', (period, depth, length, c, cg, response) => {
    expect(phaseSpeed(period, depth) * period).toBeCloseTo(length, 2)
    expect(phaseSpeed(period, depth)).toBeCloseTo(c, 3)
    expect(groupSpeed(period, depth)).toBeCloseTo(cg, 3)
    expect(pressureResponse(waveNumber((2 * Math.PI) / period, depth), depth, 0)).toBeCloseTo(response, 4)
  })

  it('solves its equation to rounding from very shallow to very deep water', () => {
    for (let kh = 0.01; kh < 35; kh *= 1.3) {
      const omega = Math.sqrt(9.81 * kh * Math.tanh(kh))
      expect(waveNumber(omega, 1)).toBeCloseTo(kh, 9 - Math.ceil(Math.log10(Math.max(1, kh))))
    }
  })

  it('refuses a depth, gravity or period that is not above zero', () => {
    expect(() => waveNumber(1, 0)).toThrow(RangeError)
    expect(() => waveNumber(1, 5, -9)).toThrow(RangeError)
    expect(() => waveNumber(-1, 5)).toThrow(RangeError)
    expect(() => phaseSpeed(0, 5)).toThrow(RangeError)
    expect(waveNumber(0, 5)).toBe(0)
  })
})

describe('dispersion on a current', () => {
  const at = (omega: number, depth: number, current: number) => {
    const wave = { k: 0, dkByCurrent: 0, dkByLogDepth: 0 }
    dopplerWaveNumber(omega, depth, current, 9.81, wave)
    return wave
  }

  it.each([-1, -0.3, 0, 0.5, 1.5])('of %s m/s satisfies ω = σ + kU', (current) => {
    const { k } = at(0.7, 9, current)
    expect(Math.sqrt(9.81 * k * Math.tanh(9 * k)) + k * current).toBeCloseTo(0.7, 12)
  })

  it('has the derivatives that differences show', () => {
    const wave = at(0.8, 7, 0.4)
    const h = 1e-5
    expect(wave.dkByCurrent).toBeCloseTo((at(0.8, 7, 0.4 + h).k - at(0.8, 7, 0.4 - h).k) / (2 * h), 8)
    const deeper = at(0.8, 7 * Math.exp(h), 0.4).k
    const shallower = at(0.8, 7 * Math.exp(-h), 0.4).k
    expect(wave.dkByLogDepth).toBeCloseTo((deeper - shallower) / (2 * h), 8)
  })
})
