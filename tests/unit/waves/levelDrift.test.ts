import { describe, expect, it } from 'vitest'
import { levelDrift } from '../../../shared/waves/levelDrift.ts'
import { dice } from './spreadSea.ts'

const ids = ['A', 'B', 'C', 'D']
const hour = 3_600_000

/** A week of hours with a tide of 4 m, a centimetre of chance, and what each sensor adds to it. */
function week(added: (id: string, hours: number) => number, hours = 168) {
  const next = dice(3)
  return Array.from({ length: hours }, (_, n) => ({
    at: n * hour,
    depths: ids.map((id) => ({
      id,
      waterDepth: 12 + 2 * Math.sin((2 * Math.PI * n) / 12.42) + 0.01 * (next() - 0.5) + added(id, n),
    })),
  }))
}

describe('the drift of levels over days', () => {
  it('is none where the tide alone moves them, whatever stands off from the start', () => {
    const tests = levelDrift(
      week((id) => (id === 'B' ? 0.4 : 0)),
      ids,
      0.1,
    )
    expect(tests.map(({ flag }) => flag)).toEqual([1, 1, 1, 1])
    for (const { value } of tests) expect(value).toBeLessThan(0.01)
  })

  it('names the one sensor that sinks, by how much', () => {
    const tests = levelDrift(
      week((id, n) => (id === 'C' ? (0.3 * n) / 168 : 0)),
      ids,
      0.1,
    )
    expect(tests.map(({ flag }) => flag)).toEqual([1, 1, 3, 1])
    // Middle of the last quarter less that of the first: three quarters of the way.
    expect(tests[2].value).toBeCloseTo(0.225, 2)
    expect(tests[2].detail).toContain('C: level moved by 0.22')
  })

  it('is not evaluated from less than a day, nor from two sensors', () => {
    expect(
      levelDrift(
        week(() => 0, 20),
        ids,
        0.1,
      ).map(({ flag }) => flag),
    ).toEqual([2, 2, 2, 2])
    const two = week(() => 0).map(({ at, depths }) => ({ at, depths: depths.slice(0, 2) }))
    expect(levelDrift(two, ids, 0.1).map(({ flag }) => flag)).toEqual([2, 2, 2, 2])
  })
})
