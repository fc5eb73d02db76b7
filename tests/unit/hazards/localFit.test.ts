import { describe, expect, it } from 'vitest'
import { calibrationBins, wilsonHalfWidth } from '../../../shared/hazards/calibration.ts'
import { stretches } from '../../../shared/hazards/folds.ts'
import { localFitOfHeights, localFitOfSightings } from '../../../shared/hazards/localFit.ts'
import { chanceOf, fitLogistic } from '../../../shared/hazards/logisticFit.ts'
import reference from '../../reference/hazards/localFit.json' with { type: 'json' }

const { heights, sightings } = reference
const byHeight = sightings.rows.map(({ at, height, seen }) => ({ at, values: [height], seen }))
const byBoth = sightings.rows.map(({ at, height, angle, seen }) => ({ at, values: [height, angle], seen }))

function fitted<Fit>(answer: { kind: 'fitted'; fit: Fit } | { kind: 'refused'; reason: string }): Fit {
  if (answer.kind === 'refused') throw new Error(answer.reason)
  return answer.fit
}

/** Every number of the second is in the first to nine digits. */
function expectNumbers(found: object, wanted: Record<string, number>): void {
  for (const [name, value] of Object.entries(wanted)) {
    expect(Reflect.get(found, name), name).toBeCloseTo(value, 8)
  }
}

describe('heights logged beside their predictions', () => {
  const fit = fitted(localFitOfHeights(heights.rows))

  it('give the factor and its standard error of numpy', () => {
    expectNumbers(fit.factor, heights.factor)
  })

  it('give bias, rmse, scatter index and correlation of numpy, as predicted and cross-validated', () => {
    expectNumbers(fit.asPredicted, heights.asPredicted)
    expectNumbers(fit.crossValidated, heights.crossValidated)
    expectNumbers(fit.gain, heights.gain)
  })

  it('give numpy’s calibration bins', () => {
    expect(fit.bins).toHaveLength(heights.bins.length)
    fit.bins.forEach((bin, n) => expectNumbers(bin, heights.bins[n]))
  })

  it('of a place that breaks 18 % higher show it, and adopting is proposed', () => {
    expect(Math.abs(fit.factor.value - 1.18)).toBeLessThan(3 * fit.factor.standardError)
    expect(localFitOfHeights(heights.rows)).toMatchObject({ kind: 'fitted', verdict: 'better' })
  })

  it('that agree as predicted propose nothing', () => {
    const right = heights.rows.map((row, n) => ({ ...row, observed: row.predicted * (n % 2 === 0 ? 1.1 : 0.9) }))
    expect(localFitOfHeights(right)).toMatchObject({ kind: 'fitted', verdict: 'no evidence' })
  })

  it('come to the same in any order of logging', () => {
    expect(localFitOfHeights([...heights.rows].reverse())).toEqual(localFitOfHeights(heights.rows))
  })

  it('fewer than 100 are refused with the count', () => {
    expect(localFitOfHeights(heights.rows.slice(0, 99))).toMatchObject({
      kind: 'refused',
      count: 99,
      needed: 100,
      reason: '99 of 100 observations that stand beside a prediction',
    })
  })

  it('of one storm are refused with the days', () => {
    const storm = heights.rows.map((row, n) => ({ ...row, at: 1_760_000_000_000 + n * 60_000 }))
    expect(localFitOfHeights(storm)).toMatchObject({ kind: 'refused', days: 1 })
  })

  it('of one height are refused', () => {
    const alike = heights.rows.map((row) => ({ ...row, predicted: 1 }))
    expect(localFitOfHeights(alike)).toMatchObject({
      reason: 'the predicted heights are too much alike to tell a factor',
    })
  })

  it('without a prediction do not count', () => {
    const lost = heights.rows.map((row, n) => ({ ...row, predicted: n < 70 ? NaN : row.predicted }))
    expect(localFitOfHeights(lost)).toMatchObject({ kind: 'refused', count: 90 })
  })
})

