import { describe, expect, it } from 'vitest'
import { degreesTrue, radiansFromEast } from '../../../shared/directions.ts'
import { depthLimit } from '../../../shared/hazards/depthLimit.ts'
import { checkPath, depthAt, depthNow, pathDepths } from '../../../shared/hazards/depths.ts'
import { komarCurrent, longshoreCurrent } from '../../../shared/hazards/longshoreCurrent.ts'
import { gravelRunUp, runUp, stockdonRunUp } from '../../../shared/hazards/runUp.ts'
import { exactly } from '../../../shared/hazards/uncertain.ts'
import { degree } from './seas.ts'

describe('run-up on sand after Stockdon et al. 2006, eqs 18 and 19', () => {
  it.each([
    [2, 10, 0.05, 1.055],
    [3, 12, 0.1, 2.402],
    [1.5, 8, 0.02, 0.526],
  ])('of %s m, %s s on a slope of %s is %s m', (height, period, slope, expected) => {
    expect(stockdonRunUp(height, period, slope).runUp).toBeCloseTo(expected, 3)
  })

  it('has its parts: set-up 0.35, incident swash 0.75 β and long swash 0.06 of √(H₀L₀)', () => {
    const root = Math.sqrt(2 * 156.13)
    const parts = stockdonRunUp(2, 10, 0.05)
    expect(parts.setUp).toBeCloseTo(0.35 * 0.05 * root, 3)
    expect(parts.incidentSwash).toBeCloseTo(0.75 * 0.05 * root, 3)
    expect(parts.longSwash).toBeCloseTo(0.06 * root, 3)
    // Incident and long swash are the sides of the whole: R₂ = 1.1 (set-up + swash/2), 0.563 = 0.75², 0.004 = 0.06² rounded up.
    const whole = 1.1 * (parts.setUp + Math.hypot(parts.incidentSwash, parts.longSwash) / 2)
    expect(Math.abs(parts.runUp / whole - 1)).toBeLessThan(0.03)
  })

  it('below a surf similarity of 0.3 has no part of the slope, and says so', () => {
    const beach = (slope: number) =>
      runUp({ kind: 'sand', deepHeight: exactly(1.5), period: exactly(8), slope: exactly(slope) })
    expect(beach(0.02).runUp.value).toBe(beach(0.03).runUp.value)
    expect(beach(0.02).runUp.words).toBe('dissipative beach: the slope has no part')
    expect(beach(0.06).runUp.words).toBeNull()
  })

  it('carries at least the scatter of the formula in its ±, and more with uncertain inputs', () => {
    const known = runUp({ kind: 'sand', deepHeight: exactly(2), period: exactly(10), slope: exactly(0.05) })
    expect(known.runUp.sd).toBeCloseTo(0.38, 9)
    expect(known.setUp.sd).toBeCloseTo(0.21, 9)
    const slope = { value: 0.05, sd: 0.02 }
    const loose = runUp({ kind: 'sand', deepHeight: exactly(2), period: exactly(10), slope })
    expect(loose.runUp.sd).toBeGreaterThan(0.42)
    expect(known.runUp.method.fromMemory).toBe(true)
  })

  it('outside the slopes of the paper stands with the reason', () => {
    const steep = runUp({ kind: 'sand', deepHeight: exactly(2), period: exactly(10), slope: exactly(0.2) })
    expect(steep.runUp.validity.inRange).toBe(false)
    expect(steep.runUp.value).not.toBeNull()
  })

  it('without waves or slope is not determined', () => {
    const none = runUp({ kind: 'sand', deepHeight: exactly(0), period: exactly(10), slope: exactly(0.05) })
    expect(none.runUp).toMatchObject({ value: null, reason: 'no waves run toward the shore' })
    expect(none.parts).toBeNull()
    expect(() => stockdonRunUp(1, 10, 0)).toThrow(RangeError)
  })
})

