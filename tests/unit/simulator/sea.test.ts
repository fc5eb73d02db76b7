import { describe, expect, it } from 'vitest'
import { makeBlock, type SeaSensor } from '../../../simulator/sea/block.ts'
import { spectralVariances } from '../../../simulator/sea/frequencySpectrum.ts'
import type { NearshoreSystem } from '../../../simulator/sea/nearshore.ts'
import { exponentFromSpread, inverseSpreading } from '../../../simulator/sea/spreading.ts'

const system = (change: Partial<NearshoreSystem> = {}): NearshoreSystem => ({
  key: 'swell',
  name: 'swell',
  significantWaveHeight: 1.5,
  peakPeriod: 10,
  toward: 60,
  directionalSpread: 12,
  peakedness: 3.3,
  phaseSpeed: 8,
  ...change,
})

const surface = (east: number, north: number): SeaSensor => ({ kind: 'surface', east, north, heightAboveBed: 0 })

function block(sensors: SeaSensor[], change: Partial<NearshoreSystem>, waterDepth: number, sampleRate: number) {
  const state = { time: 0, waterDepth, systems: [system(change)], surgeHeight: 0 }
  return makeBlock({ name: 'test', state, sampleRate, length: 4096, sensors, clockOffsets: sensors.map(() => 0) })
}

/** Coefficient of exp(i 2π k n / N), by its definition. */
function coefficient(series: Float64Array, k: number) {
  let real = 0
  let imaginary = 0
  for (let n = 0; n < series.length; n++) {
    const angle = (2 * Math.PI * k * n) / series.length
    real += series[n] * Math.cos(angle)
    imaginary -= series[n] * Math.sin(angle)
  }
  return { amplitude: Math.hypot(real, imaginary), phase: Math.atan2(imaginary, real) }
}

/** Into −π to π. */
const wrapped = (angle: number): number => Math.atan2(Math.sin(angle), Math.cos(angle))

describe('the spectrum laid into a sea', () => {
  it('has exactly the wanted height', () => {
    const variances = spectralVariances(system(), 1 / 2048, 0.75)
    expect(4 * Math.sqrt(variances.reduce((sum, one) => sum + one, 0))).toBeCloseTo(1.5, 12)
  })

  // JONSWAP integrated by scipy.integrate.quad from 0.02 to 0.75 Hz.
  it.each([
    { peakPeriod: 10, peakedness: 3.3, energyPeriod: 9.03502, meanPeriod: 8.35918, zeroPeriod: 7.84235 },
    { peakPeriod: 12, peakedness: 5, energyPeriod: 11.03134, meanPeriod: 10.30996, zeroPeriod: 9.71539 },
  ])('has the moments of JONSWAP at $peakPeriod s, γ $peakedness', (wanted) => {
    const variances = spectralVariances({ significantWaveHeight: 1, ...wanted }, 1 / 2048, 0.75)
    const moment = (order: number) => variances.reduce((sum, one, k) => (k ? sum + one * (k / 2048) ** order : sum), 0)
    expect(moment(-1) / moment(0)).toBeCloseTo(wanted.energyPeriod, 1)
    expect(moment(0) / moment(1)).toBeCloseTo(wanted.meanPeriod, 1)
    expect(Math.sqrt(moment(0) / moment(2))).toBeCloseTo(wanted.zeroPeriod, 1)
  })

  it('gives a record of its height: the mean square is the spectrum’s, but for chance among directions', () => {
    const [series] = block([surface(0, 0)], {}, 8, 4)
    const variance = series.reduce((sum, one) => sum + one * one, 0) / series.length
    // CV of H_m0 over 1024 s, JONSWAP 10 s, γ 3.3: 6.1 %; four of them.
    expect(4 * Math.sqrt(variance)).toBeGreaterThan(1.5 * 0.76)
    expect(4 * Math.sqrt(variance)).toBeLessThan(1.5 * 1.24)
  })
})

