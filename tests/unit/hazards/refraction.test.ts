import { describe, expect, it } from 'vitest'
import { degreesTrue, radiansFromEast } from '../../../shared/directions.ts'
import { carryOverContours } from '../../../shared/hazards/carried.ts'
import { carrySea } from '../../../shared/hazards/carriedSea.ts'
import { headingOf, incidenceAngle, isRefused, refract } from '../../../shared/hazards/refraction.ts'
import type { Refracted } from '../../../shared/hazards/refraction.ts'
import { deepWaterHeight, shoalingFromDeepWater } from '../../../shared/hazards/shoaling.ts'
import reference from '../../reference/hazards/rays.json' with { type: 'json' }
import { degree, fairwaySystems, sea, system } from './seas.ts'

function refracted(angle: number, period: number, from: number, to: number): Refracted {
  const answer = refract(angle * degree, period, from, to)
  if (isRefused(answer)) throw new Error(answer.refused)
  return answer
}

describe('shoaling from deep water', () => {
  // Shore Protection Manual 1984, table C-1: d/L₀ and H/H₀′.
  it.each([
    [0.01, 1.435],
    [0.05, 1.023],
    [0.1, 0.9327],
    [0.2, 0.9181],
    [0.5, 0.9905],
  ])('at a depth of %s of the deep-water length gives H/H₀′ %s', (share, ratio) => {
    const period = 10
    const depth = (share * 9.81 * period * period) / (2 * Math.PI)
    expect(shoalingFromDeepWater(period, depth)).toBeCloseTo(ratio, 3)
  })

  it('of 2 m, 10 s, to 3 m of water gives 2.47 m (SPM/CEM example), and back', () => {
    expect(2 * shoalingFromDeepWater(10, 3)).toBeCloseTo(2.47, 2)
    expect(deepWaterHeight(2.473, 10, 3)).toBeCloseTo(2, 2)
  })
})

describe('refraction over straight parallel contours', () => {
  it('of 2 m, 10 s, 30° in deep water at 5 m gives 12.5°, 0.94 and 2.09 m (CEM II-3-12 to 14)', () => {
    const there = refracted(30, 10, 500, 5)
    expect(there.angle / degree).toBeCloseTo(12.52, 2)
    expect(there.refraction).toBeCloseTo(0.9419, 4)
    expect(there.phaseSpeed).toBeCloseTo(6.768, 3)
    expect(2 * there.heightRatio).toBeCloseTo(2.092, 3)
  })

  it.each(reference.rays)(
    'of a ray at $angle°, $period s, from $from to $to m agrees with the ray equations of scipy',
    ({ angle, period, from, to, endAngle, heightRatio }) => {
      const there = refracted(angle, period, from, to)
      expect(there.angle / degree).toBeCloseTo(endAngle, 5)
      expect(there.heightRatio).toBeCloseTo(heightRatio, 5)
    },
  )

  it('turns a small difference of direction as differences of Snell’s law do', () => {
    const [a, b] = [refracted(29.99, 10, 15, 4), refracted(30.01, 10, 15, 4)]
    expect(refracted(30, 10, 15, 4).turning).toBeCloseTo((b.angle - a.angle) / (0.02 * degree), 6)
  })

  it('is undone by the way back', () => {
    const there = refracted(35, 11, 14, 4)
    expect(refracted(there.angle / degree, 11, 4, 14).angle / degree).toBeCloseTo(35, 9)
  })

  it.each([
    [95, 12, 4, 'the waves run along or away from the shore'],
    [70, 4, 14, 'the waves are turned back before they reach this depth'],
    [10, 12, -0.2, 'dry at this depth'],
  ])('at %s° from %s to %s m is refused: %s', (angle, from, to, refused) => {
    expect(refract(angle * degree, 10, from, to)).toEqual({ refused })
  })

  it('measures angles against the onshore normal and gives the heading back', () => {
    const seaward = radiansFromEast(218)
    expect(incidenceAngle(radiansFromEast(61), seaward) / degree).toBeCloseTo(-23, 9)
    expect(degreesTrue(headingOf(-23 * degree, seaward))).toBeCloseTo(61, 9)
    expect(Math.abs(incidenceAngle(radiansFromEast(200), seaward))).toBeGreaterThan(Math.PI / 2)
  })
})

