/** Points on a drawing: x to the right, y down; bearings clockwise from the top, degrees. */
export type Point = [x: number, y: number]

const radians = Math.PI / 180

/** Two decimals are a hundredth of a pixel: enough for a drawing and short in the document. */
export const round2 = (value: number): number => Math.round(value * 100) / 100

/** The point at a distance from (x, y) along a bearing. */
export const polar = (x: number, y: number, bearing: number, distance: number): Point => [
  x + Math.sin(bearing * radians) * distance,
  y - Math.cos(bearing * radians) * distance,
]

/** Path through the points, open; empty for none. */
export const polyline = (points: readonly Point[]): string =>
  points.map(([x, y], index) => `${index === 0 ? 'M' : 'L'}${round2(x)} ${round2(y)}`).join('')

/** Path through the points, closed. */
export const polygon = (points: readonly Point[]): string => (points.length === 0 ? '' : `${polyline(points)}Z`)

/** Straight line between two points. */
export const segment = (a: Point, b: Point): string => polyline([a, b])
