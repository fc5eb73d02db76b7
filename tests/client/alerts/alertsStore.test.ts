import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { useAlerts } from '../../../src/stores/alerts.ts'
import { useLive } from '../../../src/stores/live.ts'
import { useSession } from '../../../src/stores/session.ts'
import { FakeServer, FakeWebSocket, settle } from '../support/fakeServer.ts'
import { alert, board } from '../support/alertViews.ts'
import { session } from '../support/views.ts'

let server: FakeServer
beforeEach(() => {
  vi.useFakeTimers({ now: Date.parse('2026-11-12T14:32:07.000Z') })
  setActivePinia(createPinia())
  server = new FakeServer().install().on('/api/alerts', { body: board({ alerts: [alert()] }) })
  useSession().apply(session())
})
afterEach(() => {
  useAlerts().leave()
  useLive().disconnect()
  vi.unstubAllGlobals()
  vi.useRealTimers()
})

async function watching() {
  const alerts = useAlerts()
  useLive().connect()
  alerts.watchAll()
  FakeWebSocket.last.accept()
  FakeWebSocket.last.grant('alerts')
  await settle()
  return alerts
}
const event = (seq: number, body: unknown) =>
  FakeWebSocket.last.say({ type: 'event', room: 'alerts', seq, kind: 'alert', body })

describe('the store of alerts', () => {
  it('knows nothing before the board came, so that nothing looks calm', () => {
    expect(useAlerts().loaded).toBe(false)
  })

  it('takes REST answers and live events through one door, the newer one holds', async () => {
    const alerts = await watching()
    expect(alerts.counts).toMatchObject({ active: 1, fresh: 1 })
    event(1, alert({ version: 2, state: 'acknowledgedActive' }))
    expect(alerts.counts).toMatchObject({ active: 1, fresh: 0 })
    event(2, alert({ version: 1 }))
    expect(alerts.counts.fresh).toBe(0)
  })

  it('reads the board once after a burst of alerts, and again by itself', async () => {
    await watching()
    const asked = () => server.requests.filter(({ path }) => path === '/api/alerts').length
    expect(asked()).toBe(1)
    for (let n = 1; n <= 20; n += 1) event(n, alert({ id: 500 + n }))
    await vi.advanceTimersByTimeAsync(1_500)
    expect(asked()).toBe(2)
    await vi.advanceTimersByTimeAsync(30_000)
    expect(asked()).toBe(3)
  })

  it('lets go what the board no longer lists, but not what came after it was written', async () => {
    const alerts = await watching()
    event(1, alert({ id: 419, raisedAt: '2026-11-12T14:33:00.000Z' }))
    alerts.apply({ kind: 'board', body: board() })
    expect(alerts.rows.map((row) => row.alert?.id)).toEqual([419])
  })

  it('acknowledges by number and tells who was first', async () => {
    const alerts = await watching()
    const done = alert({
      ...{ version: 2, state: 'acknowledgedActive', acknowledgedBy: { id: 8, name: 'A-1' } },
      acknowledgedAt: '2026-11-12T14:31:00.000Z',
    })
    server.on('/api/alerts/418/acknowledge', { body: { isFirst: false, alert: done } })
    await expect(alerts.acknowledge(418, 'pilot told')).resolves.toBe(false)
    expect(server.requests.at(-1)).toMatchObject({ method: 'POST', body: { note: 'pilot told' } })
    expect(alerts.byId(418)?.acknowledgedBy?.name).toBe('A-1')
  })

  it('says that the board was not read when no answer came, and keeps what was known', async () => {
    const alerts = await watching()
    server.on('/api/alerts', { status: 503, body: {} })
    await vi.advanceTimersByTimeAsync(30_000)
    expect(alerts.isUnread).toBe(true)
    expect(alerts.counts.active).toBe(1)
  })

  it('lets nobody acknowledge without contact, read-only, or as partner', async () => {
    const alerts = await watching()
    expect(alerts.mayAcknowledge).toBe(true)
    useSession().becomeReadOnly()
    expect(alerts.mayAcknowledge).toBe(false)
    useSession().apply(session({ person: { ...session().person, role: 'partner' } }))
    expect(alerts.mayAcknowledge).toBe(false)
    useSession().apply(session())
    FakeWebSocket.last.end(1006)
    expect(alerts.mayAcknowledge).toBe(false)
  })
})
