import { describe, expect, it } from 'vitest'
import { arrival, travelTime } from '../../../shared/hazards/arrival.ts'
import { exactly } from '../../../shared/hazards/uncertain.ts'
import reference from '../../reference/hazards/rays.json' with { type: 'json' }

const path = [
  { distance: 0, depth: 12 },
  { distance: 1500, depth: 4 },
]
const question = {
  path,
  period: exactly(10),
  levelSd: 0,
  distanceSdShare: 0,
  windowSeconds: 1200,
  ageSeconds: 60,
}

describe('the time on the way from station to place', () => {
  it('over 12 to 4 m in 1500 m at 10 s agrees with scipy’s integral of dx/Cg and dx/c', () => {
    expect(travelTime(path, 10, 'groups')).toBeCloseTo(reference.arrival.byGroup, 1)
    expect(travelTime(path, 10, 'crests')).toBeCloseTo(reference.arrival.byCrest, 1)
  })

  it('over an even bed is the distance over the speed, however many soundings', () => {
    const even = [0, 400, 1000].map((distance) => ({ distance, depth: 8 }))
    // Cg 7.523 and c 8.382 m/s at 10 s in 8 m (linear theory).
    expect(travelTime(even, 10, 'groups')).toBeCloseTo(1000 / 7.523, 1)
    expect(travelTime(even, 10, 'crests')).toBeCloseTo(1000 / 8.382, 1)
  })

  it('is no warning: with a window of 20 min what is told has arrived long before', () => {
    const { groups, notice, distance } = arrival(question)
    expect(distance).toBe(1500)
    expect(notice).toBeCloseTo((groups.value ?? NaN) - 660, 9)
    expect(notice).toBeLessThan(0)
  })

  it('carries ± of the level through all depths together', () => {
    const { groups } = arrival({ ...question, levelSd: 0.5 })
    const moved = (by: number) =>
      travelTime(
        path.map((one) => ({ ...one, depth: one.depth + by })),
        10,
        'groups',
      )
    expect(groups.sd).toBeCloseTo((moved(-0.5) - moved(0.5)) / 2, 9)
  })

  it('over a dry sounding or without a path is refused with the reason', () => {
    expect(arrival({ ...question, path: null }).groups.reason).toBe('the path is dry at this level')
    expect(arrival({ ...question, path: [path[0]] }).crests.reason).toBe('the path has fewer than two soundings')
  })
})
