import { describe, expect, it } from 'vitest'
import {
  alertStateWords,
  countWords,
  floodWords,
  limitOf,
  noneExceededWords,
  rowFigure,
  rowState,
  valueAndSd,
} from '../../../src/components/alerts/alertWords.ts'
import { nextClock } from '../../../src/components/alerts/nextClock.ts'
import { rowOfAlert, rowOfLimit, tally } from '../../../src/stores/alertOrder.ts'
import { alert, limit } from '../support/alertViews.ts'

const now = Date.parse('2026-11-12T14:32:00.000Z')
const by = { id: 7, name: 'B-2' }

describe('an alert in words', () => {
  it('gives value with ± and unit, and the limit in its own decimals', () => {
    expect(valueAndSd(alert())).toBe('2.61 m ± 0.14')
    expect(limitOf(alert())).toBe('limit 2.50 m')
  })

  it('writes a bearing with its sense, and a sector as such', () => {
    const bearing = alert({ quantity: 'swellFrom', value: 247, valueSd: 4, raise: null, clear: null })
    expect(valueAndSd(bearing)).toBe('from 247° T ± 4°')
    expect(limitOf(bearing)).toBe('limit: a sector')
  })

  it('says who acknowledged and when', () => {
    const view = alert({ state: 'acknowledgedActive', acknowledgedBy: by, acknowledgedAt: '2026-11-12T14:27:00.000Z' })
    expect(alertStateWords(view, now)).toBe('Active, acknowledged by B-2 14:27')
  })

  it('says that a shelved one is still exceeded, and until when', () => {
    const shelf = { id: 1, startsAt: '2026-11-12T12:00:00.000Z', endsAt: '2026-11-12T18:00:00.000Z', reason: 'Berths empty', by, secondPerson: null } // prettier-ignore
    expect(alertStateWords(alert({ state: 'shelved', shelf }), now)).toBe('Exceeded, shelved until 18:00 by B-2')
  })

  it('says that it holds where its figures have stopped', () => {
    expect(rowState(rowOfAlert(alert({ isHeld: true })), now)).toContain('Figures stopped: held at its last value')
  })

  it('shows no figure of a limit that is out of service', () => {
    const outOfService = { since: '2026-11-10T08:00:00.000Z', reason: 'profile survey due', by }
    const row = rowOfLimit(limit({ state: 'outOfService', outOfService }))
    expect(rowFigure(row)).toEqual({ value: 'not judged', under: 'limit 2.50 m' })
    expect(rowState(row, now)).toContain('profile survey due')
  })
})

describe('the summary', () => {
  it('is never a bare all-clear', () => {
    expect(noneExceededWords({ judged: 12, notJudged: [], pending: [] })).toBe(
      'No limit exceeded among 12 judged, 0 not judged.',
    )
    expect(
      noneExceededWords({
        judged: 12,
        notJudged: [{ limitId: 1, title: 'Breakers, Pennow Sands', reason: 'stale' }],
        pending: [],
      }),
    ).toBe('No limit exceeded among 12 judged; 1 not judged: Breakers, Pennow Sands (stale).')
    expect(
      noneExceededWords({ judged: 0, notJudged: [{ limitId: 1, title: 'A', reason: 'stale' }], pending: [] }),
    ).toMatch(/^No limit could be judged; 1/)
    const pending = ['A', 'B', 'C'].map((title, n) => ({ limitId: n + 1, title, since: '2026-11-12T14:24:00.000Z' }))
    expect(noneExceededWords({ judged: 12, notJudged: [], pending })).toBe(
      '3 of 12 judged beyond their limit, not yet for their delay: A, B and 1 more; 0 not judged.',
    )
    expect(noneExceededWords({ judged: 0, notJudged: [], pending: [] })).toBe(
      'No limit is set, so none can be exceeded.',
    )
  })

  it('counts those that wait after clearing and those on the shelf', () => {
    const counts = tally([rowOfAlert(alert()), rowOfAlert(alert({ id: 2, state: 'shelved' }))])
    expect(countWords(counts, 1)).toBe('1 active, 1 new. 1 cleared, not acknowledged. 1 shelved')
  })

  it('counts a flood by priority, the worst first', () => {
    const rows = ['urgent', 'low', 'low', 'high'].map((priority, id) =>
      rowOfAlert(alert({ id, priority: priority as 'urgent' })),
    )
    expect(floodWords(tally(rows))).toBe('4 open: 1 urgent, 1 high, 2 low')
  })
})

describe('a time of day', () => {
  it('is the next such moment', () => {
    expect(nextClock('18:00', now)).toBe(Date.parse('2026-11-12T18:00:00.000Z'))
    expect(nextClock('14:00', now)).toBe(Date.parse('2026-11-13T14:00:00.000Z'))
    expect(nextClock('25:00', now)).toBeNull()
    expect(nextClock('soon', now)).toBeNull()
  })
})
