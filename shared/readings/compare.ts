/** How a span that arrives stands to what is stored: stored samples are never altered. */
import { lengthOf } from './span.ts'
import type { SampleSpan } from './span.ts'

export interface Comparison {
  /** Samples that nothing stands in the place of. */
  added: number
  /** Samples that stand there already, with the same value. */
  repeated: number
  /** Samples that stand there already, with another value. */
  conflicting: number
  /** The arriving span with only its added samples, the others missing. */
  remainder: SampleSpan
}

export function compareWithStored(arriving: SampleSpan, stored: SampleSpan): Comparison {
  const shift = arriving.firstSlot - stored.firstSlot
  const comparison: Comparison = {
    added: 0,
    repeated: 0,
    conflicting: 0,
    remainder: { ...arriving, series: arriving.series.map((series) => series.slice()) },
  }
  arriving.letters.forEach((letter, index) => {
    const series = comparison.remainder.series[index]
    const standing = stored.series[stored.letters.indexOf(letter)]
    for (let n = 0; series && n < lengthOf(arriving); n++) {
      const value = series[n] ?? NaN
      const there = standing?.[n + shift] ?? NaN
      if (Number.isNaN(value)) continue
      if (Number.isNaN(there)) comparison.added++
      else {
        if (value === there) comparison.repeated++
        else comparison.conflicting++
        series[n] = NaN
      }
    }
  })
  return comparison
}
