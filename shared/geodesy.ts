/**
 * Positions on the ellipsoid (WGS 84) and on a station's grid: metres east and north of the station's position by range and
 * true bearing along the geodesic (azimuthal equidistant about the station). Karney 2013, Journal of Geodesy 87, 43-55. Over an
 * array of a kilometre the distance between two sensors on the grid is that along the geodesic to better than 0.1 mm.
 */
import geodesic from 'geographiclib-geodesic'

export interface GeographicPosition {
  /** Degrees north, -90 to 90. */
  latitude: number
  /** Degrees east, -180 to 180. */
  longitude: number
}

export interface GridPosition {
  /** m */
  east: number
  north: number
}

const ellipsoid = geodesic.Geodesic.WGS84
const degree = Math.PI / 180

/** Where a range (m) along a true bearing (degrees) ends on the grid. */
export const alongBearing = (from: GridPosition, range: number, bearing: number): GridPosition => ({
  east: from.east + range * Math.sin(bearing * degree),
  north: from.north + range * Math.cos(bearing * degree),
})

/** Range in m and true bearing in degrees, 0 (included) to 360, from one place of the grid to another; 0° where they are one. */
export function rangeAndBearing(from: GridPosition, to: GridPosition): { range: number; bearing: number } {
  const east = to.east - from.east
  const north = to.north - from.north
  return { range: Math.hypot(east, north), bearing: (Math.atan2(east, north) / degree + 360) % 360 }
}

/** A place on the grid of a station. Errors: RangeError for a latitude beyond ±90 or what is no number. */
export function gridPositionOf(origin: GeographicPosition, place: GeographicPosition): GridPosition {
  refuseNonsense(origin)
  refuseNonsense(place)
  const { s12 = 0, azi1 = 0 } = ellipsoid.Inverse(origin.latitude, origin.longitude, place.latitude, place.longitude)
  return alongBearing({ east: 0, north: 0 }, s12, azi1)
}

/** The place on the ellipsoid of a position on the grid of a station. Errors: RangeError as above. */
export function geographicPositionOf(origin: GeographicPosition, position: GridPosition): GeographicPosition {
  refuseNonsense(origin)
  const { range, bearing } = rangeAndBearing({ east: 0, north: 0 }, position)
  const { lat2 = 0, lon2 = 0 } = ellipsoid.Direct(origin.latitude, origin.longitude, bearing, range)
  return { latitude: lat2, longitude: lon2 }
}

function refuseNonsense({ latitude, longitude }: GeographicPosition): void {
  if (!(Math.abs(latitude) <= 90)) throw new RangeError(`latitude ${latitude} is not from -90 to 90`)
  if (!Number.isFinite(longitude)) throw new RangeError(`longitude ${longitude} is no number`)
}
