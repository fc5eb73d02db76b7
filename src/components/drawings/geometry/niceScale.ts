/** Axes: round steps, and the pieces of a line between gaps. Pure. */

/** Steps of 1, 2 or 5 times a power of ten: about so many from `least` to `most`, both ends included. */
export function niceTicks(least: number, most: number, about = 4): number[] {
  const span = most - least
  if (!(span > 0)) return [least]
  const raw = span / about
  const power = 10 ** Math.floor(Math.log10(raw))
  const step = ([1, 2, 5, 10].find((one) => one * power >= raw * 0.7) ?? 10) * power
  const first = Math.floor(least / step + 1e-9) * step
  const ticks: number[] = []
  for (let n = 0; ; n += 1) {
    const value = Number((first + n * step).toPrecision(12))
    ticks.push(value)
    if (value >= most - 1e-12) return ticks
  }
}

/** Decimals that tell the ticks apart. */
export const tickPlaces = (ticks: readonly number[]): number => {
  const step = ticks.length > 1 ? Math.abs(ticks[1] - ticks[0]) : 1
  return Math.max(0, -Math.floor(Math.log10(step) + 1e-9))
}

export interface TimedValue {
  ms: number
  value: number
}

/** A line is broken where more than `gapMs` lies between two points, or where a bearing passes north. */
export function unbroken(points: readonly TimedValue[], gapMs: number, isBearing = false): TimedValue[][] {
  const pieces: TimedValue[][] = []
  let before: TimedValue | null = null
  for (const point of points) {
    const isApart = !before || point.ms - before.ms > gapMs || (isBearing && Math.abs(point.value - before.value) > 180)
    if (isApart) pieces.push([point])
    else pieces[pieces.length - 1]?.push(point)
    before = point
  }
  return pieces
}
