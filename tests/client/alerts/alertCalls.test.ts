import { mount } from '@vue/test-utils'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { nextTick } from 'vue'
import { useAlertCalls } from '../../../src/composables/useAlertCalls.ts'
import { useAlerts } from '../../../src/stores/alerts.ts'
import { useNotices } from '../../../src/stores/notices.ts'
import { useServerClock } from '../../../src/stores/serverClock.ts'
import { useSession } from '../../../src/stores/session.ts'
import { useSound } from '../../../src/stores/sound.ts'
import { alert, board } from '../support/alertViews.ts'
import { session } from '../support/views.ts'

const now = Date.parse('2026-11-12T14:32:00.000Z')
let played: string[]
let mounted: ReturnType<typeof mount>

/** The page as it stands `seconds` later. */
async function after(seconds: number): Promise<void> {
  vi.setSystemTime(now + seconds * 1000)
  useServerClock().hear(now + seconds * 1000)
  await nextTick()
}
const board1 = (...alerts: ReturnType<typeof alert>[]) =>
  useAlerts().apply({ kind: 'board', body: board({ alerts, serverTime: '2026-11-12T15:00:00.000Z' }) })

beforeEach(() => {
  vi.useFakeTimers({ now })
  setActivePinia(createPinia())
  useServerClock().hear(now)
  useSession().apply(session({ serverTime: '2026-11-12T14:32:00.000Z' }))
  const sound = useSound()
  const last = new Map<string, number>()
  played = []
  vi.spyOn(sound, 'allow').mockResolvedValue(true)
  vi.spyOn(sound, 'isDue').mockImplementation((tone, at) => at - (last.get(tone) ?? -Infinity) >= 60_000)
  vi.spyOn(sound, 'play').mockImplementation((tone, at) => {
    last.set(tone, at)
    played.push(`${tone} ${(at - now) / 1000}`)
    return true
  })
  mounted = mount({ setup: () => (useAlertCalls(), () => null) })
})
afterEach(() => {
  mounted.unmount()
  vi.useRealTimers()
})

describe('the call to the watch', () => {
  it('sounds for what waits and again each minute until it is acknowledged', async () => {
    board1(alert())
    await after(1)
    await after(30)
    await after(61)
    expect(played).toEqual(['high 1', 'high 61'])
    useAlerts().apply({ kind: 'alert', body: alert({ version: 2, state: 'acknowledgedActive' }) })
    await after(130)
    expect(played).toHaveLength(2)
  })

  it('has no tone for medium and low', async () => {
    board1(alert({ priority: 'medium' }), alert({ id: 2, priority: 'low' }))
    await after(1)
    expect(played).toEqual([])
  })

  it('is held by Silence and comes back after it', async () => {
    board1(alert())
    useSound().silence(now)
    await after(1)
    await after(119)
    expect(played).toEqual([])
    await after(120)
    expect(played).toEqual(['high 120'])
  })

  it('is not for partners', async () => {
    useSession().apply(session({ person: { ...session().person, role: 'partner' } }))
    board1(alert())
    await after(1)
    expect(played).toEqual([])
  })

  it('shows a notice of a new alert while the page is out of sight', async () => {
    const show = vi.spyOn(useNotices(), 'show').mockReturnValue(undefined)
    board1()
    await after(1)
    vi.spyOn(document, 'visibilityState', 'get').mockReturnValue('hidden')
    useAlerts().apply({ kind: 'alert', body: alert() })
    await after(2)
    expect(show).toHaveBeenCalledWith(418, 'High: Total height, Outer Ledge 2.61 m ± 0.14')
    vi.restoreAllMocks()
  })
})
