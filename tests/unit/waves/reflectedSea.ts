/** A repeatable sea before a wall: every train comes back from it, later by the way there and back. Linear theory written out here. */
import type { ArrayWindow } from '../../../shared/waves/window.ts'
import { dice, windowOf } from './spreadSea.ts'

export interface WallOrder {
  seed: number
  /** Degrees true, travel of the waves that come in; the wall stands square to `wallToward`. */
  toward: number
  wallToward: number
  /** Metres from the array's origin along `wallToward`. */
  distance: number
  /** Amplitude that comes back, 0 to 1. */
  reflection: number
  /** False: what comes back is another sea with the same spectrum, of no relation to the first. */
  isRelated?: boolean
  peakPeriod: number
  height: number
  /** Root mean square of the headings, degrees. */
  spread: number
  depth: number
  positions: { east: number; north: number }[]
}

const g = 9.81
const radians = Math.PI / 180

function numberOf(omega: number, depth: number): number {
  let [low, high] = [1e-6, 10]
  for (let i = 0; i < 60; i++) {
    const k = (low + high) / 2
    if (g * k * Math.tanh(k * depth) < omega * omega) low = k
    else high = k
  }
  return low
}

export function wallSea(order: WallOrder): ArrayWindow {
  const { depth, positions, reflection, distance, isRelated = true } = order
  const next = dice(order.seed)
  const normal = () => Math.sqrt(-2 * Math.log(next() + 1e-12)) * Math.cos(2 * Math.PI * next())
  const [sampleRate, count, trains] = [2, 2400, 400]
  const series = positions.map(() => new Float64Array(count))
  const size = (order.height / 4) * Math.sqrt(2 / trains)
  const wall = (90 - order.wallToward) * radians
  for (let n = 0; n < trains; n++) {
    const omega = ((2 * Math.PI) / order.peakPeriod) * Math.exp(0.1 * normal())
    const k = numberOf(omega, depth)
    const angle = (90 - order.toward - order.spread * normal()) * radians
    const phase = 2 * Math.PI * next()
    const amplitude = size * Math.sqrt(-Math.log(next() + 1e-12))
    const back = isRelated ? phase - 2 * k * distance * Math.cos(angle - wall) : 2 * Math.PI * next()
    const backAngle = Math.PI + 2 * wall - angle
    positions.forEach(({ east, north }, m) => {
      const there = phase - k * (east * Math.cos(angle) + north * Math.sin(angle))
      const again = back - k * (east * Math.cos(backAngle) + north * Math.sin(backAngle))
      for (let i = 0; i < count; i++) {
        const t = (omega * i) / sampleRate
        series[m][i] += amplitude * (Math.cos(t + there) + reflection * Math.cos(t + again))
      }
    })
  }
  for (const one of series) for (let i = 0; i < count; i++) one[i] += 0.02 * normal()
  return windowOf(series, positions, depth, sampleRate)
}
