import { describe, expect, it } from 'vitest'
import type { EstimateResult } from '../../../shared/schemas/estimate.ts'
import { trustGrounds, worst } from '../../../src/components/station/trustGrounds.ts'
import { detail } from './views.ts'

const ground = (result: EstimateResult, key: string) => trustGrounds(result).find((one) => one.key === key)

describe('grounds for trust', () => {
  it('set the corrected speed against linear theory in words', () => {
    expect(ground(detail(), 'theory')).toMatchObject({ figure: '1.03, 3 % above', flag: 1 })
  })

  it('say how closely the sub-arrays agree, rounded to the far side', () => {
    expect(ground(detail(), 'subArrays')).toMatchObject({
      flag: 1,
      words: '2 sub-arrays of 3 or more agree within',
      figure: '± 2°, ± 0.2 m/s',
    })
  })

  it('are suspect where a sub-array does not agree', () => {
    const [agreeing, other] = detail().subArrays
    const torn = detail({ subArrays: [agreeing, { ...other, agrees: false }] })
    expect(ground(torn, 'subArrays')).toMatchObject({ flag: 3, figure: '1 of 2' })
  })

  it('count sensors used and tests passed', () => {
    expect(ground(detail(), 'sensors')).toMatchObject({ flag: 3, figure: '4 of 5' })
    expect(ground(detail(), 'tests')).toMatchObject({ flag: 3, figure: '2 of 3' })
  })

  it('say where the depth came from, and doubt a nominal one', () => {
    expect(ground(detail(), 'depth')).toMatchObject({ flag: 1, words: 'Water depth, from the tide', figure: '14.2 m' })
    expect(ground(detail({ waterDepthSource: 'nominal' }), 'depth')?.flag).toBe(3)
  })

  it('call a ground without its test not evaluated', () => {
    expect(ground(detail({ tests: [] }), 'residual')).toMatchObject({ flag: 2, figure: '0.06 s' })
  })

  it('take the worst of several flags', () => {
    expect(worst([1, 3, 1])).toBe(3)
    expect(worst([3, 4, 9])).toBe(4)
    expect(worst([])).toBe(2)
  })
})
