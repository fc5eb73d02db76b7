import { describe, expect, it } from 'vitest'
import { livePicture } from '../../shared/livePicture.ts'
import type { CurrentEstimate } from '../../shared/schemas/station.ts'

const end = Date.UTC(2026, 10, 12, 14, 30)
const system: CurrentEstimate['systems'][number] = {
  key: 1,
  name: 'swell',
  significantWaveHeight: 2.1,
  significantWaveHeightSd: 0.1,
  peakPeriod: 12.4,
  from: 247,
  toward: 67,
  headingSd: 3,
  measuredSpeed: 11.4,
  speed: 11.1,
  speedSd: 0.3,
  linearSpeed: 11.1,
  speedRatio: 1,
  directionalSpread: 14,
  slownessEast: 0.081,
  slownessNorth: 0.034,
  slownessCovariance: { eastEast: 1e-6, eastNorth: 0, northNorth: 1e-6 },
  band: { from: 0.05, to: 0.12 },
}
const estimate: CurrentEstimate = {
  stationId: 1,
  windowStartsAt: new Date(end - 1_200_000).toISOString(),
  windowEndsAt: new Date(end).toISOString(),
  revision: 1,
  computedAt: new Date(end + 11_000).toISOString(),
  origin: 'live',
  resolved: true,
  reason: null,
  qualityFlag: 1,
  completeness: 1,
  significantWaveHeight: 2.4,
  significantWaveHeightSd: 0.1,
  peakPeriod: 12.4,
  meanPeriod: 9.1,
  waterDepth: 14.2,
  surgeHeight: null,
  sensorsUsed: 5,
  sensorsDeployed: 5,
  systems: [system],
}
const link = { state: 'connected' as const, lastReadingAt: null, clockOffsetSeconds: 0, recordShare: 0.2 }
const seen = (current: CurrentEstimate | null, lastGood: CurrentEstimate | null = null) => ({
  estimate: current,
  lastGood,
  staleAfterSeconds: 900,
  link,
})

describe('what may be drawn of a station', () => {
  it('is the estimate while its age is within the stale limit', () => {
    expect(livePicture(seen(estimate), end + 900_000)).toEqual({ kind: 'live', estimate, isSuspect: false })
  })

  it('is no figure one moment past the stale limit, whatever the quality was', () => {
    const picture = livePicture(seen(estimate, estimate), end + 900_001)
    expect(picture.kind).toBe('stale')
    expect(picture).not.toHaveProperty('estimate')
  })

  it('is marked suspect with flag 3 and withdrawn with flag 4', () => {
    expect(livePicture(seen({ ...estimate, qualityFlag: 3 }), end)).toMatchObject({ kind: 'live', isSuspect: true })
    expect(livePicture(seen({ ...estimate, qualityFlag: 4 }), end).kind).toBe('failed')
  })

  it('is no vector where none could be resolved', () => {
    const unresolved = { ...estimate, resolved: false, reason: 'no-resolvable-wave' as const, systems: [] }
    expect(livePicture(seen(unresolved), end).kind).toBe('unresolved')
  })

  it('is frozen while the geometry is doubtful', () => {
    const doubtful = { ...estimate, resolved: false, reason: 'geometry-doubtful' as const, systems: [] }
    expect(livePicture(seen(doubtful, estimate), end)).toMatchObject({ kind: 'frozen', lastGood: estimate })
  })

  it('is the share of the record before the first estimate, and nothing for a link that never came', () => {
    expect(livePicture(seen(null), end)).toEqual({ kind: 'loading', share: 0.2 })
    expect(livePicture({ ...seen(null), link: { ...link, state: 'never' } }, end)).toEqual({ kind: 'empty' })
  })
})
