import { describe, expect, it } from 'vitest'
import { crestsOf, followCrests, smoothed } from '../../../src/components/drawings/geometry/crestPicks.ts'

describe('a crest of one trace', () => {
  it('is found between samples to 0.0025 sample for 16 samples a period', () => {
    // Parabola through the three highest samples of a pure cosine: largest error over all positions, computed from
    // delta = 0.5 (a - c) / (a - 2b + c) with a, b, c = cos(2 pi (n - d) / 16): 0.0025 sample.
    for (let offset = -0.5; offset <= 0.5; offset += 0.05) {
      const values = Array.from({ length: 40 }, (_, n) => Math.cos((2 * Math.PI * (n - 16 - offset)) / 16))
      const nearest = crestsOf(values, 1).filter((crest) => Math.abs(crest.time - 16 - offset) < 1)
      expect(nearest).toHaveLength(1)
      expect(Math.abs(nearest[0].time - 16 - offset)).toBeLessThan(0.0026)
    }
  })

  it('is not found beside a missing sample', () => {
    expect(crestsOf([0, 1, Number.NaN, 1, 0], 1)).toEqual([])
  })

  it('keeps gaps through smoothing', () => {
    expect(smoothed([1, 1, Number.NaN, 1, 1, 1, 1], 1).map(Number.isNaN)).toEqual([
      false,
      true,
      true,
      true,
      false,
      false,
      false,
    ])
  })
})

describe('a crest followed over the sensors', () => {
  const interval = 0.25
  const period = 12
  const slowness = 1 / 11.4
  const alongs = [0, 25, 40, 62, 90]
  const traces = alongs.map((along) => ({
    along,
    values: Array.from({ length: 360 }, (_, n) =>
      Math.cos((2 * Math.PI * (n * interval - along * slowness - 3)) / period),
    ),
  }))

  it('passes each sensor at the time that its own trace says', () => {
    const [newest] = followCrests(traces, interval, slowness, period)
    newest.picks.forEach((pick, index) =>
      expect(pick?.time).toBeCloseTo(newest.passesFirst + alongs[index] * slowness, 2),
    )
  })

  it('is found once for each period, newest first', () => {
    const starts = followCrests(traces, interval, slowness, period).map((crest) => crest.passesFirst)
    expect(starts).toHaveLength(7)
    starts.slice(1).forEach((start, index) => expect(starts[index] - start).toBeCloseTo(period, 2))
  })

  it('is measured, not drawn from the fit: a late clock shows as a late pick', () => {
    const late = traces.map((trace, index) =>
      index === 2
        ? {
            ...trace,
            values: trace.values.map((_, n) =>
              Math.cos((2 * Math.PI * (n * interval - 0.8 - trace.along * slowness - 3)) / period),
            ),
          }
        : trace,
    )
    const right = followCrests(traces, interval, slowness, period)[0]
    const wrong = followCrests(late, interval, slowness, period)[0]
    expect((wrong.picks[2]?.time ?? 0) - (right.picks[2]?.time ?? 0)).toBeCloseTo(0.8, 2)
  })

  it('is not claimed from fewer than three sensors', () => {
    const silent = traces.map((trace, index) =>
      index < 2 ? trace : { ...trace, values: trace.values.map(() => Number.NaN) },
    )
    expect(followCrests(silent, interval, slowness, period)).toEqual([])
  })
})
