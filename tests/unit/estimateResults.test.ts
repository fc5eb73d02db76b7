import { inflateRawSync } from 'node:zlib'
import { describe, expect, it } from 'vitest'
import { packDay, unpackDay } from '../../server/models/seriesDayPayload.ts'
import { packDetail } from '../../server/workers/packDetail.ts'
import { canonicalJson, resultDigest } from '../../server/workers/resultDigest.ts'
import type { EstimateResult } from '../../shared/schemas/estimate.ts'
import { judgeStationClock, withoutFigures } from '../../shared/waves/stationClock.ts'

const bare = withoutFigures({
  reason: null,
  qualityFlag: 1,
  waterDepth: 12.3456789012,
  waterDepthSource: 'level',
  completeness: 0.99,
  sensors: [],
  tests: [],
})
const good: EstimateResult = {
  ...bare,
  resolved: true,
  significantWaveHeight: 1.23456789,
  spectrum: { frequency: [0.05, 0.1], density: [0.123456789, 1e-9], degreesOfFreedom: 48, cutoff: 0.3, tail: null },
  systems: [
    {
      key: 1,
      name: 'swell',
      significantWaveHeight: 1.2,
      significantWaveHeightSd: 0.1,
      peakPeriod: 10,
      from: 240,
      toward: 60,
      headingSd: 2,
      measuredSpeed: 9.9,
      speed: 9.9,
      speedSd: 0.1,
      linearSpeed: 9.92,
      speedRatio: 0.998,
      directionalSpread: 12,
      slownessEast: 0.087,
      slownessNorth: 0.05,
      slownessCovariance: { eastEast: 1e-6, eastNorth: 0, northNorth: 1e-6 },
      band: { from: 0.05, to: 0.2 },
    },
  ],
}

describe('the fingerprint of a result', () => {
  it('does not depend on the order of names, nor on the keys that the windows around give', () => {
    const turned = Object.fromEntries(Object.entries(good).reverse()) as EstimateResult
    expect(resultDigest(turned)).toBe(resultDigest(good))
    expect(resultDigest({ ...good, systems: [{ ...good.systems[0], key: 7 }] })).toBe(resultDigest(good))
    expect(canonicalJson({ b: [{ d: 1, c: 2 }], a: null })).toBe('{"a":null,"b":[{"c":2,"d":1}]}')
  })

  it('changes with the last digit of any figure', () => {
    expect(resultDigest({ ...good, significantWaveHeight: 1.23456789 + Number.EPSILON })).not.toBe(resultDigest(good))
  })
})

describe('the kept detail', () => {
  it('is the whole result, its spectra with four digits', () => {
    const kept: EstimateResult = JSON.parse(inflateRawSync(packDetail(good)).toString())
    expect(kept).toEqual({ ...good, spectrum: { ...good.spectrum, density: [0.1235, 1e-9] } })
  })
})

describe('the clock of a station in its estimate', () => {
  it('is a test that is passed up to one second, and nothing at all where it is not known', () => {
    expect(judgeStationClock(good, null)).toEqual(good)
    expect(judgeStationClock(good, -1)).toMatchObject({
      qualityFlag: 1,
      resolved: true,
      tests: [{ flag: 1, value: -1 }],
    })
  })

  it('makes it suspect over one second, and never better than it was', () => {
    expect(judgeStationClock(good, 1.01)).toMatchObject({ qualityFlag: 3, resolved: true })
    expect(judgeStationClock({ ...good, qualityFlag: 4 }, 1.01).qualityFlag).toBe(4)
  })

  it('leaves no figure over ten seconds', () => {
    expect(judgeStationClock(good, -10.01)).toMatchObject({
      resolved: false,
      reason: 'clock',
      qualityFlag: 4,
      significantWaveHeight: null,
      systems: [],
      spectrum: null,
    })
  })
})

describe('a packed day', () => {
  it('comes back with its values, its gaps and its flags', () => {
    const day = { values: Float32Array.of(1.5, NaN, -2), flags: Uint8Array.of(1, 0, 3) }
    expect(unpackDay(packDay(day))).toEqual(day)
  })
})
