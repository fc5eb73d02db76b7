/**
 * From longitude and latitude to a drawing: an equirectangular plane about the middle latitude, north up. Within a
 * few kilometres it keeps angles and distances to far less than a pixel.
 */
import type { Point } from './polar.ts'

export interface Padding {
  left: number
  top: number
  right: number
  bottom: number
}

export interface PlanFrame {
  project: (longitude: number, latitude: number) => Point
  /** Back from a point of the drawing. */
  locate: (x: number, y: number) => { longitude: number; latitude: number }
  metresPerUnit: number
}

const metresPerDegree = 111_180

/**
 * A frame of the given size in which all positions lie within the padding, as large as that allows. With one
 * position, or none apart, `leastMetres` is the width that is shown at least.
 */
export function planFrame(
  positions: readonly (readonly [longitude: number, latitude: number])[],
  width: number,
  height: number,
  padding: Padding,
  leastMetres = 400,
): PlanFrame {
  const longitudes = positions.map(([longitude]) => longitude)
  const latitudes = positions.map(([, latitude]) => latitude)
  const middleOf = (values: number[]): number =>
    values.length === 0 ? 0 : (Math.min(...values) + Math.max(...values)) / 2
  const spanOf = (values: number[]): number => (values.length === 0 ? 0 : Math.max(...values) - Math.min(...values))
  const middle = { longitude: middleOf(longitudes), latitude: middleOf(latitudes) }
  const eastPerDegree = metresPerDegree * Math.cos((middle.latitude * Math.PI) / 180)
  const free = {
    width: Math.max(1, width - padding.left - padding.right),
    height: Math.max(1, height - padding.top - padding.bottom),
  }
  const metresPerUnit = Math.max(
    (spanOf(longitudes) * eastPerDegree) / free.width,
    (spanOf(latitudes) * metresPerDegree) / free.height,
    leastMetres / width,
  )
  const centre: Point = [padding.left + free.width / 2, padding.top + free.height / 2]
  return {
    metresPerUnit,
    project: (longitude, latitude) => [
      centre[0] + ((longitude - middle.longitude) * eastPerDegree) / metresPerUnit,
      centre[1] - ((latitude - middle.latitude) * metresPerDegree) / metresPerUnit,
    ],
    locate: (x, y) => ({
      longitude: middle.longitude + ((x - centre[0]) * metresPerUnit) / eastPerDegree,
      latitude: middle.latitude - ((y - centre[1]) * metresPerUnit) / metresPerDegree,
    }),
  }
}

/** The longest of 1, 2 or 5 times a power of ten that is not longer than `most`. */
export function niceLength(most: number): number {
  const power = 10 ** Math.floor(Math.log10(most))
  return [5, 2, 1].map((step) => step * power).find((length) => length <= most) ?? power
}
