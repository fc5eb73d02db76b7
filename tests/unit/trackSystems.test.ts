import { describe, expect, it } from 'vitest'
import type { WaveSystem } from '../../shared/schemas/estimate.ts'
import { trackSystems } from '../../shared/waves/trackSystems.ts'

const minute = 60_000
const noon = Date.UTC(2026, 11, 1, 12)

const system = (peakPeriod: number, toward: number): WaveSystem => ({
  key: 1,
  name: 'swell',
  significantWaveHeight: 1,
  significantWaveHeightSd: null,
  peakPeriod,
  from: (toward + 180) % 360,
  toward,
  headingSd: 2,
  measuredSpeed: 10,
  speed: 10,
  speedSd: 0.2,
  linearSpeed: 10,
  speedRatio: 1,
  directionalSpread: null,
  slownessEast: 0.1,
  slownessNorth: 0,
  slownessCovariance: { eastEast: 1e-6, eastNorth: 0, northNorth: 1e-6 },
  band: { from: 0.05, to: 0.1 },
})
const keys = (systems: WaveSystem[]) => systems.map(({ key }) => key)
const fresh = { tracks: [], nextKey: 1 }

describe('the identity of wave systems', () => {
  it('begins with one for the leading system of a fresh record', () => {
    expect(keys(trackSystems(fresh, [system(12, 60), system(6, 110)], noon).systems)).toEqual([1, 2])
  })

  it('is kept though their order by height changes and north lies between the headings', () => {
    const before = trackSystems(fresh, [system(12, 358), system(6, 110)], noon)
    const after = trackSystems(before, [system(6.2, 118), system(11.8, 3)], noon + minute)
    expect(keys(after.systems)).toEqual([2, 1])
  })

  it('is new outside 0.01 Hz or 25 degrees, and no key is given twice', () => {
    const before = trackSystems(fresh, [system(10, 60)], noon)
    const turned = trackSystems(before, [system(10, 86)], noon + minute)
    const shorter = trackSystems(turned, [system(1 / 0.111, 86)], noon + 2 * minute)
    expect(keys([...turned.systems, ...shorter.systems])).toEqual([2, 3])
  })

  it('goes to the nearest of two candidates', () => {
    const before = trackSystems(fresh, [system(10, 60), system(10, 80)], noon)
    const after = trackSystems(before, [system(10, 78)], noon + minute)
    expect(keys(after.systems)).toEqual([2])
  })

  it('outlives windows without it for half an hour and no longer', () => {
    const before = trackSystems(fresh, [system(10, 60)], noon)
    const empty = trackSystems(before, [], noon + minute)
    expect(keys(trackSystems(empty, [system(10, 60)], noon + 30 * minute).systems)).toEqual([1])
    expect(keys(trackSystems(empty, [system(10, 60)], noon + 31 * minute).systems)).toEqual([2])
  })

  it('is kept backwards too, when a past is computed newest first', () => {
    const newest = trackSystems(fresh, [system(10, 60)], noon)
    expect(keys(trackSystems(newest, [system(10.1, 61)], noon - minute).systems)).toEqual([1])
  })
})

describe('the name of a followed system', () => {
  const said = (name: WaveSystem['name'], minutes: number, known: Parameters<typeof trackSystems>[0]) =>
    trackSystems(known, [{ ...system(8, 60), name }], noon + minutes * minute)

  it('does not flip with a window or two that say the other', () => {
    const first = said('wind sea', 0, fresh)
    const doubted = said('swell', 1, first)
    expect(doubted.systems[0].name).toBe('wind sea')
    const again = said('wind sea', 10, doubted)
    expect(said('swell', 25, again).systems[0].name).toBe('wind sea')
  })

  it('changes once all windows of twenty minutes say the other', () => {
    let known = said('wind sea', 0, fresh)
    for (let minutes = 1; minutes <= 20; minutes++) known = said('swell', minutes, known)
    expect(known.systems[0].name).toBe('wind sea')
    expect(said('swell', 21, known).systems[0].name).toBe('swell')
  })
})
