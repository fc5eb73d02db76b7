import { describe, expect, it } from 'vitest'
import { backTestPath, backTestScale, dayTicks } from '../../../src/components/limits/backTestLayout.ts'
import { niceTicks, tickPlaces, unbroken } from '../../../src/components/drawings/geometry/niceScale.ts'
import type { BackTestView } from '../../../shared/schemas/backTest.ts'

const run = { raise: 1, clear: 0.85, count: 0, activeSeconds: 0, aWeek: 0, episodes: [] }
const hour = (n: number): string => new Date(Date.parse('2026-11-12T00:00:00.000Z') + n * 3_600_000).toISOString()
const view: BackTestView = {
  ...{ from: hour(0), to: hour(10), quantity: 'significantWaveHeight', judgedSeconds: 0, missingSeconds: 0 },
  ...{ daysWithoutFigure: 0, daysWithoutError: 0 },
  ...{ gaps: [], isInvented: false, draft: run, others: [], stepSeconds: 3600 },
  points: [0, 1, 2, 6, 7].map((n) => ({ at: hour(n), least: 0.5, most: n === 2 ? 1.5 : 0.5 })),
}
const box = { width: 1000, height: 360, left: 50, right: 50, top: 10, bottom: 50 }

describe('the drawing of a back-test', () => {
  it('spans the whole time and holds line and figures', () => {
    const scale = backTestScale(view, [1, 0.85], box)
    expect(scale.x(Date.parse(view.from))).toBe(50)
    expect(scale.x(Date.parse(view.to))).toBe(950)
    expect(scale.ticks.at(-1)).toBeGreaterThanOrEqual(1.5)
    expect(scale.valueAt(scale.y(1.234))).toBeCloseTo(1.234, 9)
  })

  it('draws the most of each step and leaves a gap where figures are missing', () => {
    const path = backTestPath(view, backTestScale(view, [1], box))
    expect(path.match(/M/g)).toHaveLength(2)
    expect(path.match(/L/g)).toHaveLength(4)
  })

  it('names about seven days, each at midnight UTC', () => {
    const days = dayTicks(Date.parse('2026-10-13T12:00:00Z'), Date.parse('2026-11-12T12:00:00Z'))
    expect(days.length).toBeGreaterThanOrEqual(6)
    expect(days.length).toBeLessThanOrEqual(8)
    for (const ms of days) expect(ms % 86_400_000).toBe(0)
  })
})

describe('an axis', () => {
  it('has round steps that hold both ends', () => {
    expect(niceTicks(0, 1.5)).toEqual([0, 0.5, 1, 1.5])
    expect(niceTicks(0, 11)).toEqual([0, 2, 4, 6, 8, 10, 12])
    expect(tickPlaces(niceTicks(0, 0.09))).toBe(2)
    expect(niceTicks(3, 3)).toEqual([3])
  })

  it('breaks a line at gaps and where a bearing passes north', () => {
    const at = (minutes: number, value: number) => ({ ms: minutes * 60_000, value })
    expect(unbroken([at(0, 1), at(5, 2), at(60, 3)], 20 * 60_000)).toHaveLength(2)
    expect(unbroken([at(0, 355), at(5, 4)], 20 * 60_000, true)).toHaveLength(2)
    expect(unbroken([at(0, 355), at(5, 350)], 20 * 60_000, true)).toHaveLength(1)
  })
})
