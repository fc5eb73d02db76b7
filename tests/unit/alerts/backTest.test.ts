import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { backTest, figuresNeeded, shifted } from '../../../shared/alerts/backTest.ts'
import type { Stretch } from '../../../shared/alerts/backTest.ts'
import { judgeCondition } from '../../../shared/alerts/condition.ts'
import { atRest, follow } from '../../../shared/alerts/follow.ts'
import type { Condition } from '../../../shared/schemas/limit.ts'
import { noSystem, seaOf } from './seaFigures.ts'

const minute = 60_000
const start = Date.parse('2026-11-01T00:00:00Z')

const condition: Condition = {
  comparisons: [{ kind: 'above', quantity: 'significantWaveHeight', raise: 2, clear: 1.6, riseOverSeconds: null }],
  when: null,
  onDelaySeconds: 600,
  offDelaySeconds: 1800,
  clearSigmas: 0,
  worstQuality: 3,
  latches: false,
}

function stretchOf(heights: number[], startsAt = start): Stretch {
  const flags = Uint8Array.from(heights, (height) => (Number.isNaN(height) ? 0 : 1))
  return { startsAt, stepMs: minute, flags, series: { significantWaveHeight: Float32Array.from(heights) } }
}

const flat = (count: number, height: number): number[] => new Array<number>(count).fill(height)

describe('a back-test', () => {
  it('finds when it would have raised and cleared, and the highest value', () => {
    const { episodes, judgedMs } = backTest(condition, [stretchOf([...flat(60, 1), ...flat(59, 2.5), 2.75, ...flat(120, 1)])], start, 'Etc/UTC') // prettier-ignore
    expect(episodes).toEqual([
      {
        raisedAt: start + 70 * minute,
        clearedAt: start + 150 * minute,
        extreme: 2.75,
        extremeAt: start + 119 * minute,
      },
    ])
    expect(judgedMs).toBe(240 * minute)
  })

  it('leaves what is still active at the end open', () => {
    const { episodes } = backTest(condition, [stretchOf(flat(30, 2.5))], start, 'Etc/UTC')
    expect(episodes).toMatchObject([{ raisedAt: start + 10 * minute, clearedAt: null }])
  })

  it('counts no gap as judged, and lets none raise or clear', () => {
    const { episodes, judgedMs } = backTest(condition, [stretchOf([...flat(20, 2.5), ...flat(300, NaN), ...flat(20, 2.5)])], start, 'Etc/UTC') // prettier-ignore
    expect(episodes).toHaveLength(1)
    expect(judgedMs).toBe(40 * minute)
  })

  it('of a bearing over north reads toward and judges from', () => {
    const sector: Condition = {
      ...condition,
      comparisons: [{ kind: 'sector', quantity: 'leadingFrom', from: 350, to: 10, deadBand: 5 }],
    }
    const stretch = { ...stretchOf(flat(30, 1)), series: { towardDegrees: Float32Array.from(flat(30, 180)) } }
    expect(backTest(sector, [stretch], start, 'Etc/UTC').episodes).toMatchObject([{ extreme: null }])
  })

  it('of a rise looks back into the stretch before, and judges nothing without it', () => {
    const rise: Condition = { ...condition, comparisons: [{ kind: 'above', quantity: 'significantWaveHeight', raise: 0.5, clear: 0.2, riseOverSeconds: 3600 }] } // prettier-ignore
    const day = [stretchOf(flat(60, 1)), stretchOf(flat(30, 2), start + 60 * minute)]
    expect(backTest(rise, day, start, 'Etc/UTC')).toMatchObject({ episodes: [{ extreme: 1 }], judgedMs: 30 * minute })
  })

  it('names every series it needs', () => {
    const swell: Condition = { ...condition, comparisons: [{ kind: 'above', quantity: 'swellHeight', raise: 1, clear: 1, riseOverSeconds: null }] } // prettier-ignore
    expect(figuresNeeded(swell).sort()).toEqual([
      'significantWaveHeight',
      'significantWaveHeightSd',
      'swellHeight',
      'windSeaHeight',
    ])
  })

  it('shifted moves raise and clear together', () => {
    expect(shifted(condition, 0.25).comparisons).toMatchObject([{ raise: 2.25, clear: 1.85 }])
  })

  it('says what the live judgement says, window by window, of any sea with any gaps', () => {
    const height = fc.oneof({ weight: 9, arbitrary: fc.integer({ min: 2, max: 12 }).map((n) => n / 4) }, { weight: 1, arbitrary: fc.constant(NaN) }) // prettier-ignore
    const runs = fc.array(fc.tuple(height, fc.integer({ min: 1, max: 40 })), { minLength: 1, maxLength: 25 })
    fc.assert(
      fc.property(runs, fc.boolean(), (parts, isOnSwell) => {
        const heights = parts.flatMap(([value, count]) => flat(count, value))
        const quantity = isOnSwell ? 'swellHeight' : 'significantWaveHeight'
        const judged: Condition = { ...condition, comparisons: [{ kind: 'above', quantity, raise: 2, clear: 1.6, riseOverSeconds: null }] } // prettier-ignore
        const stretch = stretchOf(heights)
        stretch.series.swellHeight = Float32Array.from(heights, (value) => (value > 1.5 ? value : NaN))
        let track = atRest
        const raised: number[] = []
        for (const [slot, value] of heights.entries()) {
          if (Number.isNaN(value)) continue
          const at = start + slot * minute
          const swell = { ...noSystem, height: value > 1.5 ? value : null }
          const sea = seaOf({ significantWaveHeight: value, significantWaveHeightSd: null, swell })
          const { verdict } = judgeCondition(judged, { at, seen: { sea, health: null }, earlier: () => null, timeZone: 'Etc/UTC' }) // prettier-ignore
          const next = follow(track, verdict, at, judged)
          if (next.isActive && !track.isActive) raised.push(at)
          track = next
        }
        expect(backTest(judged, [stretch], start, 'Etc/UTC').episodes.map(({ raisedAt }) => raisedAt)).toEqual(raised)
      }),
      { seed: 4, numRuns: 300 },
    )
  })
})
