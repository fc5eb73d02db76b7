import { describe, expect, it } from 'vitest'
import { compareRows, isNewerAlert, rowOfAlert, rowOfLimit, tally } from '../../../src/stores/alertOrder.ts'
import { byUrgency } from '../../../shared/alerts/order.ts'
import { alert, limit } from '../support/alertViews.ts'

const later = '2026-11-12T14:31:00.000Z'

describe('order of alerts', () => {
  it('puts active not acknowledged first, then acknowledged, cleared, shelved, out of service', () => {
    const alerts = [
      alert({ id: 1, state: 'outOfService' }),
      alert({ id: 2, state: 'shelved', priority: 'urgent' }),
      alert({ id: 3, state: 'returnedUnacknowledged' }),
      alert({ id: 4, state: 'acknowledgedActive', priority: 'urgent' }),
      alert({ id: 5, state: 'unacknowledgedActive', priority: 'low' }),
    ]
    const sorted = alerts.map(rowOfAlert).sort(compareRows)
    expect(sorted.map((row) => row.alert?.id)).toEqual([5, 4, 3, 2, 1])
    expect([...alerts].sort(byUrgency).map((one) => one.id)).toEqual([5, 4, 3, 2, 1])
  })

  it('orders by priority within a state, newest first within a priority', () => {
    const sorted = [
      alert({ id: 1, priority: 'high' }),
      alert({ id: 2, priority: 'urgent' }),
      alert({ id: 3, priority: 'high', raisedAt: later }),
    ]
      .map(rowOfAlert)
      .sort(compareRows)
    expect(sorted.map((row) => row.alert?.id)).toEqual([2, 3, 1])
  })

  it('counts active, new, cleared and put aside, limits without an alert too', () => {
    const rows = [
      rowOfAlert(alert({ id: 1 })),
      rowOfAlert(alert({ id: 2, state: 'acknowledgedActive', priority: 'urgent' })),
      rowOfAlert(alert({ id: 3, state: 'latchedUnacknowledged', priority: 'low' })),
      rowOfLimit(limit({ state: 'outOfService' })),
    ]
    expect(tally(rows)).toMatchObject({ active: 2, fresh: 1, cleared: 1, outOfService: 1 })
    expect(tally(rows).byPriority).toEqual({ low: 1, medium: 0, high: 1, urgent: 1 })
  })
})

describe('the newer of two answers about one alert', () => {
  it('is the one with the higher version, whatever its window', () => {
    const held = alert({ version: 2, windowEndsAt: later })
    expect(isNewerAlert(alert({ version: 1, windowEndsAt: '2026-11-12T15:00:00.000Z' }), held)).toBe(false)
    expect(isNewerAlert(alert({ version: 3 }), held)).toBe(true)
  })

  it('is the later window where the version is the same', () => {
    expect(isNewerAlert(alert(), alert({ windowEndsAt: later }))).toBe(false)
    expect(isNewerAlert(alert({ windowEndsAt: later }), alert())).toBe(true)
  })
})
