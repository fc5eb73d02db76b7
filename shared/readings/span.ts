/**
 * A run of samples of one array on its grid, in the unit of storage: ten-thousandths of a metre or of a decibar, so
 * that what was streamed and what is read back are the same whole numbers.
 */
export const unitsPerStoredUnit = 10_000

export interface SampleSpan {
  /** Hz. */
  sampleRate: number
  /** Slot of the first sample, see `slots`. */
  firstSlot: number
  /** Letters of the sensors, in the order of the deployment. */
  letters: string[]
  /** One series a sensor, all of the same length: whole ten-thousandths, NaN for a missing sample. */
  series: Float64Array[]
}

/** Metres or decibars to whole ten-thousandths; null and NaN are missing. Negative zero becomes zero. */
export const toStored = (value: number | null): number =>
  value === null ? NaN : Math.round(value * unitsPerStoredUnit) + 0

/** Whole ten-thousandths to metres or decibars. */
export const fromStored = (stored: number): number => stored / unitsPerStoredUnit

/** A series of whole ten-thousandths in metres or decibars. */
export function seriesFromStored(stored: Float64Array): Float64Array {
  const values = new Float64Array(stored.length)
  for (let n = 0; n < stored.length; n++) values[n] = (stored[n] ?? NaN) / unitsPerStoredUnit
  return values
}

export const lengthOf = (span: SampleSpan): number => span.series[0]?.length ?? 0

/** Samples that are there, over all sensors. */
export function countPresent(span: SampleSpan): number {
  let count = 0
  for (const series of span.series) {
    for (let n = 0; n < series.length; n++) if (series[n] === series[n]) count++
  }
  return count
}

/** Part of a span by slots, from `fromSlot` up to and without `toSlot`; empty where they do not meet. */
export function sliceSpan(span: SampleSpan, fromSlot: number, toSlot: number): SampleSpan {
  const from = Math.max(0, fromSlot - span.firstSlot)
  const to = Math.max(from, Math.min(lengthOf(span), toSlot - span.firstSlot))
  return { ...span, firstSlot: span.firstSlot + from, series: span.series.map((series) => series.subarray(from, to)) }
}

/** A span of missing samples. */
export const emptySpan = (sampleRate: number, firstSlot: number, letters: string[], length: number): SampleSpan => ({
  sampleRate,
  firstSlot,
  letters,
  series: letters.map(() => new Float64Array(length).fill(NaN)),
})

/** Writes the samples of `source` into `target` where they meet and where nothing stands yet: the first one stays. */
export function fillFrom(target: SampleSpan, source: SampleSpan): void {
  const shift = source.firstSlot - target.firstSlot
  const from = Math.max(0, -shift)
  const to = Math.min(lengthOf(source), lengthOf(target) - shift)
  source.letters.forEach((letter, index) => {
    const sink = target.series[target.letters.indexOf(letter)]
    const series = source.series[index]
    if (!sink || !series) return
    for (let n = from; n < to; n++) {
      const value = series[n] ?? NaN
      const standing = sink[n + shift] ?? NaN
      if (standing !== standing) sink[n + shift] = value
    }
  })
}

/** Joins spans of one grid into one that covers them all; where two have a sample, the earlier in the list stays. */
export function joinSpans(spans: readonly SampleSpan[]): SampleSpan {
  const [first] = spans
  if (!first) throw new RangeError('nothing to join')
  const firstSlot = Math.min(...spans.map((span) => span.firstSlot))
  const end = Math.max(...spans.map((span) => span.firstSlot + lengthOf(span)))
  const letters = [...new Set(spans.flatMap((span) => span.letters))]
  const joined = emptySpan(first.sampleRate, firstSlot, letters, end - firstSlot)
  for (const span of spans) fillFrom(joined, span)
  return joined
}
