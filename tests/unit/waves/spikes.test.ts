import { describe, expect, it } from 'vitest'
import { dropSpikes } from '../../../shared/waves/spikes.ts'
import { defaultEstimateSettings } from '../../../shared/waves/window.ts'
import { seededDice, seededSea } from '../../bench/seededSea.ts'

const limit = defaultEstimateSettings.spikeSigmas

const sea = (seed: number, sampleRate: number, peakPeriod: number) =>
  seededSea({
    seed,
    trains: [{ toward: 80, peakPeriod, height: 1, spread: 20, gamma: seed % 2 ? 3.3 : 1 }],
    depth: 11,
    positions: [
      { east: 0, north: 0 },
      { east: 9, north: 4 },
    ],
    sampleRate,
    seconds: 1200,
    noise: 0.01,
  }).series

const seas = [2, 4].flatMap((rate) => [3, 4, 6, 10, 18].map((period): [number, number] => [rate, period]))

describe('spikes', () => {
  it.each(seas)('are not seen in healthy Gaussian seas at %s Hz with a peak period of %s s', (rate, period) => {
    for (const seed of [1, 2, 3])
      for (const one of sea(seed, rate, period)) expect(dropSpikes(one, rate, limit)).toBe(0)
  })

  it.each(seas)(
    'of 1 to 3 samples and half of H_m0 are found at %s Hz, %s s, and little beside them',
    (rate, period) => {
      const next = seededDice(period)
      const [series] = sea(5, rate, period)
      const spoilt = Array.from({ length: 9 }, (_, n) => ({
        at: Math.floor(((n + 0.2 + 0.6 * next()) * series.length) / 9),
        length: 1 + (n % 3),
      }))
      for (const { at, length } of spoilt) {
        const size = (next() < 0.5 ? -1 : 1) * (0.5 + 0.3 * next())
        for (let i = at; i < at + length; i++) series[i] += size
      }
      const dropped = dropSpikes(series, rate, limit)
      for (const { at, length } of spoilt) expect(series.slice(at, at + length).some(Number.isNaN)).toBe(true)
      // No more than the longest run at each.
      expect(dropped).toBeLessThanOrEqual(27)
    },
  )
})
