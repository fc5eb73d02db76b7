import { describe, expect, it } from 'vitest'
import { floodGroups } from '../../../src/components/alerts/floodGroups.ts'
import { rowOfAlert } from '../../../src/stores/alertOrder.ts'
import { alert } from '../support/alertViews.ts'

const bar = { kind: 'station' as const, id: 3, name: 'Pennow Bar', code: 'PB' }
const rows = [
  alert({ id: 1, priority: 'urgent' }),
  alert({ id: 2, priority: 'high', subject: bar }),
  alert({ id: 3, priority: 'high', state: 'acknowledgedActive', subject: bar }),
  alert({ id: 4, priority: 'medium', subject: bar }),
  alert({ id: 5, priority: 'low', subject: bar }),
  alert({ id: 6, priority: 'low', state: 'acknowledgedActive', subject: bar }),
].map(rowOfAlert)
const flood = {
  since: '2026-11-12T14:21:00.000Z',
  count: 24,
  causes: [{ subject: bar, count: 5, alertIds: [2, 3, 4, 5, 6] }],
}

describe('a flood', () => {
  it('leaves urgent and high that wait in rows of their own and folds the rest by cause', () => {
    const { own, groups } = floodGroups(rows, flood)
    expect(own.map((row) => row.alert?.id)).toEqual([1, 2])
    expect(groups.map((group) => group.title)).toEqual(['Pennow Bar: 4 alerts'])
    expect(groups[0].words).toBe('1 high acknowledged, 1 medium, 2 low; 2 not acknowledged')
  })

  it('lets only medium and low be acknowledged together', () => {
    expect(floodGroups(rows, flood).groups[0].together).toEqual([4, 5])
  })
})
