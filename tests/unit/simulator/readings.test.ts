import { describe, expect, it } from 'vitest'
import { demonstrationStations, type DemonstrationStation } from '../../../shared/demonstration/stations.ts'
import { createReadings } from '../../../simulator/array/readings.ts'
import { scenarioNamed, scenarios } from '../../../simulator/scenarios/index.ts'
import type { Scenario } from '../../../simulator/scenarios/scenario.ts'
import { blockStep } from '../../../simulator/sea/stationSea.ts'
import { tideLevel } from '../../../shared/demonstration/tide.ts'

const anchor = Date.parse('2026-11-12T14:30:00Z')
const [outerLedge, fairway, pennowBar] = demonstrationStations

function named(name: string): Scenario {
  const scenario = scenarioNamed(name)
  if (!scenario) throw new Error(`no scenario ${name}`)
  return scenario
}

const source = (name: string, station: DemonstrationStation, seed = 7) =>
  createReadings({ seed, scenario: named(name), anchor, station })

const seconds = anchor / 1000

describe('readings as a function of time', () => {
  it('are the same again, in one piece or second by second, across the border of two blocks', () => {
    const border = Math.ceil(seconds / blockStep) * blockStep * fairway.sampleRate
    const whole = source('demonstration', fairway).readings(border - 20, 40)
    const bySecond = source('demonstration', fairway)
    const pieces: (number | null)[][] = fairway.sensors.map(() => [])
    for (let n = 0; n < 40; n += 2) bySecond.readings(border - 20 + n, 2).forEach((two, m) => pieces[m].push(...two))
    expect(pieces).toEqual(whole)
  })

  it('do not depend on what was asked before', () => {
    const first = seconds * fairway.sampleRate
    const used = source('veering-gale', fairway)
    for (const hours of [-30, 4, 0, 9]) used.readings(first + hours * 3600 * fairway.sampleRate, 2)
    expect(used.readings(first, 20)).toEqual(source('veering-gale', fairway).readings(first, 20))
  })

  it('differ with the seed and between stations', () => {
    const first = seconds * 4
    const one = source('quiet', outerLedge).readings(first, 40)[0]
    expect(source('quiet', outerLedge, 8).readings(first, 40)[0]).not.toEqual(one)
  })

  it('are written with the resolution of the instrument', () => {
    const [pressure] = source('quiet', outerLedge).readings(seconds * 4, 40)
    const [surface] = source('quiet', pennowBar).readings(seconds * 4, 40)
    expect(pressure.every((value) => value !== null && String(value).length <= 7)).toBe(true)
    expect(surface.every((value) => value !== null && /^-?\d+(\.\d{1,3})?$/.test(String(value)))).toBe(true)
  })
})

describe('the level under the waves', () => {
  const count = 1200 * 4
  const mean = (values: (number | null)[]) =>
    values.reduce<number>((sum, value) => sum + (value ?? 0), 0) / values.length
  const tide = tideLevel((seconds + 600) * 1000)

  it('is the tide at a surface sensor, in metres above datum', () => {
    expect(mean(source('quiet', pennowBar).readings(seconds * 4, count)[0])).toBeCloseTo(tide, 1)
  })

  it('is the water above the gauge at a pressure sensor, ρ g h in dbar', () => {
    // 1025 kg/m³ × 9.81 m/s² = 10 055.25 Pa a metre.
    const expected = ((14.2 - 0.6 + tide) * 10_055.25) / 10_000
    expect(mean(source('quiet', outerLedge).readings(seconds * 4, count)[0])).toBeCloseTo(expected, 1)
  })
})

describe('six hours of the quiet sea', () => {
  it('have the height asked for, within what chance allows, with no loss where blocks meet', () => {
    const hours = 6
    const readings = source('quiet', pennowBar)
      .readings(seconds * 4, hours * 3600 * 4)[0]
      .map((value) => value ?? NaN)
    let sum = 0
    for (let minute = 0; minute < hours * 6; minute++) {
      const part = readings.slice(minute * 2400, (minute + 1) * 2400)
      const mean = part.reduce((total, value) => total + value, 0) / part.length
      const slope =
        part.reduce((total, value, n) => total + (value - mean) * (n - 1199.5), 0) / ((2400 * (2400 ** 2 - 1)) / 12)
      sum += part.reduce((total, value, n) => total + (value - mean - slope * (n - 1199.5)) ** 2, 0) / part.length
    }
    // 0.82 of 1.2 m reach the station; with 12 mm of noise. CV over 6 h: about 1.2 %.
    const noise = 0.012 ** 2
    expect(4 * Math.sqrt(sum / (hours * 6) - noise)).toBeGreaterThan(0.984 * 0.95)
    expect(4 * Math.sqrt(sum / (hours * 6) - noise)).toBeLessThan(0.984 * 1.05)
  })
})

