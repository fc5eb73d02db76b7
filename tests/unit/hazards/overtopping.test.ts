import { describe, expect, it } from 'vitest'
import type { Breakwater, UncertainSeaAtToe } from '../../../shared/hazards/breakwater.ts'
import { gamma } from '../../../shared/hazards/gammaFunction.ts'
import { overtoppingShare, volumeShape } from '../../../shared/hazards/largestVolume.ts'
import { noAccess, overtopping } from '../../../shared/hazards/overtopping.ts'
import {
  obliquityFactor,
  slopeDischarge,
  slopeSimilarity,
  wallDischarge,
  wallRegime,
} from '../../../shared/hazards/overtoppingFormulas.ts'
import { tolerableForPeople } from '../../../shared/hazards/tolerableOvertopping.ts'
import { exactly } from '../../../shared/hazards/uncertain.ts'
import { degree } from './seas.ts'

const squareOn = (height: number, energyPeriod = 8) => ({ height, energyPeriod, obliquity: 0 })
const litres = (discharge: number) => 1000 * discharge

describe('mean overtopping by the formulas of EurOtop 2018', () => {
  // Worked by hand from the manual's equations 5.10, 5.11, 6.5, 7.1, 7.7 with g = 9.81.
  it('of a smooth slope of 1:3, 2 m, 8 s, free crest 3 m: 5.10 gives 110 l/s per m, capped by 5.11 at 45.2', () => {
    expect(slopeSimilarity(1 / 3, squareOn(2))).toBeCloseTo(2.356, 3)
    expect(litres(slopeDischarge(squareOn(2), 3, 1 / 3, 1, 'smooth'))).toBeCloseTo(45.2, 1)
    const breaking = (0.023 / Math.sqrt(1 / 3)) * 2.356 * Math.exp(-(((2.7 * 3) / (2.356 * 2)) ** 1.3))
    expect(litres(Math.sqrt(9.81 * 8) * breaking)).toBeCloseTo(110.1, 0)
  })

  it('of a gentle slope takes 5.10, where that is the lower', () => {
    const similarity = slopeSimilarity(0.1, squareOn(2, 6))
    const expected =
      Math.sqrt(9.81 * 8) * (0.023 / Math.sqrt(0.1)) * similarity * Math.exp(-((2.7 / (similarity * 2)) ** 1.3))
    expect(slopeDischarge(squareOn(2, 6), 1, 0.1, 1, 'smooth')).toBeCloseTo(expected, 12)
  })

  it('of a rubble mound with roughness 0.45, 2 m, free crest 3 m is 0.241 l/s per m', () => {
    expect(litres(slopeDischarge(squareOn(2), 3, 0.5, 0.45, 'rubble'))).toBeCloseTo(0.241, 3)
  })

  it.each([
    [2, 3, 2.43],
    [2, 2, 20.0],
    [1.5, 2, 3.27],
  ])('of a vertical wall in deep water, %s m, free crest %s m is %s l/s per m', (height, crest, expected) => {
    expect(wallRegime(squareOn(height), 10)).toBe('deep')
    expect(litres(wallDischarge(squareOn(height), crest, 10))).toBeCloseTo(expected, expected > 10 ? 1 : 2)
  })

  it('of an impulsive wall, 3 m of water, 1.5 m, 8 s, free crest 2 m is 19.4 l/s per m', () => {
    expect(wallRegime(squareOn(1.5), 3)).toBe('foreshore, impulsive')
    expect(litres(wallDischarge(squareOn(1.5), 2, 3))).toBeCloseTo(19.4, 1)
    expect(wallRegime(squareOn(1.5, 3.5), 3)).toBe('foreshore, not impulsive')
  })

  it.each([
    ['smooth slope', 45.2, 75.1],
    ['vertical wall', 2.43, 5.32],
  ])(
    'of a %s lies within a factor of 3 of the manual’s design value, mean and one standard deviation',
    (_, mean, design) => {
      // Design: 0.1035 exp[−(1.35 Rc/H)^1.3] (5.13), 0.054 exp[−(2.12 Rc/H)^1.3] (7.2), of 2 m with a free crest of 3 m.
      const formula = mean > 10 ? 0.1035 * Math.exp(-((1.35 * 1.5) ** 1.3)) : 0.054 * Math.exp(-((2.12 * 1.5) ** 1.3))
      expect(litres(Math.sqrt(9.81 * 8) * formula)).toBeCloseTo(design, 1)
      expect(design / mean).toBeLessThan(3)
    },
  )

  it('falls with obliquity by 0.0033 or 0.0063 a degree, no further beyond 80°', () => {
    expect(obliquityFactor(20 * degree, 'rubble')).toBeCloseTo(1 - 0.126, 12)
    expect(obliquityFactor(-20 * degree, 'smooth')).toBeCloseTo(1 - 0.066, 12)
    expect(obliquityFactor(85 * degree, 'smooth')).toBeCloseTo(1 - 0.264, 12)
  })
})