describe('sightings logged beside their predictions', () => {
  it.each([
    ['height', byHeight, ['breaker height'], sightings.height],
    ['height and angle', byBoth, ['breaker height', 'angle off square'], sightings.both],
  ] as const)('by %s give scipy’s coefficients, errors and scores', (_, rows, names, wanted) => {
    const fit = fitted(localFitOfSightings(rows, [...names]))
    const all = [fit.intercept, ...fit.coefficients]
    all.forEach(({ value, standardError }, n) => {
      expect(value).toBeCloseTo(wanted.values[n], 6)
      expect(standardError).toBeCloseTo(wanted.standardErrors[n], 6)
    })
    expectNumbers(fit.withoutPrediction, wanted.withoutPrediction)
    for (const name of ['brier', 'logLoss'] as const) {
      expect(fit.crossValidated[name]).toBeCloseTo(wanted.crossValidated[name], 6)
    }
    expect(fit.gain.mean).toBeCloseTo(wanted.gain.mean, 6)
    expect(fit.gain.standardError).toBeCloseTo(wanted.gain.standardError, 6)
  })

  it('by one prediction give where a sighting is as likely as not, with scipy’s error', () => {
    const fit = fitted(localFitOfSightings(byHeight, ['breaker height']))
    expect(fit.evenChanceAt?.value).toBeCloseTo(sightings.height.evenChanceAt.value, 6)
    expect(fit.evenChanceAt?.standardError).toBeCloseTo(sightings.height.evenChanceAt.standardError, 6)
    expect(fitted(localFitOfSightings(byBoth, ['a', 'b'])).evenChanceAt).toBeNull()
  })

  it('have all in their bins, and shares between nothing and all', () => {
    const { bins, calibration, seen, count } = fitted(localFitOfSightings(byHeight, ['breaker height']))
    for (const one of [bins, calibration]) {
      expect(one.reduce((sum, bin) => sum + bin.count, 0)).toBe(count)
      expect(one.reduce((sum, bin) => sum + bin.count * bin.meanObserved, 0)).toBeCloseTo(seen, 9)
    }
  })

  it('with too few of one kind are refused with that count', () => {
    const rare = byHeight.map((row, n) => ({ ...row, seen: n < 15 }))
    expect(localFitOfSightings(rare, ['breaker height'])).toMatchObject({
      kind: 'refused',
      reason: '15 of at least 20 observations with yes for 2 coefficients',
    })
  })

  it('that a bound parts wholly are refused: no chance between can be told', () => {
    const parted = byHeight.map((row) => ({ ...row, seen: row.values[0] > 1.4 }))
    expect(localFitOfSightings(parted, ['breaker height'])).toMatchObject({
      kind: 'refused',
      reason: 'yes and no do not overlap: the chance between them cannot be told',
    })
  })

  it('by a prediction that does not vary, or two that say the same, are refused', () => {
    const same = byHeight.map((row) => ({ ...row, values: [1] }))
    expect(localFitOfSightings(same, ['x'])).toMatchObject({ kind: 'refused' })
    const twice = byHeight.map((row) => ({ ...row, values: [row.values[0], 2 * row.values[0]] }))
    expect(localFitOfSightings(twice, ['x', 'twice x'])).toMatchObject({ kind: 'refused' })
  })

  it('that have nothing to do with the prediction propose nothing', () => {
    const chance = byHeight.map((row, n) => ({ ...row, seen: (n * 7919) % 3 === 0 }))
    expect(localFitOfSightings(chance, ['breaker height'])).toMatchObject({ kind: 'fitted', verdict: 'no evidence' })
  })

  it('give chances between 0 and 1 far outside what was observed', () => {
    const model = fitLogistic(byHeight, 1)
    if ('refused' in model) throw new Error(model.refused)
    expect(chanceOf(model, [1000])).toBe(1)
    expect(chanceOf(model, [-1000])).toBe(0)
  })
})

describe('stretches and bins', () => {
  it('cut as numpy’s array_split does: 13 into 5 are 3, 3, 3, 2, 2', () => {
    expect(stretches(13, 5).map(({ from, to }) => to - from)).toEqual([3, 3, 3, 2, 2])
    expect(stretches(13, 5).at(-1)?.to).toBe(13)
  })

  it('hold ten or more each, and none of ten is not certain', () => {
    const values = Array.from({ length: 45 }, (_, n) => n)
    const bins = calibrationBins(
      values,
      values.map(() => 0),
      'share',
    )
    expect(bins).toHaveLength(4)
    expect(bins[0].standardError).toBeGreaterThan(0.03)
    // Wilson 1927 at one standard deviation: √(p(1−p)/n + 1/4n²)/(1 + 1/n).
    expect(wilsonHalfWidth(0.5, 25)).toBeCloseTo(Math.sqrt(0.01 + 0.0004) / 1.04, 12)
  })
})
