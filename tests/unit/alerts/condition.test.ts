import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { degreesOutside, judgeComparison } from '../../../shared/alerts/compare.ts'
import { judgeCondition } from '../../../shared/alerts/condition.ts'
import type { Moment } from '../../../shared/alerts/condition.ts'
import { atRest, follow } from '../../../shared/alerts/follow.ts'
import type { Track } from '../../../shared/alerts/follow.ts'
import { quantities, quantityOf } from '../../../shared/alerts/quantities.ts'
import { quantityKey } from '../../../shared/schemas/limit.ts'
import type { Comparison, Condition } from '../../../shared/schemas/limit.ts'
import { noSystem, seaOf } from './seaFigures.ts'

const height: Comparison = {
  kind: 'above',
  quantity: 'significantWaveHeight',
  raise: 2.5,
  clear: 2.1,
  riseOverSeconds: null,
}
const conditionOf = (comparisons: Comparison[], changes: Partial<Condition> = {}): Condition => ({
  ...{
    comparisons,
    when: null,
    onDelaySeconds: 600,
    offDelaySeconds: 1800,
    clearSigmas: 1,
    worstQuality: 3,
    latches: false,
  },
  ...changes,
})
const momentOf = (sea: Moment['seen']['sea'], changes: Partial<Moment> = {}): Moment => ({
  ...{ at: Date.parse('2026-12-01T12:00:00Z'), seen: { sea, health: null }, earlier: () => null, timeZone: 'Etc/UTC' },
  ...changes,
})

describe('a threshold', () => {
  it.each([
    [2.51, 0.1, 'raise'],
    [2.5, 0.1, 'hold'],
    [2.3, 0.1, 'hold'],
    [2.05, 0.1, 'hold'],
    [1.99, 0.1, 'clear'],
    [NaN, 0.1, 'unknown'],
  ])('at %d m ± %d says %s: it raises on the value and clears on the upper bound', (value, sd, verdict) => {
    expect(judgeComparison(height, value, sd, NaN, 1)).toBe(verdict)
  })

  it('that looks for low values is the mirror of it, and a count that is back at its line is clear', () => {
    const below: Comparison = { kind: 'below', quantity: 'usableSensors', raise: 4, clear: 5 }
    expect([3, 4, 5, 6].map((value) => judgeComparison(below, value, 0, NaN, 0))).toEqual([
      'raise',
      'hold',
      'clear',
      'clear',
    ])
    const same: Comparison = { ...below, clear: 4 }
    expect([3, 4].map((value) => judgeComparison(same, value, 0, NaN, 0))).toEqual(['raise', 'clear'])
  })
})

describe('a sector', () => {
  const sector: Comparison = { kind: 'sector', quantity: 'swellFrom', from: 330, to: 30, deadBand: 10 }

  it.each([
    [330, 'raise'],
    [359, 'raise'],
    [0, 'raise'],
    [30, 'raise'],
    [39, 'hold'],
    [41, 'hold'],
    [44, 'clear'],
    [180, 'clear'],
    [321, 'hold'],
    [316, 'clear'],
  ])('over north, waves from %d° say %s: dead-band 10° and ± 3° on either side', (bearing, verdict) => {
    expect(judgeComparison(sector, bearing, 3, NaN, 1)).toBe(verdict)
  })

  it('is the same however the compass is turned', () => {
    const degrees = fc.integer({ min: 0, max: 359 })
    fc.assert(
      fc.property(degrees, degrees, degrees, degrees, (bearing, from, width, turn) => {
        const turned = (angle: number) => (angle + turn) % 360
        expect(degreesOutside(turned(bearing), turned(from), turned(from + width))).toBe(degreesOutside(bearing, from, (from + width) % 360)) // prettier-ignore
      }),
      { seed: 9 },
    )
  })
})

