import { describe, expect, it } from 'vitest'
import { areEqual, systemSign, systemTitle } from '../../shared/waveSystemNames.ts'

const west = { key: 4, name: 'swell' as const, from: 262 }
const south = { key: 7, name: 'swell' as const, from: 185 }
const sea = { key: 2, name: 'wind sea' as const, from: 292 }

describe('the sign of a wave system', () => {
  it('goes by identity, not by height, so that it stays when the order changes', () => {
    expect(systemSign(west, [south, west, sea])).toBe(1)
    expect(systemSign(west, [west, south, sea])).toBe(1)
    expect(systemSign(south, [south, west, sea])).toBe(2)
  })

  it('of a wind sea is the third, whatever its key', () => {
    expect(systemSign(sea, [west, sea])).toBe(3)
  })
})

describe('the name of a wave system', () => {
  it('is the plain word while there is one of its kind', () => {
    expect(systemTitle(west, [west, sea])).toBe('Swell')
    expect(systemTitle(sea, [west, sea])).toBe('Wind sea')
  })

  it('is told by the quarter it comes from when there are two swells', () => {
    expect(systemTitle(west, [west, south])).toBe('West swell')
    expect(systemTitle(south, [west, south])).toBe('South swell')
  })

  it('is numbered when two swells come from the same quarter', () => {
    const other = { ...west, key: 9, from: 275 }
    expect([west, other].map((one) => systemTitle(one, [west, other]))).toEqual(['West swell 1', 'West swell 2'])
  })
})

describe('two systems', () => {
  it('are equal from 0.8 of the larger one', () => {
    expect(areEqual([{ significantWaveHeight: 2 }, { significantWaveHeight: 1.6 }])).toBe(true)
    expect(areEqual([{ significantWaveHeight: 2 }, { significantWaveHeight: 1.59 }])).toBe(false)
    expect(areEqual([{ significantWaveHeight: 2 }])).toBe(false)
  })
})