describe('run-up on gravel after Poate et al. 2016', () => {
  it('is 0.33 β^½ T H and gives no set-up', () => {
    expect(gravelRunUp(2, 8, 0.16)).toBeCloseTo(0.33 * 0.4 * 16, 12)
    const found = runUp({ kind: 'gravel', height: exactly(2), meanPeriod: exactly(8), slope: exactly(0.16) })
    expect(found.runUp.sd).toBeCloseTo(0.3 * 2.112, 9)
    expect(found.setUp.value).toBeNull()
  })
})

describe('tide in every depth', () => {
  it('is the level less the bed, with both their ±', () => {
    const depth = depthNow({ value: 1.8, sd: 0.03 }, { value: -7.2, sd: 0.04 })
    expect(depth?.value).toBeCloseTo(9, 12)
    expect(depth?.sd).toBeCloseTo(0.05, 12)
    expect(depthNow({ value: 0.4, sd: 0 }, { value: 0.6, sd: 0 })).toBeNull()
    expect(depthNow({ value: 1, sd: null }, { value: -3, sd: 0.1 })?.sd).toBeNull()
  })

  it('is in each sounding of a path, straight between them, and cut where one is dry', () => {
    const path = [
      { distance: 0, bedLevel: -10, sd: 0.1 },
      { distance: 1000, bedLevel: -2, sd: 0.1 },
    ]
    const depths = pathDepths(path, 1.5)
    expect(depths?.map(({ depth }) => depth)).toEqual([11.5, 3.5])
    expect(depthAt(depths ?? [], 500)).toBeCloseTo(7.5, 12)
    expect(depthAt(depths ?? [], 5000)).toBe(3.5)
    expect(pathDepths(path, -2.5)).toBeNull()
  })

  it('of a path entered wrongly names the sounding', () => {
    const bed = { bedLevel: -4, sd: 0.1 }
    expect(() => checkPath([{ distance: 0, ...bed }])).toThrow('two soundings')
    expect(() => checkPath([0, 10, 10].map((distance) => ({ distance, ...bed })))).toThrow('sounding 3')
    expect(() =>
      checkPath([
        { distance: 0, ...bed },
        { distance: NaN, ...bed },
      ]),
    ).toThrow('sounding 2')
  })
})

describe('heights limited by depth', () => {
  it('are 0.6 of it for the sea and about 0.8 for a single wave', () => {
    const { significant, single, transition } = depthLimit({ value: 3, sd: 0.2 }, exactly(10), exactly(0.02))
    expect(significant.value).toBeCloseTo(1.8, 12)
    expect(significant.sd).toBeCloseTo(Math.hypot(0.15, 0.12), 12)
    expect(single.value).toBeGreaterThan(2.34 - 1e-9)
    expect(single.value).toBeLessThan(3)
    expect(transition.value).toBeCloseTo((0.35 + 5.8 * 0.02) * 3, 12)
    expect(depthLimit(exactly(-1), exactly(10), exactly(0.02)).single.reason).toBe('dry at this depth')
  })
})

describe('the longshore current', () => {
  const seaward = radiansFromEast(180)

  it('of 1.5 m (rms) at 10° is 0.77 m/s by Komar’s form', () => {
    expect(komarCurrent(1.5, 10 * degree)).toBeCloseTo(0.77, 2)
  })

  it('sets the way the waves lean: from the south-west on a shore that faces south, to the east', () => {
    // Travel toward 040° against an onshore normal of 000°: clockwise, so negative.
    const { speed, setsToward } = longshoreCurrent(
      { value: 2, sd: 0.2 },
      { value: -10 * degree, sd: 2 * degree },
      { value: 0.03, sd: 0.005 },
      seaward,
    )
    expect(degreesTrue(setsToward ?? NaN)).toBeCloseTo(90, 9)
    expect(speed.value).toBeGreaterThan(0.5)
    expect(speed.sd).toBeGreaterThan(0)
  })

  it('close to square on has no side, and without breakers no value', () => {
    const nearly = { value: 2 * degree, sd: 2 * degree }
    expect(longshoreCurrent(exactly(2), nearly, exactly(0.03), seaward).setsToward).toBeNull()
    expect(longshoreCurrent(null, null, exactly(0.03), seaward).speed.reason).toBe('the breakers are not known')
  })
})