describe('a condition', () => {
  const swell = { ...noSystem, height: 1.8, toward: 60, towardSd: 3, period: 13 }
  const fromSouthWest: Comparison = { kind: 'sector', quantity: 'swellFrom', from: 200, to: 280, deadBand: 10 }

  it('of height and sector raises when both do, and clears when one is clear', () => {
    const both = conditionOf([height, fromSouthWest])
    const verdictOf = (total: number, toward: number) =>
      judgeCondition(both, momentOf(seaOf({ significantWaveHeight: total, swell: { ...swell, toward } }))).verdict
    expect(verdictOf(2.8, 60)).toBe('raise')
    expect(verdictOf(2.8, 180)).toBe('clear')
    expect(verdictOf(1.5, 60)).toBe('clear')
    expect(verdictOf(2.3, 60)).toBe('hold')
  })

  it('is unknown on failed or missing figures, and on suspect ones where it wants good ones', () => {
    const judge = (sea: Moment['seen']['sea'], worstQuality: 1 | 3 = 3) =>
      judgeCondition(conditionOf([height], { worstQuality }), momentOf(sea))
    expect(judge(null)).toEqual({ verdict: 'unknown', value: null, sd: null, notJudged: 'failed' })
    expect(judge(seaOf({ qualityFlag: 4, significantWaveHeight: 3 })).verdict).toBe('unknown')
    expect(judge(seaOf({ qualityFlag: 3, significantWaveHeight: 3 })).verdict).toBe('raise')
    expect(judge(seaOf({ qualityFlag: 3, significantWaveHeight: 3 }), 1).verdict).toBe('unknown')
  })

  it('on a height is judged though the direction is refused, as suspect', () => {
    const ambiguous = seaOf({ resolved: false, reason: 'ambiguous', qualityFlag: 4, significantWaveHeight: 3 })
    expect(judgeCondition(conditionOf([height]), momentOf(ambiguous)).verdict).toBe('raise')
    const fewSensors = seaOf({ resolved: false, reason: 'too-few-sensors', qualityFlag: 4, significantWaveHeight: 3 })
    expect(judgeCondition(conditionOf([height]), momentOf(fewSensors)).verdict).toBe('unknown')
  })

  it('on a system that is gone is clear by what the whole sea leaves for it: sqrt(1.3² − 1.2²) = 0.5 m', () => {
    const onSwell = conditionOf([{ ...height, quantity: 'swellHeight', raise: 1, clear: 0.8 }])
    const calm = seaOf({ significantWaveHeight: 1.3, windSea: { ...noSystem, height: 1.2 } })
    expect(judgeCondition(onSwell, momentOf(calm)).verdict).toBe('clear')
    const high = seaOf({ significantWaveHeight: 3, windSea: { ...noSystem, height: 1.2 } })
    expect(judgeCondition(onSwell, momentOf(high))).toMatchObject({ verdict: 'unknown', notJudged: 'noValue' })
  })

  it('on a rise compares with the window before, and is unknown without it', () => {
    const rise = conditionOf([{ ...height, raise: 0.6, clear: 0.3, riseOverSeconds: 10_800 }])
    const now = seaOf({ significantWaveHeight: 2.4, significantWaveHeightSd: 0.12 })
    const before = seaOf({ significantWaveHeight: 1.7, significantWaveHeightSd: 0.09 })
    const judged = judgeCondition(rise, momentOf(now, { earlier: (seconds) => (seconds === 10_800 ? before : null) }))
    expect(judged.verdict).toBe('raise')
    expect(judged.value).toBeCloseTo(0.7, 9)
    expect(judged.sd).toBeCloseTo(0.15, 9)
    expect(judgeCondition(rise, momentOf(now)).verdict).toBe('unknown')
  })

  it('outside its hours is clear, whatever the sea does', () => {
    const when = { hours: { from: '20:00', to: '06:00', days: [1, 2, 3, 4, 5, 6, 7] }, season: null }
    const high = seaOf({ significantWaveHeight: 4 })
    const verdictAt = (time: string) =>
      judgeCondition(conditionOf([height], { when }), momentOf(high, { at: Date.parse(time) })).verdict
    expect(verdictAt('2026-12-01T12:00:00Z')).toBe('clear')
    expect(verdictAt('2026-12-01T23:00:00Z')).toBe('raise')
  })

  it('on data health asks no sea', () => {
    const stale = conditionOf([{ ...height, quantity: 'dataAge', raise: 900, clear: 900 }])
    const health = {
      ...{ usableSensors: null, clockOffset: null, arrayDisagreement: null },
      mailQueueAge: null,
      diskFree: null,
    }
    expect(judgeCondition(stale, momentOf(null, { seen: { sea: null, health: { ...health, dataAge: 901 } } })).verdict).toBe('raise') // prettier-ignore
    expect(judgeCondition(stale, momentOf(null, { seen: { sea: null, health: { ...health, dataAge: null } } })).notJudged).toBe('noValue') // prettier-ignore
  })
})

describe('the registry of quantities', () => {
  it('has every key that the schema names, once', () => {
    expect(quantities.map(({ key }) => key).sort()).toEqual([...quantityKey.options].sort())
  })

  it('reads a bearing from, the opposite of toward', () => {
    const sea = seaOf({ leading: { ...noSystem, height: 2, toward: 67, towardSd: 4 } })
    expect(quantityOf('leadingFrom').read({ sea, health: null })).toMatchObject({ value: 247, sd: 4 })
  })

  it('gives energy flux twice the relative error of the height', () => {
    const { value, sd } = quantityOf('energyFlux').read({ sea: seaOf(), health: null })
    expect(sd / value).toBeCloseTo(0.1, 9)
  })
})

describe('delays', () => {
  const minute = 60_000
  const delays = { onDelaySeconds: 600, offDelaySeconds: 1800 }
  const run = (verdicts: [number, Parameters<typeof follow>[1]][], from: Track = atRest) =>
    verdicts.reduce((track, [minutes, verdict]) => follow(track, verdict, minutes * minute, delays), from)
  const every = (
    from: number,
    to: number,
    verdict: Parameters<typeof follow>[1],
  ): [number, Parameters<typeof follow>[1]][] => Array.from({ length: to - from + 1 }, (_, n) => [from + n, verdict])

  it('are differences of window ends: ten minutes need no count of windows', () => {
    expect(run(every(0, 9, 'raise')).isActive).toBe(false)
    expect(run(every(0, 10, 'raise'))).toMatchObject({ isActive: true, crossedAt: 0, activeSince: 10 * minute })
    expect(run([[0, 'raise'], [5, 'raise'], [10, 'raise']]).isActive).toBe(true) // prettier-ignore
  })

  it('begin anew after anything but the verdict that is waited for', () => {
    expect(run([...every(0, 8, 'raise'), [9, 'hold'], ...every(10, 15, 'raise')])).toMatchObject({ isActive: false, crossedAt: 10 * minute }) // prettier-ignore
  })

  it('are not shortened by a gap: time in which nothing was known counts for nothing', () => {
    expect(run([[0, 'raise'], [1, 'unknown'], [40, 'raise']]).isActive).toBe(false) // prettier-ignore
    expect(run([...every(0, 4, 'raise'), ...every(5, 9, 'unknown'), [10, 'raise']]).isActive).toBe(true)
  })

  it('hold what is active through any gap', () => {
    const active = run(every(0, 10, 'raise'))
    expect(run(every(11, 500, 'unknown'), active)).toBe(active)
    expect(run(every(11, 40, 'clear'), active).isActive).toBe(true)
    expect(run(every(11, 41, 'clear'), active).isActive).toBe(false)
  })
})
