/** Places on the plan of the coast: where each stands and its label at the end of a leader. Pure. */
import type { CoastLayout } from './coastLayout.ts'
import type { Box } from './labelPlacement.ts'
import type { PlanFrame } from './planFrame.ts'
import { polyline } from './polar.ts'
import type { Point } from './polar.ts'

export interface PlanPlace {
  id: number
  name: string
  /** Second line of the label. */
  words: string
  latitude: number
  longitude: number
  /** Something is or was alerting: its mark stands before the label. */
  hasMark: boolean
}

export interface PlacedLabel {
  id: number
  at: Point
  leader: string
  /** Upper left corner of the mark. */
  mark: Point
  text: Point
  box: Box
}

/** Nearer than this a point of the coast's plan is the place itself, drawing units. */
const samePlace = 9
const letter = 6
const rowStep = 36
const markWidth = 26

const overlaps = (a: Box, b: Box): boolean =>
  a.x < b.x + b.width && b.x < a.x + a.width && a.y < b.y + b.height && b.y < a.y + a.height

/** A label stands where the plan of the coast wants it, else beside the place; inside the drawing in any case. */
export function placeOnPlan(
  places: readonly PlanPlace[],
  layout: CoastLayout | null,
  frame: PlanFrame,
  { width, height }: { width: number; height: number },
): PlacedLabel[] {
  const boxes: Box[] = []
  const isFree = (box: Box): boolean => boxes.every((other) => !overlaps(box, other))
  return places.map((place) => {
    const at = frame.project(place.longitude, place.latitude)
    const known = layout?.places.find((one) => Math.hypot(one.at[0] - at[0], one.at[1] - at[1]) < samePlace)
    const [wantedX, wantedY] = known?.labelAt ?? ([at[0] + 24, at[1] - 18] as Point)
    const textWidth = Math.max(place.name.length * 7.2, place.words.length * letter)
    const indent = place.hasMark ? markWidth + 4 : 4
    const x = Math.max(4, Math.min(wantedX, width - 6 - indent - textWidth))
    const boxAt = (top: number): Box => ({ x, y: top - 16, width: indent + textWidth, height: 34 })
    const inside = (top: number): number => Math.max(18, Math.min(top, height - 22))
    // Where another label stands already it moves down, then up.
    const tops = [0, 1, -1, 2, -2].map((step) => inside(wantedY + step * rowStep))
    const y = tops.find((top) => isFree(boxAt(top))) ?? tops[0]
    boxes.push(boxAt(y))
    const end: Point = [x, y - 4]
    return {
      id: place.id,
      at,
      leader: polyline([at, [x - 6, y - 4], end]),
      mark: [x + 4, y - 15],
      text: [x + indent, y - 2],
      box: boxAt(y),
    }
  })
}

/** The plan of the coast without the places that are drawn with their figures. */
export function withoutPlaces(layout: CoastLayout, placed: readonly PlacedLabel[]): CoastLayout {
  const isDrawn = (at: Point): boolean =>
    placed.some((one) => Math.hypot(one.at[0] - at[0], one.at[1] - at[1]) < samePlace)
  return { ...layout, places: layout.places.filter((one) => !isDrawn(one.at)) }
}
