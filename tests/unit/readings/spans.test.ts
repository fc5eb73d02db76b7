import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { affectedWindowEnds } from '../../../shared/readings/affectedWindows.ts'
import { compareWithStored } from '../../../shared/readings/compare.ts'
import { firstSlotFrom, minuteOfSlot, nearestSlot, nextMinuteSlot, timeOfSlot } from '../../../shared/readings/slots.ts'
import { countPresent, fillFrom, emptySpan, joinSpans, sliceSpan } from '../../../shared/readings/span.ts'
import type { SampleSpan } from '../../../shared/readings/span.ts'

const span = (firstSlot: number, ...rows: number[][]): SampleSpan => ({
  sampleRate: 4,
  firstSlot,
  letters: rows.map((_, index) => String.fromCharCode(65 + index)),
  series: rows.map((row) => Float64Array.from(row)),
})
const rowsOf = ({ series }: SampleSpan) => series.map((values) => [...values])

describe('the grid of a station', () => {
  it('gives each sample the nearest slot', () => {
    const start = Date.UTC(2026, 11, 1, 6, 30)
    expect(nearestSlot(start + 124, 4)).toBe(nearestSlot(start, 4))
    expect(nearestSlot(start + 126, 4)).toBe(nearestSlot(start, 4) + 1)
    expect(timeOfSlot(nearestSlot(start + 250, 4), 4)).toBe(start + 250)
  })

  it('puts every slot into exactly one minute, at any rate', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(0.5, 1, 2, 2.56, 4, 5, 8, 12.5, 16, 64),
        fc.integer({ min: 20_000_000, max: 40_000_000 }),
        (sampleRate, minute) => {
          const first = firstSlotFrom(minute * 60_000, sampleRate)
          const next = nextMinuteSlot(first, sampleRate)
          expect(next).toBe(firstSlotFrom((minute + 1) * 60_000, sampleRate))
          for (const slot of [first, next - 1]) expect(minuteOfSlot(slot, sampleRate)).toBe(minute * 60_000)
          expect(minuteOfSlot(next, sampleRate)).toBe((minute + 1) * 60_000)
        },
      ),
    )
  })
})

describe('spans of samples', () => {
  it('join with their gaps, and the first sample in a slot stays', () => {
    const joined = joinSpans([span(10, [1, 2, NaN]), span(11, [9, 3, 4]), span(15, [7])])
    expect(joined.firstSlot).toBe(10)
    expect(rowsOf(joined)).toEqual([[1, 2, 3, 4, NaN, 7]])
    expect(countPresent(joined)).toBe(5)
  })

  it('fill a window by letter, whatever the order of the sensors', () => {
    const window = emptySpan(4, 10, ['B', 'A'], 3)
    fillFrom(window, span(8, [1, 2, 3, 4], [5, 6, 7, 8]))
    expect(rowsOf(window)).toEqual([[7, 8, NaN], [3, 4, NaN]]) // prettier-ignore
  })

  it('are cut by slots', () => {
    expect(rowsOf(sliceSpan(span(10, [1, 2, 3, 4]), 11, 13))).toEqual([[2, 3]])
    expect(rowsOf(sliceSpan(span(10, [1, 2]), 20, 30))).toEqual([[]])
  })
})

describe('arriving samples beside stored ones', () => {
  const stored = span(10, [1, NaN, 3], [4, 5, 6])

  it('are told apart into added, repeated and conflicting', () => {
    const { added, repeated, conflicting, remainder } = compareWithStored(
      span(10, [1, 2, 8, 9], [4, NaN, 6, 7]),
      stored,
    )
    expect({ added, repeated, conflicting }).toEqual({ added: 3, repeated: 3, conflicting: 1 })
    expect(rowsOf(remainder)).toEqual([[NaN, 2, NaN, 9], [NaN, NaN, NaN, 7]]) // prettier-ignore
  })

  it('are all added where nothing is stored', () => {
    const { added, repeated, conflicting } = compareWithStored(span(100, [1, 2], [3, 4]), stored)
    expect({ added, repeated, conflicting }).toEqual({ added: 4, repeated: 0, conflicting: 0 })
  })
})

describe('windows that readings touch', () => {
  const minutes = (...ends: number[]) => ends.map((end) => end * 60_000)
  const grid = { windowMs: 20 * 60_000, hopMs: 60_000 }

  it('are those that end after the first sample and begin before the end of the last', () => {
    const ends = affectedWindowEnds(grid, 100 * 60_000, 100 * 60_000 + 1000, Infinity)
    expect(ends).toEqual(minutes(...Array.from({ length: 20 }, (_, n) => 101 + n)))
  })

  it('leave out what was not yet computed', () => {
    expect(affectedWindowEnds(grid, 100 * 60_000, 101 * 60_000, 103 * 60_000)).toEqual(minutes(101, 102, 103))
  })

  it('agree with the definition for any grid and span', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(300, 1200, 1230),
        fc.constantFrom(30, 60, 300),
        fc.integer({ min: 0, max: 5000 }),
        fc.integer({ min: 1, max: 3000 }),
        (windowSeconds, hopSeconds, from, length) => {
          const expected = []
          for (let end = 0; end <= 10_000; end += hopSeconds)
            if (end > from && end - windowSeconds < from + length) expected.push(end)
          const ends = affectedWindowEnds({ windowMs: windowSeconds, hopMs: hopSeconds }, from, from + length, 1e9)
          expect(ends).toEqual(expected)
        },
      ),
    )
  })
})
