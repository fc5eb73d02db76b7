import { describe, expect, it } from 'vitest'
import { rulerSun, rulerTicks, rulerX } from '../../../src/components/frame/rulerMarks.ts'

const now = Date.parse('2026-11-12T14:32:00Z')
const width = 484

describe('the ruler on the offing line', () => {
  it('has now at three quarters, 9 h back and 3 h ahead', () => {
    expect(rulerX(now, now, width)).toBeCloseTo(2 + 0.75 * 480)
    expect(rulerX(now - 9 * 3_600_000, now, width)).toBeCloseTo(2)
    expect(rulerX(now + 3 * 3_600_000, now, width)).toBeCloseTo(482)
  })

  it('names every third hour in UTC, the unit once', () => {
    const labels = rulerTicks(now, width).flatMap(({ label }) => label ?? [])
    expect(labels).toEqual(['06 UTC', '09', '12', '15'])
  })

  it('rolls over midnight', () => {
    const labels = rulerTicks(Date.parse('2026-11-13T02:10:00Z'), width).flatMap(({ label }) => label ?? [])
    expect(labels).toEqual(['18 UTC', '21', '00', '03'])
  })

  it('shows the sun only within its span, with times in UTC', () => {
    const sun = { riseMs: Date.parse('2026-11-12T08:24:00Z'), setMs: Date.parse('2026-11-12T17:52:00Z') }
    expect(rulerSun([sun], now, width).map(({ words }) => words)).toEqual(['sunrise 08:24'])
  })

  it('keeps the words of the sun clear of the word now and of the edges', () => {
    const nowX = rulerX(now, now, width)
    const [soon] = rulerSun([{ riseMs: 0, setMs: now + 12 * 60_000 }], now, width)
    expect(soon).toMatchObject({ anchor: 'start', labelX: nowX + 10 })
    const [past] = rulerSun([{ riseMs: now - 20 * 60_000, setMs: 0 }], now, width)
    expect(past).toMatchObject({ anchor: 'end', labelX: nowX - 40 })
    const [late] = rulerSun([{ riseMs: 0, setMs: now + 170 * 60_000 }], now, width)
    expect(late).toMatchObject({ anchor: 'end', labelX: width - 2 })
  })
})
