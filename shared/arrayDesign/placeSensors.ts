/** Sensors of a draft, each surveyed in its own way, on the station's grid. */
import { alongBearing, gridPositionOf } from '../geodesy.ts'
import type { GeographicPosition, GridPosition } from '../geodesy.ts'
import type { DraftSensor, PlacedSensor } from '../schemas/stationSetUpDeployments.ts'

export interface PlacingFault {
  /** Place in the draft's list. */
  index: number
  reason: string
}

/**
 * Metres east and north of the station for each sensor, in the order given. A range and bearing from another sensor is
 * followed to that one; from one that is not there, or from itself by a round, it is a fault and the sensor is left out.
 */
export function placeSensors(
  origin: GeographicPosition,
  sensors: readonly DraftSensor[],
): { placed: PlacedSensor[]; faults: PlacingFault[] } {
  const placed: PlacedSensor[] = []
  const faults: PlacingFault[] = []
  sensors.forEach((sensor, index) => {
    const position = positionOf(sensor, new Set())
    if (typeof position === 'string') faults.push({ index, reason: position })
    else placed.push({ ...sensor, east: position.east, north: position.north })
  })
  return { placed, faults }

  function positionOf({ letter, position }: DraftSensor, followed: Set<string>): GridPosition | string {
    if (position.by === 'grid') return { east: position.east, north: position.north }
    if (position.by === 'geographic') return gridPositionOf(origin, position)
    if (followed.has(letter)) return `the bearings from ${[...followed].join(', ')} go round in a circle`
    if (position.from === null) return alongBearing({ east: 0, north: 0 }, position.range, position.bearing)
    const from = sensors.find((sensor) => sensor.letter === position.from)
    if (!from) return `there is no sensor ${position.from} to measure from`
    const begin = positionOf(from, new Set([...followed, letter]))
    return typeof begin === 'string' ? begin : alongBearing(begin, position.range, position.bearing)
  }
}