describe('faults', () => {
  const first = seconds * fairway.sampleRate
  const hour = 3600 * fairway.sampleRate

  it.each(['clock-slip', 'stuck-sensor', 'spikes', 'link-loss'])(
    'of %s leave the time before the anchor alone',
    (name) => {
      const healthy: Scenario = { ...named(name), faults: [] }
      const before = first - 3 * hour
      const expected = createReadings({ seed: 7, scenario: healthy, anchor, station: fairway }).readings(before, 200)
      expect(source(name, fairway).readings(before, 200)).toEqual(expected)
    },
  )

  it('stuck-sensor repeats the reading of the anchor at the second sensor only', () => {
    const readings = source('stuck-sensor', fairway).readings(first + hour, 200)
    expect(new Set(readings[1]).size).toBe(1)
    expect(readings[1][0]).toBe(source('stuck-sensor', fairway).readings(first, 1)[1][0])
    expect(new Set(readings[0]).size).toBeGreaterThan(50)
  })

  it('spikes throws off about four samples in a thousand and loses six', () => {
    const count = 6 * hour
    const healthy = createReadings({ seed: 7, scenario: { ...named('spikes'), faults: [] }, anchor, station: fairway })
    const sound = healthy.readings(first, count)[0]
    const spoilt = source('spikes', fairway).readings(first, count)[0]
    const lost = spoilt.filter((value) => value === null).length
    const thrown = spoilt.filter((value, n) => value !== null && value !== sound[n])
    expect(lost / count).toBeGreaterThan(0.004)
    expect(lost / count).toBeLessThan(0.008)
    expect(thrown.length / count).toBeGreaterThan(0.003)
    expect(thrown.length / count).toBeLessThan(0.005)
    expect(
      spoilt.every((value, n) => value === null || value === sound[n] || Math.abs(value - (sound[n] ?? 0)) > 2),
    ).toBe(true)
  })

  it('clock-slip makes the third sensor sample 0.6 s late, an hour after the anchor', () => {
    const healthy = createReadings({
      seed: 7,
      scenario: { ...named('clock-slip'), faults: [] },
      anchor,
      station: outerLedge,
    })
    const at = (seconds + 3600) * 4
    const slipped = source('clock-slip', outerLedge).readings(at, 4800)
    const sound = healthy.readings(at, 4800)
    expect(slipped[0]).toEqual(sound[0])
    const mismatch = (shift: number) => {
      let sum = 0
      for (let n = 0; n < 4700; n++) sum += ((slipped[2][n] ?? 0) - (sound[2][n + shift] ?? 0)) ** 2
      return sum
    }
    // 0.6 s are 2.4 samples at 4 Hz: two samples match best, three next.
    expect(mismatch(2)).toBeLessThan(mismatch(3))
    expect(mismatch(3)).toBeLessThan(mismatch(1))
    expect(mismatch(1)).toBeLessThan(mismatch(0))
  })
})

describe('every scenario', () => {
  it.each(scenarios.map(({ name }) => name))('%s moves smoothly: nothing jumps within ten minutes', (name) => {
    const scenario = named(name)
    let before = scenario.systems(-400)
    const greatest = { height: 0, period: 0, turn: 0 }
    for (let hours = -400; hours < 400; hours += 1 / 6) {
      const now = scenario.systems(hours)
      now.forEach((system, index) => {
        const last = before[index]
        greatest.height = Math.max(greatest.height, Math.abs(system.significantWaveHeight - last.significantWaveHeight))
        greatest.period = Math.max(greatest.period, Math.abs(system.peakPeriod - last.peakPeriod))
        greatest.turn = Math.max(greatest.turn, Math.abs(system.from - last.from))
      })
      expect(now.map(({ key }) => key)).toEqual(before.map(({ key }) => key))
      before = now
    }
    expect(greatest.height).toBeLessThan(0.15)
    expect(greatest.period).toBeLessThan(0.25)
    expect(greatest.turn).toBeLessThan(3)
  })
})
