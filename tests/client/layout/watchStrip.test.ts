import { mount } from '@vue/test-utils'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { nextTick } from 'vue'
import ContactBand from '../../../src/components/frame/ContactBand.vue'
import StationAges from '../../../src/components/frame/StationAges.vue'
import WatchStrip from '../../../src/components/frame/WatchStrip.vue'
import { useLive } from '../../../src/stores/live.ts'
import { useServerClock } from '../../../src/stores/serverClock.ts'
import { useSettings } from '../../../src/stores/settings.ts'
import { useStations } from '../../../src/stores/stations.ts'
import { FakeServer, FakeWebSocket } from '../support/fakeServer.ts'
import { estimate, station } from '../support/views.ts'
import { wordsOf } from '../support/wordsOf.ts'

const serverTime = Date.parse('2026-11-12T14:32:07.000Z')

beforeEach(() => {
  vi.useFakeTimers({ now: serverTime - 3_600_000 })
  setActivePinia(createPinia())
  new FakeServer().install()
  const clock = useServerClock()
  clock.start()
  clock.hear(serverTime)
})
afterEach(() => {
  useServerClock().stop()
  vi.useRealTimers()
  vi.unstubAllGlobals()
})

describe('watch strip', () => {
  it('shows the time of the server, UTC first, and the local time of the port beside it', () => {
    useSettings().apply({
      portName: 'Marrowick',
      timeZone: 'Etc/GMT-1',
      leadStationId: null,
      cautions: { figures: 'figures', array: 'array', traceSpeeds: 'trace speeds' },
      coast: null,
    })
    const text = wordsOf(mount(WatchStrip).element)
    expect(text).toContain('14:32 :07 UTC')
    expect(text).toContain('Thu 12 Nov 2026')
    expect(text).toContain('15:32 local')
  })
})

describe('ages of stations', () => {
  it('turn a station stale by the clock alone, and say so once', async () => {
    const stations = useStations()
    stations.apply({ kind: 'stations', body: [station()] })
    const strip = mount(StationAges)
    expect(wordsOf(strip.element)).toBe('1 of 1 live, age since window end OL 2 min')
    vi.advanceTimersByTime(14 * 60_000)
    await nextTick()
    expect(strip.find('.late').text()).toBe('OL 16 min')
    expect(strip.find('[role=status]').text()).toBe('Not live: Outer Ledge.')
  })

  it('name only the old ones when there are many', () => {
    const old = estimate({ windowEndsAt: '2026-11-12T14:09:00.000Z' })
    const many = Array.from({ length: 12 }, (_, n) => station({ id: n + 1, code: `S${n}` }))
    many[3] = station({ id: 4, code: 'TR', estimate: { ...old, stationId: 4 } })
    useStations().apply({ kind: 'stations', body: many })
    expect(wordsOf(mount(StationAges).element)).toContain('11 of 12 live, oldest TR 23 min TR 23 min')
  })

  it('call a station that never sent anything no live one', () => {
    const silent = station({
      estimate: null,
      lastGood: null,
      link: { state: 'never', lastReadingAt: null, clockOffsetSeconds: null, recordShare: 0 },
    })
    useStations().apply({ kind: 'stations', body: [silent] })
    expect(wordsOf(mount(StationAges).element)).toContain('0 of 1 live, age since window end OL no data')
  })
})

describe('lost contact', () => {
  it('is told with its time and its length, and after a minute that the figures are not live', async () => {
    const live = useLive()
    const band = mount(ContactBand)
    live.connect()
    FakeWebSocket.last.accept('first', '2026-11-12T14:31:02.000Z')
    await nextTick()
    expect(band.find('.band').exists()).toBe(false)
    FakeWebSocket.last.end(1006)
    vi.advanceTimersByTime(5_000)
    await nextTick()
    expect(wordsOf(band.find('.band').element)).toContain('No contact since 14:31:02 UTC, 5 s. No new alerts')
    vi.advanceTimersByTime(60_000)
    await nextTick()
    expect(wordsOf(band.find('.band').element)).toContain(
      '65 s. No new alerts can reach this screen. The hatched figures are not live.',
    )
    expect(band.find('[role=status]').text()).toBe('No contact since 14:31:02 UTC.')
  })
})