describe('the spreading of directions', () => {
  // Closed form of cos^2s: m1 = s / (s + 1), m2 = s (s − 1) / ((s + 1) (s + 2)).
  it.each([8, 12, 30, 46.8])('has the moments of cos^2s at a spread of %d°', (spread) => {
    const inverse = inverseSpreading(spread)
    const angles = Array.from({ length: 20000 }, (_, n) => inverse((n + 0.5) / 20000))
    const mean = (order: number) => angles.reduce((sum, angle) => sum + Math.cos(order * angle), 0) / angles.length
    const s = exponentFromSpread(spread)
    expect(mean(1)).toBeCloseTo(s / (s + 1), 3)
    expect(mean(2)).toBeCloseTo((s * (s - 1)) / ((s + 1) * (s + 2)), 3)
    expect((180 / Math.PI) * Math.sqrt(2 * (1 - mean(1)))).toBeCloseTo(spread, 0)
  })
})

describe('a sea of one direction', () => {
  // Frequencies that fall on a line of the block: 128 × sampleRate / 4096.
  // Lengths by linear theory: CEM (EM 1110-2-1100, 2002) example II-1-1: 10 s in 3 m, 53.2 m; 12 s in 9 m: 108.013 m, and
  // 8 s in 10 m: 70.898 m, both from ω² = g k tanh k h by bisection.
  it.each([
    { period: 10, depth: 3, wavelength: 53.156 },
    { period: 12, depth: 9, wavelength: 108.013 },
    { period: 8, depth: 10, wavelength: 70.898 },
  ])('runs $period s waves in $depth m with crests $wavelength m apart', ({ period, depth, wavelength }) => {
    const sensors = [surface(0, 0), surface(0, 9), surface(11, -4)]
    const change = { directionalSpread: 0.05, toward: 30, peakPeriod: period }
    const phases = block(sensors, change, depth, 32 / period).map((series) => coefficient(series, 128).phase)
    const lengths = sensors.map(({ east, north }) => east * Math.sin(Math.PI / 6) + north * Math.cos(Math.PI / 6))
    for (const m of [1, 2]) {
      expect(wrapped(phases[m] - phases[0] + (2 * Math.PI * lengths[m]) / wavelength)).toBeCloseTo(0, 2)
    }
  })

  // CEM example II-1-4: 15 s (0.0667 Hz) in 12 m, gauge at z = −11.4 m: K_z = 0.895.
  it('presses on a gauge as much less as linear theory says', () => {
    const gauge: SeaSensor = { kind: 'pressure', east: 0, north: 0, heightAboveBed: 0.6 }
    const [above, below] = block([surface(0, 0), gauge], { peakPeriod: 15 }, 12, 32 / 15).map((series) =>
      coefficient(series, 128),
    )
    expect(below.amplitude / above.amplitude).toBeCloseTo(0.895, 3)
    expect(below.phase).toBeCloseTo(above.phase, 9)
  })

  it('is the same sea whatever sensors stand in it', () => {
    const [alone] = block([surface(3, 4)], {}, 8, 2)
    const [, among] = block([surface(0, 0), surface(3, 4), surface(9, 9)], {}, 8, 2)
    expect(Array.from(among.slice(0, 50))).toEqual(
      Array.from(alone.slice(0, 50), (height) => expect.closeTo(height, 12)),
    )
  })

  it('reaches a sensor with a late clock earlier by what the clock is off', () => {
    const state = { time: 0, waterDepth: 8, systems: [system()], surgeHeight: 0 }
    const sensors = [surface(0, 0), surface(0, 0)]
    const [good, late] = makeBlock({ name: 'a', state, sampleRate: 4, length: 4096, sensors, clockOffsets: [0, 0.5] })
    for (let n = 0; n < 4000; n += 97) expect(late[n]).toBeCloseTo(good[n + 2], 9)
  })
})
