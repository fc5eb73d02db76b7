import { describe, expect, it } from 'vitest'
import { turnBetween } from '../../../shared/directions.ts'
import { estimate } from '../../../shared/waves/estimate.ts'
import type { ArrayWindow } from '../../../shared/waves/window.ts'
import { dice, fiveSensors, spreadSea, windowOf } from './spreadSea.ts'

const order = { seed: 11, toward: 132, peakPeriod: 9, height: 1, spread: 14, depth: 11, positions: fiveSensors }
const sea = spreadSea(order)

/** The same waves seen in axes turned by `turn` degrees clockwise, with the sensors in another order. */
function seenAnew(window: ArrayWindow, turn: number, sensors: number[]): ArrayWindow {
  const angle = (turn * Math.PI) / 180
  return {
    ...window,
    sensors: sensors.map((n) => ({
      ...window.sensors[n],
      east: window.sensors[n].east * Math.cos(angle) + window.sensors[n].north * Math.sin(angle) + 400,
      north: window.sensors[n].north * Math.cos(angle) - window.sensors[n].east * Math.sin(angle) - 70,
    })),
    series: sensors.map((n) => window.series[n]),
  }
}

describe('an estimate of a random sea', () => {
  const [system] = estimate(sea).systems

  it('gives heading, speed, period, height and spread of the sea that was made', () => {
    expect(Math.abs(turnBetween(system.toward, 132))).toBeLessThan(2.5)
    expect(Math.abs(turnBetween(system.from, 312))).toBeLessThan(2.5)
    expect(Math.abs(system.speedRatio - 1)).toBeLessThan(0.025)
    expect(system.peakPeriod).toBeGreaterThan(8.2)
    expect(system.peakPeriod).toBeLessThan(9.8)
    expect(Math.abs((system.directionalSpread ?? 0) - 14)).toBeLessThan(3)
    expect(system.measuredSpeed).toBeGreaterThan(system.speed)
  })

  it.each([
    [0, [4, 2, 0, 1, 3]],
    [37, [0, 1, 2, 3, 4]],
    [90, [1, 0, 3, 2, 4]],
    [-151.3, [3, 4, 1, 2, 0]],
  ])('turned by %s° with sensors %j is the same vector to 1e-9', (turn, sensors) => {
    const [again] = estimate(seenAnew(sea, turn, sensors)).systems
    const angle = (turn * Math.PI) / 180
    const east = again.slownessEast * Math.cos(angle) - again.slownessNorth * Math.sin(angle)
    const north = again.slownessNorth * Math.cos(angle) + again.slownessEast * Math.sin(angle)
    const slowness = 1 / system.speed
    expect(Math.abs(east - system.slownessEast)).toBeLessThan(1e-9 * slowness)
    expect(Math.abs(north - system.slownessNorth)).toBeLessThan(1e-9 * slowness)
    expect(Math.abs(again.speed / system.speed - 1)).toBeLessThan(1e-9)
  })

  it('is the same every time', () => {
    expect(JSON.stringify(estimate(sea))).toBe(JSON.stringify(estimate(sea)))
  })

  it('leaves the readings as they were', () => {
    const before = sea.series.map((one) => one.slice())
    estimate(sea)
    expect(sea.series).toEqual(before)
  })
})

describe('a sensor that is wrong', () => {
  it('by a clock 0.4 s off is named, its offset estimated, and left out', { timeout: 20_000 }, () => {
    const late = spreadSea({ ...order, seed: 12 })
    // A wave passes the sensor 0.4 s before its stamp says: value stamped t was taken at t − 0.4 s.
    const shifted = Float64Array.from(late.series[2], (_, n) => {
      const at = n - 0.8
      const low = Math.floor(at)
      return low < 0 ? NaN : late.series[2][low] + (at - low) * (late.series[2][low + 1] - late.series[2][low])
    })
    const result = estimate({ ...late, series: late.series.map((one, n) => (n === 2 ? shifted : one)) })
    const verdict = result.sensors[2]
    expect(verdict.used).toBe(false)
    expect(verdict.findings).toContain('clock')
    expect(Math.abs((verdict.clockOffset ?? 0) + 0.4)).toBeLessThan(0.1)
    expect(result.sensors.filter((sensor) => !sensor.used)).toHaveLength(1)
    expect(result.qualityFlag).toBe(3)
    expect(Math.abs(turnBetween(result.systems[0].toward, 132))).toBeLessThan(2.5)
  })

  it('by a known clock offset is put right once and used', () => {
    const early = spreadSea({ ...order, seed: 13 })
    const shifted = Float64Array.from(early.series[1], (_, n) => early.series[1][n + 1] ?? NaN)
    const sensors = early.sensors.map((sensor, n) => (n === 1 ? { ...sensor, clockOffset: 0.5 } : sensor))
    const result = estimate({ ...early, sensors, series: early.series.map((one, n) => (n === 1 ? shifted : one)) })
    expect(result.sensors.every((sensor) => sensor.used)).toBe(true)
    expect(Math.abs(turnBetween(result.systems[0].toward, 132))).toBeLessThan(2.5)
  })
})

describe('no vector', () => {
  it('is given for two sensors', () => {
    const two = { ...sea, sensors: sea.sensors.slice(0, 2), series: sea.series.slice(0, 2) }
    const result = estimate(two)
    expect(result).toMatchObject({ resolved: false, reason: 'too-few-sensors', systems: [], qualityFlag: 4 })
    expect(result.significantWaveHeight).not.toBeNull()
  })

  it('is given for sensors on one line', () => {
    const line = sea.sensors.map((sensor, n) => ({ ...sensor, east: 3 * n, north: 4 * n }))
    expect(estimate({ ...sea, sensors: line })).toMatchObject({
      resolved: false,
      reason: 'collinear-array',
      systems: [],
    })
  })

  it('is given for noise', () => {
    const next = dice(5)
    const noise = fiveSensors.map(() =>
      Float64Array.from({ length: 2400 }, () => 0.2 * (next() + next() + next() - 1.5)),
    )
    const result = estimate(windowOf(noise, fiveSensors, 11, 2))
    expect(result).toMatchObject({ resolved: false, reason: 'no-resolvable-wave', systems: [], qualityFlag: 2 })
  })

  it('is given for a window without a sample, which is missing, not calm', () => {
    const empty = sea.series.map((one) => new Float64Array(one.length).fill(NaN))
    const result = estimate({ ...sea, series: empty })
    expect(result).toMatchObject({
      resolved: false,
      reason: 'too-few-sensors',
      qualityFlag: 9,
      significantWaveHeight: null,
    })
  })

  it('is given for a few seconds of readings', () => {
    const short = sea.series.map((one) => one.slice(0, 30))
    expect(estimate({ ...sea, series: short })).toMatchObject({ resolved: false, reason: 'too-little-data' })
  })
})
