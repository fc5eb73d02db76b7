import { describe, expect, it } from 'vitest'
import { ripReasons } from '../../../shared/hazards/ripReasons.ts'
import { degree } from './seas.ts'

const thresholds = { height: 0.7, incidence: 20 * degree, spread: 20 * degree, lowWater: 2 * 3600 }
const question = {
  height: { value: 1.9, sd: 0.1 },
  incidence: { value: -13 * degree, sd: 3 * degree },
  spread: 13 * degree,
  toLowWater: 2.55 * 3600,
}
const states = (...given: Parameters<typeof ripReasons>) => ripReasons(...given).map(({ state }) => state)

describe('reasons for a rip caution', () => {
  it('are listed each with its value: high, square on and narrow, but not near low water', () => {
    expect(states(question, thresholds)).toEqual(['present', 'present', 'present', 'absent'])
    expect(ripReasons(question, thresholds).map(({ key }) => key)).toEqual(['height', 'incidence', 'spread', 'tide'])
  })

  it('count either side of square and of low water', () => {
    const after = { ...question, incidence: { value: 13 * degree, sd: 0 }, toLowWater: -3600 }
    expect(states(after, thresholds)).toEqual(['present', 'present', 'present', 'present'])
  })

  it('that are not known say why, and are neither present nor absent', () => {
    const unknown = ripReasons({ height: null, incidence: null, spread: null, toLowWater: null }, thresholds)
    expect(unknown.every(({ state, value, reason }) => state === 'not known' && value === null && reason)).toBe(true)
  })

  it('within one standard deviation of a threshold are marked as near', () => {
    const near = ripReasons({ ...question, height: { value: 0.65, sd: 0.1 } }, thresholds)
    expect(near[0]).toMatchObject({ state: 'absent', isNear: true })
    expect(near[1].isNear).toBe(false)
  })

  it('name where they come from', () => {
    expect(ripReasons(question, thresholds).every(({ source, fromMemory }) => source.length > 0 && !fromMemory)).toBe(
      true,
    )
  })
})
