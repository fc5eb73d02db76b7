import { describe, expect, it } from 'vitest'
import { dueWindows, longestOrderlyCatchUp } from '../../server/services/estimates/dueWindows.ts'

const minute = 60_000
const grid = { hopMs: minute, windowMs: 20 * minute, graceMs: 10_000 }
const noon = Date.UTC(2026, 11, 1, 12)
const at = (minutes: number, seconds = 0) => noon + minutes * minute + seconds * 1000

describe('due windows', () => {
  it('come as soon as durable samples reach their end', () => {
    expect(dueWindows({ doneUpTo: at(0), durableUntil: at(1), now: at(1, 0.3) }, grid)).toEqual({
      live: [at(1)],
      late: null,
      newest: at(1),
    })
  })

  it('wait for missing samples until the grace has passed, then come without', () => {
    const state = { doneUpTo: at(0), durableUntil: at(0, 59) }
    expect(dueWindows({ ...state, now: at(1, 9.999) }, grid).live).toEqual([])
    expect(dueWindows({ ...state, now: at(1, 10) }, grid).live).toEqual([at(1)])
  })

  it('come by time alone for a station without any samples, so that its watermark moves', () => {
    expect(dueWindows({ doneUpTo: at(0), durableUntil: null, now: at(2, 10) }, grid).live).toEqual([at(1), at(2)])
  })

  it('are never of the future, whatever a station with a fast clock stamps', () => {
    const ahead = dueWindows({ doneUpTo: at(0), durableUntil: at(9), now: at(1, 1) }, grid)
    expect(ahead.live).toEqual([at(1)])
  })

  it('wait for their readings while a buffer is coming in, though their grace has passed', () => {
    const state = { doneUpTo: at(0), durableUntil: at(2, 30), now: at(25) }
    expect(dueWindows({ ...state, isBackfilling: true }, grid).live).toEqual([at(1), at(2)])
    expect(dueWindows(state, grid).live).toHaveLength(24)
  })

  it('are none when all is done, and none when time went back', () => {
    expect(dueWindows({ doneUpTo: at(5), durableUntil: at(5, 30), now: at(5, 31) }, grid).live).toEqual([])
    expect(dueWindows({ doneUpTo: at(5), durableUntil: at(1), now: at(1, 2) }, grid)).toEqual({
      live: [],
      late: null,
      newest: at(5),
    })
  })

  it('after lost ticks come oldest first, up to thirty', () => {
    const { live, late } = dueWindows({ doneUpTo: at(0), durableUntil: at(30), now: at(30, 1) }, grid)
    expect(live).toHaveLength(longestOrderlyCatchUp)
    expect(live[0]).toBe(at(1))
    expect(live.at(-1)).toBe(at(30))
    expect(late).toBeNull()
  })

  it('after a longer stop begin with the newest, and the rest are noted as late', () => {
    expect(dueWindows({ doneUpTo: at(0), durableUntil: at(31), now: at(31, 1) }, grid)).toEqual({
      live: [at(31)],
      late: { first: at(1), last: at(30) },
      newest: at(31),
    })
  })

  it('lie on multiples of the hop since 1970, whatever the watermark was', () => {
    const { live } = dueWindows({ doneUpTo: at(0, 17), durableUntil: at(2, 5), now: at(2, 6) }, grid)
    expect(live).toEqual([at(1), at(2)])
  })
})
