import { flushPromises, mount } from '@vue/test-utils'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { nextTick } from 'vue'
import { createMemoryHistory } from 'vue-router'
import AlertDialogs from '../../../src/components/alerts/AlertDialogs.vue'
import AlertLine from '../../../src/components/alerts/AlertLine.vue'
import { createOffingRouter } from '../../../src/router/index.ts'
import { useAlertDialogs } from '../../../src/stores/alertDialogs.ts'
import { useAlerts } from '../../../src/stores/alerts.ts'
import { useServerClock } from '../../../src/stores/serverClock.ts'
import { useSession } from '../../../src/stores/session.ts'
import { FakeServer } from '../support/fakeServer.ts'
import { alert, board, limit } from '../support/alertViews.ts'
import { session } from '../support/views.ts'
import { wordsOf } from '../support/wordsOf.ts'

const now = Date.parse('2026-11-12T14:32:07.000Z')
const urgent = alert({
  ...{ id: 417, limitId: 5, priority: 'urgent', state: 'acknowledgedActive', title: 'Sea at the bar, Pennow Bar' },
  acknowledgedBy: { id: 7, name: 'B-2' },
  acknowledgedAt: '2026-11-12T14:01:00.000Z',
})
let server: FakeServer
let mounted: ReturnType<typeof mount>[] = []

function show(component: typeof AlertLine | typeof AlertDialogs) {
  const router = createOffingRouter(createMemoryHistory())
  const shown = mount(component, { attachTo: document.body, global: { plugins: [router] } })
  mounted.push(shown)
  return shown
}
const apply = (changes: Parameters<typeof board>[0]) => useAlerts().apply({ kind: 'board', body: board(changes) })

beforeEach(() => {
  vi.useFakeTimers({ now, toFake: ['Date', 'setTimeout', 'setInterval', 'performance'] })
  setActivePinia(createPinia())
  server = new FakeServer().install()
  useServerClock().hear(now)
  useSession().apply(session())
})
afterEach(() => {
  for (const one of mounted) one.unmount()
  mounted = []
  vi.unstubAllGlobals()
  vi.useRealTimers()
})

describe('the alert line', () => {
  it('never looks calm before the alerts are known', () => {
    expect(wordsOf(show(AlertLine).element)).toContain('Alerts are not known yet.')
  })

  it('names the worst and the next that waits, the counts, and what is not out', () => {
    apply({ alerts: [alert(), urgent], messagesNotOut: { count: 1, since: '2026-11-12T14:20:00.000Z' } })
    const text = wordsOf(show(AlertLine).element)
    expect(text).toContain('Urgent Sea at the bar, Pennow Bar 2.61 m')
    expect(text).toContain('High, new Total height, Outer Ledge 2.61 m')
    expect(text).toContain('limit 2.50 m')
    expect(text).toContain('2 active, 1 new')
    expect(text).toContain('1 message not out since 14:20')
    expect(text).not.toContain('No limit exceeded')
  })

  it('says among how many none is exceeded, and which were not judged', () => {
    apply({ notJudged: [{ limitId: 9, title: 'Breakers, Pennow Sands', reason: 'stale' }] })
    expect(wordsOf(show(AlertLine).element)).toContain(
      'No limit exceeded among 12 judged; 1 not judged: Breakers, Pennow Sands (stale).',
    )
  })

  it('does not call a limit that is exceeded on its shelf not exceeded', () => {
    apply({ limits: [limit({ state: 'shelved', isActive: true })] })
    const text = wordsOf(show(AlertLine).element)
    expect(text).not.toContain('No limit exceeded')
    expect(text).toContain('1 shelved')
  })

  it('offers nothing to acknowledge to a partner', () => {
    useSession().apply(session({ person: { ...session().person, role: 'partner' } }))
    apply({ alerts: [alert()] })
    expect(show(AlertLine).find('button').exists()).toBe(false)
  })

  it('counts a flood by priority and names its cause', () => {
    const flood = {
      since: '2026-11-12T14:21:00.000Z',
      count: 24,
      causes: [{ subject: alert().subject, count: 21, alertIds: [418] }],
    }
    apply({ alerts: [alert(), urgent], flood })
    const text = wordsOf(show(AlertLine).element)
    expect(text).toContain('2 open: 1 urgent, 1 high')
    expect(text).toContain('21 from Outer Ledge')
  })
})

describe('acknowledging', () => {
  it('is bound to the alert under the finger when it went down', async () => {
    apply({ alerts: [alert()] })
    const button = show(AlertLine).find('button')
    await button.trigger('pointerdown')
    useAlerts().apply({ kind: 'alert', body: alert({ id: 420, priority: 'urgent', limitId: 8 }) })
    await nextTick()
    await button.trigger('click')
    expect(useAlertDialogs().acknowledging).toBe(418)
  })

  it('asks once, naming number, place, value, limit and moment, and sends the note', async () => {
    apply({ alerts: [alert()] })
    const done = alert({ version: 2, state: 'acknowledgedActive', acknowledgedBy: { id: 7, name: 'B-2' } })
    server.on('/api/alerts/418/acknowledge', { body: { isFirst: true, alert: done } })
    show(AlertDialogs)
    useAlertDialogs().acknowledging = 418
    await flushPromises()
    const dialog = document.querySelector('[role="dialog"]')
    if (!dialog) throw new Error('no dialog')
    const text = wordsOf(dialog).replaceAll('\u00a0', ' ')
    expect(text).toContain('Alert 0418, high, second most serious of four')
    expect(text).toContain('Place Outer Ledge')
    expect(text).toContain('Quantity Total height 2.61 m ± 0.14')
    expect(text).toContain('Limit 2.50 m, exceeded since 14:10')
    expect(text).toContain('Measured 14:30 UTC')
    const note = dialog.querySelector('textarea')
    if (!note) throw new Error('no field for the note')
    note.value = 'Pilot told by VHF'
    note.dispatchEvent(new Event('input'))
    dialog.querySelector<HTMLButtonElement>('button.p')?.click()
    await flushPromises()
    const sent = server.requests.find(({ path }) => path === '/api/alerts/418/acknowledge')
    expect(sent).toMatchObject({ method: 'POST', body: { note: 'Pilot told by VHF' } })
    expect(useAlertDialogs().acknowledging).toBeNull()
  })

  it('tells the second desk who was first', async () => {
    apply({ alerts: [alert()] })
    const done = alert({
      ...{ version: 2, state: 'acknowledgedActive', acknowledgedBy: { id: 8, name: 'A-1' } },
      acknowledgedAt: '2026-11-12T14:31:00.000Z',
    })
    server.on('/api/alerts/418/acknowledge', { body: { isFirst: false, alert: done } })
    show(AlertDialogs)
    useAlertDialogs().acknowledging = 418
    await flushPromises()
    document.querySelector<HTMLButtonElement>('[role="dialog"] button.p')?.click()
    await flushPromises()
    expect(document.querySelector('[role="dialog"]')?.textContent).toContain(
      'A-1 had acknowledged it already, at 14:31',
    )
  })
})
