import { describe, expect, it } from 'vitest'
import { isNewer, pointOf, withEstimate, withNews, withPoints } from '../../../src/stores/newer.ts'
import { estimate, station } from '../support/views.ts'

const later = estimate({ windowEndsAt: '2026-11-12T14:31:00.000Z' })

describe('of two estimates', () => {
  it('the one with the later window is newer, whatever their revisions', () => {
    expect(isNewer(later, estimate({ revision: 9 }))).toBe(true)
    expect(isNewer(estimate({ revision: 9 }), later)).toBe(false)
  })

  it('the higher revision of one window is newer', () => {
    expect(isNewer(estimate({ revision: 2 }), estimate({ revision: 1 }))).toBe(true)
    expect(isNewer(estimate({ revision: 1 }), estimate({ revision: 2 }))).toBe(false)
  })
})

describe('a station', () => {
  it('keeps its newer estimate when an older answer comes late', () => {
    const held = withEstimate(station(), later)
    const merged = withNews(held, station({ name: 'Renamed' }))
    expect(merged.estimate?.windowEndsAt).toBe(later.windowEndsAt)
    expect(merged.name).toBe('Renamed')
  })

  it('keeps its last good estimate when the newest has no vector', () => {
    const refused = estimate({ windowEndsAt: later.windowEndsAt, resolved: false, reason: 'ambiguous', systems: [] })
    const merged = withEstimate(station(), refused)
    expect(merged.estimate?.reason).toBe('ambiguous')
    expect(merged.lastGood?.windowEndsAt).toBe('2026-11-12T14:30:00.000Z')
  })

  it('does not call a failed estimate good', () => {
    const failed = estimate({ windowEndsAt: later.windowEndsAt, qualityFlag: 4 })
    expect(withEstimate(station(), failed).lastGood?.windowEndsAt).toBe('2026-11-12T14:30:00.000Z')
  })
})

describe('the series of a station', () => {
  it('rises in time, has one point a window, and ends with the newest 12 h', () => {
    const at = (minutes: number) => new Date(Date.parse('2026-11-12T14:30:00.000Z') - minutes * 60_000).toISOString()
    const point = (minutes: number, height: number) => ({ ...pointOf(estimate()), at: at(minutes), height })
    const points = withPoints([point(721, 1), point(720, 2), point(5, 3)], [point(0, 5), point(5, 4)])
    expect(points.map(({ height }) => height)).toEqual([2, 4, 5])
  })

  it('keeps one point each five minutes, and the newest whenever it is', () => {
    const at = (minute: number) => ({ ...pointOf(estimate()), at: `2026-11-12T14:${minute}:00.000Z` })
    const points = withPoints([at(25), at(26), at(29)], [at(30), at(31), at(32)])
    expect(points.map((point) => point.at.slice(14, 16))).toEqual(['25', '30', '32'])
  })

  it('has no direction where an estimate has none', () => {
    const refused = estimate({ resolved: false, reason: 'no-resolvable-wave' })
    expect(pointOf(refused)).toMatchObject({ toward: null, height: null, speed: null, significantWaveHeight: 2.4 })
  })
})
