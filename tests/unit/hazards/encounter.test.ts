import { describe, expect, it } from 'vitest'
import { radiansFromEast } from '../../../shared/directions.ts'
import { encounter } from '../../../shared/hazards/encounter.ts'
import { masterCautions } from '../../../shared/hazards/masterCautions.ts'
import { exactly } from '../../../shared/hazards/uncertain.ts'

const knots = 1852 / 3600
const north = radiansFromEast(0)
const deep = 2000
const at = (speed: number, course: number) => ({ speed: exactly(speed), course: radiansFromEast(course) })
const swell = exactly(10)

describe('the period of encounter', () => {
  // Deep water: T_e = T / (1 − 2π V cos μ / (g T)), the seaman's formula, worked by hand with g = 9.81.
  it('in a head sea is shorter: 10 s at 10 kn becomes 7.5 s', () => {
    const met = encounter(swell, exactly(north), deep, at(10 * knots, 180))
    expect(met.period.value).toBeCloseTo(10 / (1 + (2 * Math.PI * 10 * knots) / 98.1), 6)
    expect(met.period.value).toBeCloseTo(7.52, 2)
    expect(met.meeting).toBe('meets the waves')
  })

  it('in a following sea is longer, and at a stand it is the period of the waves', () => {
    const met = encounter(swell, exactly(north), deep, at(10 * knots, 0))
    expect(met.period.value).toBeCloseTo(10 / (1 - (2 * Math.PI * 10 * knots) / 98.1), 6)
    expect(met.meeting).toBe('overtaken by the waves')
    expect(encounter(swell, exactly(north), deep, at(0, 77)).period.value).toBeCloseTo(10, 9)
  })

  it('of a vessel that runs with the crests is not told, and faster it overtakes them', () => {
    const crests = 15.61
    const same = encounter(swell, exactly(north), deep, at(crests, 0))
    expect(same).toMatchObject({ meeting: 'runs with the waves' })
    expect(same.period.reason).toBe('the vessel runs with the waves: no period of encounter')
    const faster = encounter(swell, exactly(north), deep, at(1.5 * crests, 0))
    expect(faster.meeting).toBe('overtakes the waves')
    expect(faster.period.value).toBeCloseTo(20, 1)
    expect(faster.relativeSpeed).toBeLessThan(0)
  })

  it('abeam is that of the waves, and the crests pass along no course', () => {
    const met = encounter(swell, exactly(north), deep, at(8, 90))
    expect(met.period.value).toBeCloseTo(10, 9)
    expect(met).toMatchObject({ meeting: 'beam sea', relativeSpeed: null })
  })

  it('in shallow water follows the speed of the crests there', () => {
    // c = 8.382 m/s at 10 s in 8 m (linear theory).
    const met = encounter(swell, exactly(north), 8, at(5, 180))
    expect(met.period.value).toBeCloseTo(10 / (1 + 5 / 8.382), 3)
    expect(met.waveLength).toBeCloseTo(83.82, 1)
  })

  it('carries ± of period, direction and speed', () => {
    const loose = encounter({ value: 10, sd: 0.3 }, { value: north, sd: 0.1 }, deep, {
      speed: { value: 5, sd: 0.2 },
      course: north,
    })
    expect(loose.period.sd).toBeGreaterThan(0.3)
    const unknown = encounter({ value: 10, sd: null }, exactly(north), deep, at(5, 0))
    expect(unknown.period.sd).toBeNull()
  })
})

describe('cautions to the master', () => {
  const met = (speed: number, course: number, depth = deep) =>
    encounter(swell, exactly(north), depth, at(speed, course))
  const keys = (...given: Parameters<typeof masterCautions>) => masterCautions(...given).map(({ key }) => key)

  it('speak of surf-riding above 1.8 √L / cos in following seas alone', () => {
    const vessel = { length: 25, speed: 11 * knots, rollPeriod: null }
    expect(keys(met(11 * knots, 0), 1, vessel)).toEqual(['surfRiding'])
    expect(keys(met(8 * knots, 0), 0.5, { ...vessel, speed: 8 * knots })).toEqual([])
    expect(keys(met(11 * knots, 180), 1, vessel)).toEqual([])
  })

  it('speak of groups of high waves where they are long and high for the vessel', () => {
    const vessel = { length: 60, speed: 8 * knots, rollPeriod: null }
    expect(keys(met(8 * knots, 20), 3, vessel)).toEqual(['highWaveGroups'])
    expect(keys(met(8 * knots, 20), 2, vessel)).toEqual([])
  })

  it('speak of rolling at the roll period and at half of it', () => {
    const vessel = { length: 90, speed: 10 * knots, rollPeriod: 7.5 }
    expect(keys(met(10 * knots, 180), 1, vessel)).toEqual(['synchronousRoll'])
    expect(keys(met(10 * knots, 180), 1, { ...vessel, rollPeriod: 15 })).toEqual(['parametricRoll'])
    expect(keys(met(10 * knots, 90), 1, { ...vessel, rollPeriod: 20 })).toEqual([])
  })

  it('carry their source and that it is from memory', () => {
    const [caution] = masterCautions(met(11 * knots, 0), 1, { length: 25, speed: 11 * knots, rollPeriod: null })
    expect(caution).toMatchObject({ fromMemory: true })
    expect(caution.source).toContain('Circ.1228')
  })
})
