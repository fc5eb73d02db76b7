import { describe, expect, it } from 'vitest'
import { check, determined, figure, input, isDetermined, undetermined } from '../../../shared/hazards/figure.ts'
import type { FigureFrame } from '../../../shared/hazards/figure.ts'
import { slopeDischarge } from '../../../shared/hazards/overtoppingFormulas.ts'
import { stockdonRunUp } from '../../../shared/hazards/runUp.ts'
import { propagate, spreadOf, together } from '../../../shared/hazards/uncertain.ts'
import reference from '../../reference/hazards/propagation.json' with { type: 'json' }

describe('± carried from inputs to a figure', () => {
  it('of a run-up agrees with two million draws of numpy within 3 %', () => {
    const inputs = [
      { value: 2, sd: 0.1 },
      { value: 10, sd: 0.3 },
      { value: 0.08, sd: 0.008 },
    ]
    const sd = propagate(inputs, ([h, t, b]) => stockdonRunUp(h, t, b).runUp)
    expect(Math.abs((sd ?? NaN) / reference.runUp - 1)).toBeLessThan(0.03)
  })

  it('of the logarithm of an overtopping agrees too', () => {
    const inputs = [
      { value: 2, sd: 0.05 },
      { value: 2.1, sd: 0.03 },
    ]
    const sd = propagate(inputs, ([height, crest]) =>
      Math.log(slopeDischarge({ height, energyPeriod: 9, obliquity: 0 }, crest, 0.5, 0.45, 'rubble')),
    )
    expect(Math.abs((sd ?? NaN) / reference.logDischarge - 1)).toBeLessThan(0.03)
  })

  it('of a height across an axis agrees too', () => {
    const inputs = [
      { value: 1.9, sd: 0.1 },
      { value: (23 * Math.PI) / 180, sd: (4 * Math.PI) / 180 },
    ]
    const sd = propagate(inputs, ([height, angle]) => height * Math.abs(Math.sin(angle)))
    expect(Math.abs((sd ?? NaN) / reference.across - 1)).toBeLessThan(0.03)
  })

  it('at an edge of the method takes the side that is there, and none where neither is', () => {
    const oneSided = propagate([{ value: 1, sd: 1 }], ([x]) => (x > 0 ? 3 * x : null))
    expect(oneSided).toBe(3)
    expect(propagate([{ value: 1, sd: 1 }], ([x]) => (x === 1 ? 1 : null))).toBeNull()
  })

  it('is not known where that of an input is not, and nothing for exact inputs', () => {
    expect(propagate([{ value: 1, sd: null }], ([x]) => x)).toBeNull()
    expect(propagate([{ value: 1, sd: 0 }], ([x]) => x)).toBe(0)
    expect(together(3, 4)).toBe(5)
    expect(together(3, null)).toBeNull()
    expect(spreadOf([2, 1, 3])).toEqual({ from: 1, to: 3 })
    expect(() => spreadOf([])).toThrow(RangeError)
  })
})

describe('a figure', () => {
  const frame: FigureFrame = {
    unit: 'm',
    method: { name: 'a method', formula: 'x', source: 'somebody 1900', fromMemory: false, assumptions: [] },
    inputs: [input('height', 2, 'm', 0.1)],
    checks: [check('slope', 0.2, '1', 0.01, 0.11), check('height', 2, 'm', 0, null)],
  }

  it('outside one check of its method is out of range, and says by which', () => {
    const found = determined(frame, { value: 1, sd: 0.1, uncertaintyFrom: 'height' })
    expect(found.validity).toMatchObject({ inRange: false })
    expect(found.validity.checks.map(({ inside }) => inside)).toEqual([false, true])
    expect(isDetermined(found)).toBe(true)
  })

  it('is never a number that is none: the method must refuse instead', () => {
    expect(() => determined(frame, { value: NaN, uncertaintyFrom: '' })).toThrow('a method gave NaN')
    const refused = undetermined(frame, 'no sea')
    expect(isDetermined(refused)).toBe(false)
    expect(refused).toMatchObject({ value: null, reason: 'no sea', sd: null, likely: null })
  })

  it('passes its own shape, written and read back', () => {
    const found = determined(frame, { value: 1, sd: 0.1, uncertaintyFrom: 'height' })
    expect(figure.parse(JSON.parse(JSON.stringify(found)))).toEqual(found)
  })
})
