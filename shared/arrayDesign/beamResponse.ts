/**
 * What an array makes of one wave: the power of the conventional beam (Bartlett; Barber 1963 [M]) steered to another wave number,
 * P = |1/M Σ exp(i Δk·r)|², 1 where nothing tells the two apart.
 */
import type { GridPosition } from '../geodesy.ts'
import { waveNumber } from '../waves/dispersion.ts'

/** Power of the beam at a difference of wave numbers in rad/m east and north, 0 to 1. Errors: NaN for no sensors. */
export function beamPower(sensors: readonly GridPosition[], east: number, north: number): number {
  let real = 0
  let imag = 0
  for (const sensor of sensors) {
    const phase = east * sensor.east + north * sensor.north
    real += Math.cos(phase)
    imag += Math.sin(phase)
  }
  return (real * real + imag * imag) / (sensors.length * sensors.length)
}

export interface BeamPlan {
  /** Half the width of the square of wave numbers, rad/m. */
  reach: number
  /** Wave number of a wave of the period, whatever its direction: radius of the ring, rad/m. */
  ring: number
  /** Cells a side. */
  cells: number
  /** power[row × cells + column], rows from north to south, columns from west to east, of what waves go toward. */
  power: Float64Array
}

/** The beam's power over the plane of wave numbers for one true wave, for a drawing. Period in s, direction in degrees true. */
export function beamPlan(
  sensors: readonly GridPosition[],
  wave: { period: number; from: number; waterDepth: number; gravity: number },
  cells = 64,
): BeamPlan {
  const ring = waveNumber((2 * Math.PI) / wave.period, wave.waterDepth, wave.gravity)
  const reach = 2 * ring
  const toward = ((wave.from + 180) * Math.PI) / 180
  const [trueEast, trueNorth] = [ring * Math.sin(toward), ring * Math.cos(toward)]
  const power = new Float64Array(cells * cells)
  const at = (n: number): number => ((2 * n + 1) / cells - 1) * reach
  for (let row = 0; row < cells; row++) {
    for (let column = 0; column < cells; column++) {
      power[row * cells + column] = beamPower(sensors, at(column) - trueEast, -at(row) - trueNorth)
    }
  }
  return { reach, ring, cells, power }
}

/**
 * Power along the ring of one period for each true direction: `powerAt(i, j)` of the beam steered to bearing j × step while the
 * wave goes toward bearing i × step. Steps are narrow enough for the array's longest baseline.
 */
export function ringPower(
  sensors: readonly GridPosition[],
  ring: number,
  longestBaseline: number,
): { count: number; powerAt(trueIndex: number, steered: number): number } {
  const wanted = (2 * Math.PI * ring * longestBaseline) / 0.35
  const count = Math.min(360, Math.max(72, 12 * Math.ceil(wanted / 12)))
  const size = sensors.length
  const cos = new Float64Array(count * size)
  const sin = new Float64Array(count * size)
  for (let n = 0; n < count; n++) {
    const bearing = (2 * Math.PI * n) / count
    for (let m = 0; m < size; m++) {
      const phase = ring * (Math.sin(bearing) * sensors[m].east + Math.cos(bearing) * sensors[m].north)
      cos[n * size + m] = Math.cos(phase)
      sin[n * size + m] = Math.sin(phase)
    }
  }
  return {
    count,
    powerAt(trueIndex, steered) {
      let real = 0
      let imag = 0
      for (let m = 0; m < size; m++) {
        const [a, b] = [trueIndex * size + m, steered * size + m]
        real += cos[a] * cos[b] + sin[a] * sin[b]
        imag += cos[a] * sin[b] - sin[a] * cos[b]
      }
      return (real * real + imag * imag) / (size * size)
    },
  }
}
