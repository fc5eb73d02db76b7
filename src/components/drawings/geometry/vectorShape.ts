/** The shape of a wave vector: shaft and head by the sign of its system, and a wedge of one standard deviation. */
import type { SystemSign } from '../../../../shared/waveSystemNames.ts'
import { polar, polygon, polyline, round2 } from './polar.ts'
import type { Point } from './polar.ts'

export interface VectorShape {
  shaft: string
  head: string
  /** Barbs are a line, the other heads are closed. */
  headIsOpen: boolean
  dash: string | undefined
  /** Sector from the foot over ± one standard deviation of the heading, out to speed + one; null without both. */
  wedge: string | null
  /** The patch where the tip lies within one standard deviation of heading and speed. */
  wedgeEdge: string | null
}

export const dashOf = (sign: SystemSign): string | undefined => (sign === 1 ? undefined : sign === 2 ? '14 5' : '5 4')

export interface VectorMeasure {
  toward: number
  length: number
  width: number
  sign: SystemSign
  /** One standard deviation of the heading, degrees, and of the speed as a share of the speed. */
  headingSd?: number | null
  speedShare?: number | null
}

export function vectorShape(x: number, y: number, measure: VectorMeasure): VectorShape {
  const { toward, length, width, sign } = measure
  const headLength = Math.max(9, width * 3.3)
  const tip = polar(x, y, toward, length)
  const neck = polar(x, y, toward, length - headLength)
  const left = polar(neck[0], neck[1], toward - 90, headLength * 0.48)
  const right = polar(neck[0], neck[1], toward + 90, headLength * 0.48)
  const headIsOpen = sign === 3
  return {
    shaft: polyline([[x, y], neck]),
    head: headIsOpen ? polyline([left, tip, right]) : polygon([tip, left, right]),
    headIsOpen,
    dash: dashOf(sign),
    ...wedgeOf(x, y, measure),
  }
}

function wedgeOf(x: number, y: number, measure: VectorMeasure): Pick<VectorShape, 'wedge' | 'wedgeEdge'> {
  const { toward, length, headingSd, speedShare } = measure
  if (!headingSd || speedShare === null || speedShare === undefined) return { wedge: null, wedgeEdge: null }
  // Wider than this the sector would be no sector any more.
  const turn = Math.min(headingSd, 85)
  const inner = length * Math.max(0, 1 - speedShare)
  const outer = length * (1 + speedShare)
  const at = (bearing: number, distance: number): string => written(polar(x, y, bearing, distance))
  const outerArc = `A${round2(outer)} ${round2(outer)} 0 0 1 ${at(toward + turn, outer)}`
  const innerArc = `A${round2(inner)} ${round2(inner)} 0 0 0 ${at(toward - turn, inner)}`
  return {
    wedge: `M${written([x, y])}L${at(toward - turn, outer)}${outerArc}Z`,
    wedgeEdge: `M${at(toward - turn, inner)}L${at(toward - turn, outer)}${outerArc}L${at(toward + turn, inner)}${innerArc}Z`,
  }
}

const written = ([x, y]: Point): string => `${round2(x)} ${round2(y)}`
