import { describe, expect, it } from 'vitest'
import type { SeriesPoint } from '../../../shared/schemas/station.ts'
import { periodStep } from '../../../src/components/drawings/geometry/periodTone.ts'
import {
  ribbonMiddle,
  ribbonPoints,
  ribbonScale,
  stretches,
  tonedRuns,
} from '../../../src/components/drawings/geometry/ribbonRuns.ts'
import { landPieces } from '../../../src/components/drawings/geometry/ribbonLayout.ts'

const now = Date.UTC(2026, 10, 12, 14, 30)
const point = (minutesAgo: number, changes: Partial<SeriesPoint> = {}): SeriesPoint => ({
  at: new Date(now - minutesAgo * 60_000).toISOString(),
  qualityFlag: 1,
  resolved: true,
  toward: 67,
  significantWaveHeight: 2.4,
  height: 2.1,
  period: 12.4,
  speed: 11.4,
  spread: 14,
  ...changes,
})
const every = (minutes: number, count: number): SeriesPoint[] =>
  Array.from({ length: count }, (_, index) => point(index * minutes))

describe('the points of a ribbon', () => {
  it('stand on the bearing the waves come from, unrolled about the middle', () => {
    const points = ribbonPoints([point(0), point(5, { toward: 175 }), point(10, { toward: 185 })], now, 12, 0)
    expect(points.map(({ from }) => from)).toEqual([-113, -5, 5])
  })

  it('leave out what is unresolved, failed or missing', () => {
    const kept = ribbonPoints(
      [
        point(0, { resolved: false, toward: null }),
        point(1, { qualityFlag: 4 }),
        point(2, { qualityFlag: 9 }),
        point(3),
      ],
      now,
      12,
      240,
    )
    expect(kept).toHaveLength(1)
  })

  it('end at the age of the ribbon', () => {
    expect(ribbonPoints([point(719), point(721)], now, 12, 240)).toHaveLength(1)
  })
})

describe('a gap in the ribbon', () => {
  it('is what was not measured: two windows missing of a minute each are none, four are one', () => {
    const near = every(1, 30).filter((_, index) => index !== 12)
    const far = every(1, 30).filter((_, index) => index < 12 || index > 15)
    expect(stretches(ribbonPoints(near, now, 12, 240))).toHaveLength(1)
    expect(stretches(ribbonPoints(far, now, 12, 240))).toHaveLength(2)
  })

  it('is not seen where a step of one minute goes over into steps of five', () => {
    const mixed = [...every(1, 20), ...every(5, 40).map((one, index) => ({ ...one, at: point(20 + index * 5).at }))]
    expect(stretches(ribbonPoints(mixed, now, 12, 240))).toHaveLength(1)
  })

  it('is seen on both sides of a lone window', () => {
    const lone = [...every(1, 10), point(30), ...Array.from({ length: 10 }, (_, index) => point(50 + index))]
    expect(stretches(ribbonPoints(lone, now, 12, 240)).map((stretch) => stretch.length)).toEqual([10, 1, 10])
  })
})

describe('the runs of a stretch', () => {
  it('change where the period goes over a step or the quality changes, and share that point', () => {
    const stretch = ribbonPoints(
      [
        point(0),
        point(1),
        point(2, { period: 11.9 }),
        point(3, { period: 11.9 }),
        point(4, { period: 11.9, qualityFlag: 3 }),
      ],
      now,
      12,
      240,
    )
    const runs = tonedRuns(stretch)
    expect(runs.map((run) => run.length)).toEqual([3, 3])
    expect(runs[0].at(-1)).toBe(runs[1][0])
  })

  it('have the steps of the key: under 6, from 6, 8, 10, 12, 14 s', () => {
    expect([5.9, 6, 7.9, 8, 10, 12, 14, 25].map(periodStep)).toEqual([1, 2, 2, 3, 4, 5, 6, 6])
  })
})

describe('the frame of a ribbon', () => {
  it('has the middle of the open sea in its middle', () => {
    expect(ribbonMiddle([[330, 150]], [])).toBe(240)
    expect(ribbonMiddle([[140, 310]], [])).toBe(45)
  })

  it('is where the waves came from when no land is known, by energy and across north', () => {
    const low = { toward: 120, height: 0.2 }
    const high = [
      { toward: 175, height: 2 },
      { toward: 185, height: 2 },
    ]
    expect(ribbonMiddle([], [low, ...high, { toward: null, height: null }])).toBe(0)
    expect(ribbonMiddle([], [])).toBe(180)
  })

  it('shows land on both sides where the sector reaches around', () => {
    const frame = { left: 0, top: 0, width: 220, height: 100, centre: 240, half: 110, hours: 12, scale: 8.5 }
    expect(landPieces(frame, [[330, 150]])).toEqual([
      { from: 130, to: 150 },
      { from: 330, to: 350 },
    ])
  })

  it('widens for a sea below one metre', () => {
    expect(ribbonScale([point(0)], false)).toBe(8.5)
    expect(ribbonScale([point(0, { height: 0.4 })], false)).toBe(14)
  })
})
