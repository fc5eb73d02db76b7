/**
 * What limits of survey and clocks do to a vector and no averaging takes away. A sensor's time error σ_i² = σ_clock² + (σ_position/c)²
 * goes into the slowness of the plane fit as Cov(s) = Q⁻¹ (Σ σ_i² d_i d_i') Q⁻¹ with d_i = r_i - r̄ and Q = Σ d_i d_i'.
 */
import type { GridPosition } from '../geodesy.ts'
import type { DirectionVariance } from './directionBound.ts'

export interface UnsureSensor extends GridPosition {
  /** One standard deviation of east and of north, m; of the clock, s. */
  positionSd: number
  clockSd: number
}

interface PlaneFit {
  /** Turns of the slowness for a second of each sensor: Q⁻¹ d_i, 1/m. */
  gains: { east: number; north: number }[]
}

/** Null for sensors on a line. */
function planeFit(sensors: readonly GridPosition[]): PlaneFit | null {
  const count = sensors.length
  const meanEast = sensors.reduce((sum, { east }) => sum + east / count, 0)
  const meanNorth = sensors.reduce((sum, { north }) => sum + north / count, 0)
  const apart = sensors.map(({ east, north }) => ({ east: east - meanEast, north: north - meanNorth }))
  const ee = apart.reduce((sum, { east }) => sum + east * east, 0)
  const nn = apart.reduce((sum, { north }) => sum + north * north, 0)
  const en = apart.reduce((sum, { east, north }) => sum + east * north, 0)
  const determinant = ee * nn - en * en
  if (!(determinant > 1e-9 * (ee + nn) ** 2)) return null
  return {
    gains: apart.map(({ east, north }) => ({
      east: (nn * east - en * north) / determinant,
      north: (ee * north - en * east) / determinant,
    })),
  }
}

/** `toward` in radians anticlockwise from east, the crests' speed in m/s. Null for sensors on a line. */
export function systematicErrors(
  sensors: readonly UnsureSensor[],
  toward: number,
  speed: number,
): DirectionVariance | null {
  const fit = planeFit(sensors)
  if (!fit) return null
  const [cos, sin] = [Math.cos(toward), Math.sin(toward)]
  const variance: DirectionVariance = { direction: 0, logSpeed: 0, cross: 0 }
  fit.gains.forEach(({ east, north }, n) => {
    const time = sensors[n].clockSd ** 2 + (sensors[n].positionSd / speed) ** 2
    // A second of this sensor turns the direction by c n·g and changes ln c by -c u·g.
    const across = speed * (north * cos - east * sin)
    const along = -speed * (east * cos + north * sin)
    variance.direction += time * across * across
    variance.logSpeed += time * along * along
    variance.cross += time * across * along
  })
  return variance
}

/**
 * Seconds by which a single sensor's clock may be off before it turns some heading by `turn` (rad): the worst sensor of the plane
 * fit, the worst direction. Null for sensors on a line.
 */
export function clockSkewAllowed(sensors: readonly GridPosition[], speed: number, turn: number): number | null {
  const fit = planeFit(sensors)
  if (!fit) return null
  const worst = Math.max(...fit.gains.map(({ east, north }) => Math.hypot(east, north)))
  return turn / (speed * worst)
}
