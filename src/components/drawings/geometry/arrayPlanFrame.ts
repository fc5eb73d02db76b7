/** The array editor's square: a piece of the local grid, north up, that holds still while sensors are moved in it. */
import type { GridPosition } from '../../../../shared/geodesy.ts'
import type { Point } from './polar.ts'

/** Middle and side of the piece that is shown, m. */
export interface PlanExtent extends GridPosition {
  side: number
}

export interface ArrayPlanFrame {
  project: (position: GridPosition) => Point
  locate: (x: number, y: number) => GridPosition
  /** Fine and bold grid lines, m. */
  minor: number
  major: number
  /** Where they cross the drawing, each once. */
  minorLines: string
  majorLines: string
  /** Drawing units a metre. */
  scale: number
}

/** Sides that a grid of ten or fifteen squares divides. */
const sides = [1, 1.5, 2, 3, 4, 5, 7.5, 10]

function roundSide(least: number): number {
  const power = 10 ** Math.floor(Math.log10(least))
  return (sides.find((side) => side * power >= least - 1e-9) ?? 10) * power
}

const span = (values: number[]): [number, number] => [Math.min(...values), Math.max(...values)]

/** Just about twice as wide as the array. */
export function planExtent(positions: readonly GridPosition[]): PlanExtent {
  if (positions.length === 0) return { east: 0, north: 0, side: 100 }
  const [west, east] = span(positions.map((position) => position.east))
  const [south, north] = span(positions.map((position) => position.north))
  const side = roundSide(Math.max(10, 1.8 * Math.max(east - west, north - south)))
  const step = gridSteps(side).minor
  const middle = (a: number, b: number): number => Math.round((a + b) / 2 / step) * step
  return { east: middle(west, east), north: middle(south, north), side }
}

/** The extent as it was while all still stand well inside and it is not much too wide, else a new one. */
export function keptExtent(before: PlanExtent | null, positions: readonly GridPosition[]): PlanExtent {
  const next = planExtent(positions)
  if (!before || before.side > 2 * next.side) return next
  const reach = before.side * 0.47
  const isInside = positions.every(
    ({ east, north }) => Math.abs(east - before.east) <= reach && Math.abs(north - before.north) <= reach,
  )
  return isInside ? before : next
}

function gridSteps(side: number): { minor: number; major: number } {
  const power = 10 ** Math.floor(Math.log10(side))
  const major = [0.2, 0.5, 1, 2, 5].map((step) => step * power).filter((step) => step <= side * 0.4)
  const bold = major.at(-1) ?? side / 3
  return { major: bold, minor: bold / 5 }
}

export function arrayPlanFrame(extent: PlanExtent, size: number): ArrayPlanFrame {
  const scale = size / extent.side
  const { minor, major } = gridSteps(extent.side)
  const west = extent.east - extent.side / 2
  const north = extent.north + extent.side / 2
  const x = (east: number): number => (east - west) * scale
  const y = (at: number): number => (north - at) * scale
  const isBold = (step: number): boolean => Math.abs(step / (major / minor) - Math.round(step / (major / minor))) < 1e-6
  const lines = (bold: boolean): string => {
    let path = ''
    for (let step = Math.ceil(west / minor); step * minor <= west + extent.side; step += 1)
      if (isBold(step) === bold) path += `M${x(step * minor).toFixed(2)} 0V${size}`
    for (let step = Math.ceil((north - extent.side) / minor); step * minor <= north; step += 1)
      if (isBold(step) === bold) path += `M0 ${y(step * minor).toFixed(2)}H${size}`
    return path
  }
  return {
    project: (position) => [x(position.east), y(position.north)],
    locate: (px, py) => ({ east: west + px / scale, north: north - py / scale }),
    minor,
    major,
    minorLines: lines(false),
    majorLines: lines(true),
    scale,
  }
}