describe('a system carried to a place', () => {
  const contours = {
    seaward: radiansFromEast(218),
    depthAtStation: { value: 11.6, sd: 0.2 },
    depthAtPlace: { value: 4, sd: 0.3 },
    path: [
      { distance: 0, depth: 11.6 },
      { distance: 600, depth: 7 },
      { distance: 1000, depth: 4 },
    ],
  }
  const swell = system({ height: 1.9, heightSd: 0.1, period: 12.5, toward: 61, headingSd: 4, spread: 13 })

  it('turns toward the normal, narrows, and says both at every sounding', () => {
    const { height, heading, points, system: there } = carryOverContours(swell, contours)
    const direct = refracted(-23, 12.5, 11.6, 4)
    expect(height.value).toBeCloseTo(1.9 * direct.heightRatio, 9)
    expect(degreesTrue(heading.value ?? NaN)).toBeCloseTo(degreesTrue(headingOf(direct.angle, contours.seaward)), 9)
    expect(there?.spread).toBeCloseTo(13 * degree * direct.turning, 9)
    expect(points[0].height).toBeCloseTo(1.9, 9)
    expect(points[2].height).toBeCloseTo(height.value ?? NaN, 9)
    expect(points.every(({ reason }) => reason === null)).toBe(true)
    expect(height.validity.inRange).toBe(true)
  })

  it('carries ± of height, direction and depths', () => {
    const sd = carryOverContours(swell, contours).height.sd ?? NaN
    const ofHeight = 0.1 * refracted(-23, 12.5, 11.6, 4).heightRatio
    expect(sd).toBeGreaterThan(ofHeight)
    expect(sd).toBeLessThan(2 * ofHeight)
    const unknown = { ...contours, depthAtPlace: { value: 4, sd: null } }
    expect(carryOverContours(swell, unknown).height.sd).toBeNull()
  })

  it('is out of range where the sea breaks before it gets there, and says by which check', () => {
    const shallow = { ...contours, depthAtPlace: { value: 2.5, sd: 0.3 } }
    const { validity } = carryOverContours(swell, shallow).height
    expect(validity.inRange).toBe(false)
    expect(validity.checks.find(({ inside }) => !inside)?.name).toBe('height over depth at the place')
  })

  it('over a bar that breaks it on the way is out of range, even if the place is deep', () => {
    const bar = [...contours.path]
    bar[1] = { distance: 600, depth: 2.5 }
    const { validity } = carryOverContours(swell, { ...contours, path: bar }).height
    expect(validity.checks.find(({ inside }) => !inside)?.name).toBe('height over depth on the way, highest')
  })

  it('that runs away from the shore is refused with the reason', () => {
    const away = carryOverContours(system({ height: 1, period: 6, toward: 200 }), contours)
    expect(away.height).toMatchObject({ value: null, reason: 'the waves run along or away from the shore' })
    expect(away.system).toBeNull()
  })

  it('with the others makes the sea there, energies added, the lost ones named', () => {
    const systems = [...fairwaySystems, { key: 7, name: 'wind sea', height: 0.5, period: 4, toward: 220 }].map(system)
    const there = carrySea(sea(systems), 4, (one) => carryOverContours(one, contours))
    expect(there.lost).toEqual([{ key: 7, name: 'wind sea', reason: 'the waves run along or away from the shore' }])
    expect(there.sea.systems.map(({ key }) => key)).toEqual([1, 3])
    const energy = there.carried.reduce((sum, { height }) => sum + (height.value ?? NaN) ** 2, 0)
    expect(there.sea.height.value).toBeCloseTo(Math.sqrt(energy), 9)
    expect(there.sea.height.sd).toBeGreaterThan(0)
  })
})
