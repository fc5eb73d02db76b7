import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { contentOf, firstComparison, formOf, newForm, numberIn } from '../../../src/components/limits/limitForm.ts'
import { changesIn } from '../../../src/components/limits/draftWords.ts'
import { longWords } from '../../../src/components/limits/longWords.ts'
import { quantities } from '../../../shared/alerts/quantities.ts'
import { shiftsBeside } from '../../../src/composables/useBackTest.ts'
import type { LimitContent } from '../../../shared/schemas/limit.ts'
import { limitContent } from '../support/alertViews.ts'

const sector: LimitContent = limitContent({
  title: 'Swell into the entrance',
  condition: {
    ...limitContent().condition,
    comparisons: [
      { kind: 'above', quantity: 'swellHeight', raise: 1.4, clear: 1.2, riseOverSeconds: 10_800 },
      { kind: 'sector', quantity: 'swellFrom', from: 320, to: 40, deadBand: 10 },
      { kind: 'below', quantity: 'swellPeriod', raise: 8, clear: 9 },
    ],
    when: { hours: { from: '22:00', to: '06:00', days: [5, 6] }, season: { from: '11-01', to: '03-31' } },
  },
  recipients: {
    steps: [
      { afterSeconds: 0, listIds: [1, 2] },
      { afterSeconds: 960, listIds: [3] },
    ],
    remindEverySeconds: null,
  },
  reviewOn: '2027-03-01',
})

describe('the form of a limit', () => {
  it.each([
    ['a single threshold', limitContent()],
    ['rise, sector, threshold below, hours, season and steps', sector],
  ])('gives back what it was filled with: %s', (_, content) => {
    expect(contentOf(formOf(content))).toEqual({ content, faults: null })
  })

  it('reads numbers as people type them, and nothing else', () => {
    expect(numberIn('2,50')).toBe(2.5)
    expect(numberIn(' 2.5 ')).toBe(2.5)
    expect(numberIn('\u22120.5')).toBe(-0.5)
    for (const typed of ['', '2.5 m', '1e3', '0x10', 'two', '2.5.1']) expect(numberIn(typed)).toBeNaN()
  })

  it('turns the units people read into SI', () => {
    const form = newForm()
    form.comparisons = [{ ...firstComparison('energyFlux'), raise: '40', clear: '34' }]
    expect(contentOf(form).content?.condition.comparisons[0]).toMatchObject({ raise: 40_000, clear: 34_000 })
    form.comparisons = [{ ...firstComparison('dataAge'), raise: '15', clear: '14' }]
    expect(contentOf(form).content?.condition.comparisons[0].kind).toBe('above')
    expect(contentOf(form).content?.condition.comparisons[0]).toHaveProperty('raise', 900)
  })

  it('names the field that is wrong', () => {
    const form = newForm()
    form.comparisons[0].clear = '9'
    expect(contentOf(form).faults).toEqual({
      'condition.comparisons.0.clear': 'must not be above the value that raises',
    })
    form.comparisons[0].clear = 'low'
    expect(contentOf(form).faults).toHaveProperty('condition.comparisons.0.clear', 'must be a number')
  })

  it('starts every quantity with something that can be put in force', () => {
    for (const { key } of quantities) {
      const form = newForm()
      form.comparisons = [firstComparison(key)]
      expect(contentOf(form).faults, key).toBeNull()
    }
  })

  it('never throws, whatever is typed', () => {
    fc.assert(
      fc.property(fc.string(), fc.string(), (raise, after) => {
        const form = newForm()
        Object.assign(form.comparisons[0], { raise })
        form.raiseAfter = after
        const { content, faults } = contentOf(form)
        return (content === null) !== (faults === null)
      }),
    )
  })
})

describe('a draft', () => {
  it('says what it changes against the version in force', () => {
    const { condition } = limitContent()
    const [first] = condition.comparisons
    const lower = { ...first, clear: 2 } as (typeof condition.comparisons)[number]
    const next = limitContent({ condition: { ...condition, comparisons: [lower], onDelaySeconds: 300 } })
    expect(changesIn(limitContent(), next)).toEqual([
      'clear below changed from 2.10 m to 2.00 m',
      'raise after changed from 10 min to 5 min',
    ])
    expect(changesIn(limitContent(), limitContent())).toEqual([])
  })

  it('is laid beside values a tenth lower and higher, never below nothing', () => {
    const shifts = shiftsBeside(limitContent().condition)
    expect(shifts.map((shift) => Math.round(shift * 100) / 100)).toEqual([-0.3, 0.3, 0.6])
    expect(shiftsBeside(limitContent({ condition: { ...sector.condition, comparisons: [sector.condition.comparisons[1]] } }).condition)).toEqual([]) // prettier-ignore
  })
})

describe('a long time', () => {
  it('is written in hours and minutes, above ten days in days', () => {
    expect(longWords(65 * 3600)).toBe('65 h 00 min')
    expect(longWords(1500)).toBe('25 min')
    expect(longWords(26 * 86_400 + 15 * 3600)).toBe('26 d 15 h')
  })
})
