/** Where things of the back-test's drawing stand: times and values in, pixels out. Pure. */
import { quantityOf } from '../../../shared/alerts/quantities.ts'
import type { BackTestView } from '../../../shared/schemas/backTest.ts'
import { niceTicks } from '../drawings/geometry/niceScale.ts'

export interface Box {
  width: number
  height: number
  left: number
  right: number
  top: number
  bottom: number
}

export interface BackTestScale {
  box: Box
  ticks: number[]
  x(ms: number): number
  /** Values in the quantity's unit. */
  y(value: number): number
  /** The value at a height, in the quantity's unit. */
  valueAt(y: number): number
}

/** `lines`: thresholds that must be inside, in the quantity's unit. */
export function backTestScale(view: BackTestView, lines: number[], box: Box): BackTestScale {
  const { toUnit, isCircular } = quantityOf(view.quantity)
  const [from, to] = [Date.parse(view.from), Date.parse(view.to)]
  let least = Math.min(0, ...lines)
  let most = Math.max(0, ...lines)
  for (const point of view.points) {
    least = Math.min(least, point.least * toUnit)
    most = Math.max(most, point.most * toUnit)
  }
  const ticks = isCircular ? [0, 90, 180, 270, 360] : niceTicks(least, (most || 1) * 1.06)
  const [bottom, top] = [ticks[0] ?? 0, ticks.at(-1) ?? 1]
  const inner = box.height - box.top - box.bottom
  return {
    ...{ box, ticks },
    x: (ms) => box.left + ((ms - from) / (to - from)) * (box.width - box.left - box.right),
    y: (value) => box.top + inner * (1 - (value - bottom) / (top - bottom)),
    valueAt: (y) => bottom + (1 - (y - box.top) / inner) * (top - bottom),
  }
}

/** One stroke a step from its least to its most, joined where steps follow each other; a missing step is a gap. */
export function backTestPath(view: BackTestView, { x, y }: BackTestScale): string {
  const { toUnit } = quantityOf(view.quantity)
  let path = ''
  let before = -Infinity
  for (const { at, least, most } of view.points) {
    const ms = Date.parse(at)
    const join = ms - before > view.stepSeconds * 1_500 ? 'M' : 'L'
    const px = x(ms).toFixed(1)
    path += `${join}${px} ${y(least * toUnit).toFixed(1)}${most > least ? `L${px} ${y(most * toUnit).toFixed(1)}` : ''}`
    before = ms
  }
  return path
}

const dayMs = 86_400_000

/** Days named along the axis: about seven, at midnight UTC. */
export function dayTicks(fromMs: number, toMs: number): number[] {
  const days = Math.max(1, Math.round((toMs - fromMs) / dayMs))
  const step = Math.max(1, Math.ceil(days / 7))
  const last = Math.floor(toMs / dayMs) * dayMs
  const ticks: number[] = []
  for (let ms = last; ms >= fromMs; ms -= step * dayMs) ticks.unshift(ms)
  return ticks
}