const sea = (over: Partial<UncertainSeaAtToe> = {}): UncertainSeaAtToe => ({
  height: { value: 1.95, sd: 0.15 },
  energyPeriod: { value: 11.3, sd: 0.3 },
  obliquity: { value: 20 * degree, sd: 4 * degree },
  ...over,
})
const rubble = (over: Partial<Breakwater> = {}): Breakwater => ({
  kind: 'rubble',
  slope: exactly(1 / 1.5),
  roughness: { value: 0.45, sd: 0.03 },
  freeCrest: { value: 2.1, sd: 0.05 },
  toeDepth: { value: 9, sd: 0.1 },
  ...over,
})

describe('the overtopping figure', () => {
  it('has a likely band of at least a factor of 3 either way, and no ± that could be read as one', () => {
    const { discharge } = overtopping(sea(), rubble())
    const { value, likely } = discharge
    expect(litres(value ?? NaN)).toBeCloseTo(1000 * slopeDischarge(squareOn2(), 2.1, 1 / 1.5, 0.45, 'rubble'), 9)
    expect((likely?.to ?? NaN) / (value ?? NaN)).toBeGreaterThan(3)
    expect((value ?? NaN) / (likely?.from ?? NaN)).toBeGreaterThan(3)
    expect(discharge.sd).toBeNull()
    expect(discharge.validity.inRange).toBe(true)
  })

  it('of very little water has a band of a factor of 10', () => {
    const known = { height: exactly(1), energyPeriod: exactly(8), obliquity: exactly(0) }
    const { discharge } = overtopping(known, rubble({ freeCrest: exactly(2.6), roughness: exactly(0.45) }))
    expect(discharge.value).toBeLessThan(1e-6)
    expect((discharge.likely?.to ?? NaN) / (discharge.value ?? NaN)).toBeCloseTo(10, 6)
    expect(discharge.words).toBe('no overtopping predicted')
  })

  it('at a vertical face says no access as soon as the band reaches any overtopping', () => {
    const wall = rubble({ kind: 'vertical' })
    expect(overtopping(sea(), wall).access).toBe(noAccess)
    expect(overtopping(sea(), rubble()).access).toBeNull()
    const calm = { height: exactly(0.1), energyPeriod: exactly(4), obliquity: exactly(0) }
    expect(overtopping(calm, wall).access).toBeNull()
  })

  it.each([
    [{ obliquity: exactly(95 * degree) }, {}, 'the waves run along or away from the wall'],
    [{}, { toeDepth: exactly(-0.1) }, 'the toe is dry'],
    [{}, { freeCrest: exactly(-0.1) }, 'the crest is under still water: it overflows'],
    [{ height: exactly(0) }, {}, 'no waves run toward the wall'],
  ])('is refused with the reason (%o %o)', (water, structure, reason) => {
    const { discharge, volume } = overtopping(sea(water), rubble(structure))
    expect(discharge).toMatchObject({ value: null, reason })
    expect(volume.value).toBeNull()
  })

  it('outside the free crests of the tests stands with the reason', () => {
    const { discharge } = overtopping(sea(), rubble({ freeCrest: exactly(8) }))
    expect(discharge.validity.checks.find(({ inside }) => !inside)?.name).toBe('free crest over height')
  })
})

const squareOn2 = () => ({ height: 1.95, energyPeriod: 11.3, obliquity: 20 * degree })

describe('the largest single volume', () => {
  it('uses Γ right: √π at ½, 2 at 3', () => {
    expect(gamma(0.5)).toBeCloseTo(Math.sqrt(Math.PI), 8)
    expect(gamma(3)).toBeCloseTo(2, 8)
    expect(() => gamma(0)).toThrow(RangeError)
  })

  it('has the share of waves that reach the 2 % run-up at that level', () => {
    const structure = rubble({ kind: 'smooth', slope: exactly(0.25), roughness: exactly(1) })
    const water = { height: 2, energyPeriod: 6, obliquity: 0 }
    const similarity = slopeSimilarity(0.25, water)
    const level = 2 * Math.min(1.65 * similarity, 4 - 1.5 / Math.sqrt(similarity))
    expect(overtoppingShare(water, { ...structure, freeCrest: exactly(level) })).toBeCloseTo(0.02, 9)
    expect(overtoppingShare(water, { ...structure, freeCrest: exactly(0) })).toBe(1)
  })

  it('is some hundreds of litres for a mean of a litre a second, and grows with the span', () => {
    const short = overtopping(sea(), rubble()).volume
    const long = overtopping(sea(), rubble(), 7200).volume
    expect(short.value).toBeGreaterThan(0.05)
    expect(short.value).toBeLessThan(3)
    expect(long.value).toBeGreaterThan(short.value ?? NaN)
    expect(short.likely?.to).toBeGreaterThan(2 * (short.value ?? NaN))
    expect(volumeShape('smooth', 0, 2, 8)).toBe(0.73)
  })

  it('is not told where less than one wave goes over', () => {
    const { volume } = overtopping(sea({ height: exactly(0.6) }), rubble({ freeCrest: exactly(3) }))
    expect(volume.reason).toBe('less than one wave in the span is expected to go over')
  })
})

describe('tolerable overtopping for people', () => {
  it.each([
    [4, 0.0003],
    [2.5, 0.0003],
    [2, 0.001],
    [0.8, 0.01],
    [0.4, null],
  ])('at %s m is %s m³/s per metre, the stricter row between two', (height, discharge) => {
    expect(tolerableForPeople(height).discharge).toBe(discharge)
  })
})
