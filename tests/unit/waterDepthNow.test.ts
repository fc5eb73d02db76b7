import { describe, expect, it } from 'vitest'
import { surgeLevel } from '../../shared/waves/surgeLevel.ts'
import { waterDepthNow } from '../../shared/waves/waterDepthNow.ts'

const steady = (value: number, missing = 0) =>
  Float64Array.from({ length: 100 }, (_, n) => (n < missing ? NaN : value + 0.3 * Math.sin((2 * Math.PI * n) / 10)))
const surface = { kind: 'surface' as const, heightAboveBed: 7 }
const pressure = { kind: 'pressure' as const, heightAboveBed: 0.5 }
const bed = { nominalDepth: 12, levelOfBed: -12, tideLevel: null, gravity: 9.81, density: 1025 }

describe('the depth of the water now', () => {
  it('is the mean level of surface sensors above the bed', () => {
    const answer = waterDepthNow({ ...bed, sensors: [surface], series: [steady(1.2)] })
    expect(answer.waterDepthSource).toBe('level')
    expect(answer.waterDepth).toBeCloseTo(13.2, 9)
  })

  it('is the head over a pressure sensor and its height above the bed', () => {
    // 1 dbar is the weight of 10,000 / (1025 x 9.81) = 0.99451 m of sea water.
    const answer = waterDepthNow({ ...bed, sensors: [pressure], series: [steady(12)] })
    expect(answer.waterDepth).toBeCloseTo(0.5 + 12 * 0.994507, 4)
  })

  it('is not moved by one sensor that is wrong by metres, nor by one that hardly has samples', () => {
    const sensors = [surface, surface, surface, surface]
    const series = [steady(1), steady(1.02), steady(4), steady(-3, 60)]
    expect(waterDepthNow({ ...bed, sensors, series }).waterDepth).toBeCloseTo(13.02, 9)
  })

  it('comes from the tide, else is nominal, when no sensor tells the level', () => {
    const silent = { ...bed, sensors: [surface], series: [steady(0, 100)] }
    expect(waterDepthNow({ ...silent, tideLevel: 0.7 })).toEqual({ waterDepth: 12.7, waterDepthSource: 'tide' })
    expect(waterDepthNow(silent)).toEqual({ waterDepth: 12, waterDepthSource: 'nominal' })
  })

  it('is nominal when the only sensor is off by more than any tide', () => {
    expect(waterDepthNow({ ...bed, sensors: [pressure], series: [steady(40)] }).waterDepthSource).toBe('nominal')
  })
})

describe('the mean level for the surge band', () => {
  it('has one value a second, the mean over the sensors, pressure as head', () => {
    const level = surgeLevel(
      [{ kind: 'surface' }, { kind: 'pressure' }],
      [Float64Array.of(1, 1, 3, 3), Float64Array.of(10, 10, 12, 12)],
      2,
      { gravity: 10, density: 1000 },
    )
    expect([...level]).toEqual([-1, 1])
  })

  it('has no step where one sensor is missing, and is missing where all are', () => {
    const level = surgeLevel(
      [{ kind: 'surface' }, { kind: 'surface' }],
      [Float64Array.of(5, NaN, 5, NaN), Float64Array.of(9, 9, NaN, NaN)],
      1,
      { gravity: 10, density: 1000 },
    )
    expect([...level]).toEqual([0, 0, 0, NaN])
  })
})
