/** The pieces of a coast as paths and labels in a plan's frame. */
import type { Coast } from '../../../../shared/schemas/coast.ts'
import { polar, polygon, polyline, round2 } from './polar.ts'
import type { Point } from './polar.ts'
import type { PlanFrame } from './planFrame.ts'

export interface CoastLayout {
  land: string[]
  shores: string[]
  contours: { path: string; depth: number | null; labelAt: Point | null }[]
  beaches: string[]
  moles: string[]
  names: { name: string; at: Point }[]
  places: { name: string; at: Point; labelAt: Point; leader: string }[]
  axes: { line: [Point, Point]; banks: string; words: string; at: Point; turn: number }[]
}

export function coastLayout(coast: Coast, frame: PlanFrame): CoastLayout {
  const project = ([longitude, latitude]: [number, number]): Point => frame.project(longitude, latitude)
  const layout: CoastLayout = {
    land: [],
    shores: [],
    contours: [],
    beaches: [],
    moles: [],
    names: [],
    places: [],
    axes: [],
  }
  for (const { properties, geometry } of coast.features) {
    const name = properties.name ?? ''
    if (geometry.type === 'Polygon') {
      for (const ring of geometry.coordinates) layout.land.push(polygon(ring.map(project)))
    } else if (geometry.type === 'LineString') {
      const points = geometry.coordinates.map(project)
      const path = polyline(points)
      if (properties.kind === 'contour')
        layout.contours.push({ path, depth: properties.depth ?? null, labelAt: crossing(points, 20) })
      if (properties.kind === 'beach') layout.beaches.push(path)
      if (properties.kind === 'mole') layout.moles.push(path)
      if (properties.kind === 'land') layout.shores.push(path)
      if (properties.kind === 'axis' && points.length > 1) layout.axes.push(axis(points, properties.bearing ?? null))
    } else {
      const at = project(geometry.coordinates)
      if (properties.kind === 'name') layout.names.push({ name, at })
      if (properties.kind === 'place') {
        const labelAt = properties.labelAt ? project(properties.labelAt) : ([at[0] + 24, at[1] - 18] as Point)
        layout.places.push({ name, at, labelAt, leader: leader(at, labelAt) })
      }
    }
  }
  return layout
}

const leader = (at: Point, labelAt: Point): string =>
  polyline([at, [labelAt[0] - 6, labelAt[1] - 4], [labelAt[0], labelAt[1] - 4]])

/** Where a line first crosses a height of the drawing. */
function crossing(points: readonly Point[], y: number): Point | null {
  for (let index = 1; index < points.length; index++) {
    const [a, b] = [points[index - 1], points[index]]
    if ((a[1] - y) * (b[1] - y) > 0 || a[1] === b[1]) continue
    return [a[0] + ((y - a[1]) / (b[1] - a[1])) * (b[0] - a[0]), y]
  }
  return null
}

/** Both sides of a channel and the words along it; the line runs inbound. */
function axis(points: readonly Point[], bearing: number | null): CoastLayout['axes'][number] {
  const [start, end] = [points[0], points[points.length - 1]]
  const course = (Math.atan2(end[0] - start[0], start[1] - end[1]) * 180) / Math.PI
  const banks = [-90, 90].map((side) => polyline([polar(...start, course + side, 11), polar(...end, course + side, 9)]))
  const along: Point = [start[0] + (end[0] - start[0]) * 0.25, start[1] + (end[1] - start[1]) * 0.25]
  const upright = course > 0 ? course - 90 : course + 90
  return {
    line: [start, end],
    banks: banks.join(''),
    words: bearing === null ? '' : `inbound ${String(Math.round(bearing)).padStart(3, '0')}° T`,
    at: polar(...along, course - 90, 16),
    turn: round2(upright),
  }
}
