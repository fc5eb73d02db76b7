import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { systematicVariance } from '../../../shared/waves/systematicError.ts'
import { fitSlowness, velocityOf } from '../../../shared/waves/slownessFit.ts'

describe('slowness from lags', () => {
  it('over baselines of 30 m east and 40 m north with lags 2.0000 s and 4.6188 s is 7.5 m/s toward 60° from east', () => {
    const fit = fitSlowness(
      [0, 30, 0],
      [0, 0, 40],
      [
        { i: 0, j: 1, lag: 2, weight: 1 },
        { i: 0, j: 2, lag: 4.6188, weight: 1 },
      ],
    )
    const { speed, direction } = velocityOf(fit?.x ?? 0, fit?.y ?? 0)
    expect(speed).toBeCloseTo(7.5, 4)
    expect((direction * 180) / Math.PI).toBeCloseTo(60, 3)
  })

  it('is no vector of trace speeds: 15.000 and 8.660 m/s along the axes belong to 7.5 m/s, not to 17.32', () => {
    const along = 30 / 2
    const across = 40 / 4.6188
    expect(along).toBeCloseTo(15, 3)
    expect(across).toBeCloseTo(8.66, 3)
    expect(Math.hypot(along, across)).toBeCloseTo(17.32, 2)
    expect(1 / Math.hypot(1 / along, 1 / across)).toBeCloseTo(7.5, 3)
  })

  it('turns with the axes and does not care for the order of the sensors', () => {
    const angle = fc.double({ min: -Math.PI, max: Math.PI, noNaN: true })
    const speed = fc.double({ min: 2, max: 20, noNaN: true })
    fc.assert(
      fc.property(angle, angle, speed, (heading, turn, c) => {
        const x = [0, 14, 3, -9]
        const y = [0, 2, 11, 6]
        const s = [Math.cos(heading) / c, Math.sin(heading) / c]
        const turned = x.map((_, n) => ({
          x: x[n] * Math.cos(turn) - y[n] * Math.sin(turn),
          y: x[n] * Math.sin(turn) + y[n] * Math.cos(turn),
        }))
        const order = [2, 0, 3, 1]
        const lags = []
        for (let a = 0; a < 4; a++) {
          for (let b = a + 1; b < 4; b++) {
            const [i, j] = [order[a], order[b]]
            lags.push({ i: a, j: b, lag: s[0] * (x[j] - x[i]) + s[1] * (y[j] - y[i]), weight: 1 })
          }
        }
        const fit = fitSlowness(
          order.map((n) => turned[n].x),
          order.map((n) => turned[n].y),
          lags,
        )
        const found = velocityOf(fit?.x ?? 0, fit?.y ?? 0)
        expect(Math.abs(found.speed / c - 1)).toBeLessThan(1e-9)
        expect(Math.abs(Math.sin((found.direction - heading - turn) / 2))).toBeLessThan(1e-9)
      }),
    )
  })

  it('counts sensors, not pairs: a 20 m square with 0.05 s a sensor is known to 0.0025 s/m', () => {
    const sensors = [0, 1, 2, 3].map((n) => ({
      id: String(n),
      kind: 'surface' as const,
      east: 0,
      north: 0,
      heightAboveBed: 8,
      clockSd: 0.05,
      positionSd: 1e-9,
    }))
    const variance = systematicVariance(
      sensors,
      Float64Array.of(0, 20, 20, 0),
      Float64Array.of(0, 0, 20, 20),
      28,
      0.4,
      8,
    )
    // Variance of ln speed is c² times that of the slowness along the heading.
    expect(Math.sqrt(variance.logSpeed) / 8).toBeCloseTo(0.0025, 6)
    expect(Math.sqrt(variance.direction) / 8).toBeCloseTo(0.0025, 6)
  })

  it('is not given for sensors on one line', () => {
    const lags = [
      { i: 0, j: 1, lag: 1, weight: 1 },
      { i: 1, j: 2, lag: 1, weight: 1 },
    ]
    expect(fitSlowness([0, 1, 2], [0, 2, 4], lags)).toBeNull()
  })
})
