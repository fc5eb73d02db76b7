import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { useLive } from '../../../src/stores/live.ts'
import { useStations } from '../../../src/stores/stations.ts'
import { FakeServer, FakeWebSocket, settle } from '../support/fakeServer.ts'
import { estimate, station } from '../support/views.ts'

let server: FakeServer

async function watching() {
  const stations = useStations()
  const live = useLive()
  stations.watchAll()
  live.connect()
  FakeWebSocket.last.accept()
  FakeWebSocket.last.grant('stations', 0)
  await settle()
  return stations
}

describe('stations', () => {
  beforeEach(() => {
    vi.useFakeTimers({ now: Date.parse('2026-11-12T14:32:07.000Z') })
    setActivePinia(createPinia())
    server = new FakeServer()
      .install()
      .on('/api/stations', { body: [station({ id: 2, code: 'FW' }), station()] })
      .on('/api/stations/1', { body: station() })
      .on('/api/stations/1/series?hours=12&stepSeconds=300', {
        body: { stationId: 1, from: '2026-11-12T02:30:00Z', to: '2026-11-12T14:30:00Z', stepSeconds: 300, points: [] },
      })
      .on('/api/stations/1/estimates/latest', {
        status: 404,
        body: { type: 'about:blank', title: 'None yet', status: 404, code: 'estimates.none' },
      })
      .on('/api/stations/1/traces?seconds=90', {
        body: { stationId: 1, startsAt: '2026-11-12T14:32:05Z', interval: 0.5, sensors: ['OL-1'], values: [[1, 2]] },
      })
  })
  afterEach(() => {
    vi.useRealTimers()
    vi.unstubAllGlobals()
  })

  it('stand in the order of the office, as REST gives them', async () => {
    const stations = await watching()
    expect(stations.stations.map(({ code }) => code)).toEqual(['FW', 'OL'])
  })

  it('take a live estimate in the way they take a REST answer', async () => {
    const stations = await watching()
    FakeWebSocket.last.say({
      type: 'event',
      room: 'stations',
      seq: 1,
      kind: 'estimate',
      body: estimate({ windowEndsAt: '2026-11-12T14:31:00.000Z', significantWaveHeight: 2.6 }),
    })
    expect(stations.byId(1)?.estimate?.significantWaveHeight).toBe(2.6)
    expect(stations.byId(2)?.estimate?.significantWaveHeight).toBe(2.4)
  })

  it('ignore an event whose body has an unknown form', async () => {
    const stations = await watching()
    FakeWebSocket.last.say({ type: 'event', room: 'stations', seq: 1, kind: 'estimate', body: { stationId: 1 } })
    expect(stations.byId(1)?.estimate?.windowEndsAt).toBe('2026-11-12T14:30:00.000Z')
  })

  it('drop a station that the office no longer lists', async () => {
    const stations = await watching()
    stations.apply({ kind: 'stations', body: [station()] })
    expect(stations.stations.map(({ code }) => code)).toEqual(['OL'])
  })

  it('open one of them with its newest readings, and let these go when it is closed', async () => {
    const stations = await watching()
    stations.open(1)
    FakeWebSocket.last.grant('station:1', 0)
    FakeWebSocket.last.grant('traces:1', 0)
    await settle()
    FakeWebSocket.last.say({
      type: 'event',
      room: 'traces:1',
      seq: 1,
      kind: 'traces',
      body: { stationId: 1, startsAt: '2026-11-12T14:32:06Z', interval: 0.5, sensors: ['OL-1'], values: [[3]] },
    })
    expect(stations.traces(1)?.values).toEqual([[1, 2, 3]])
    expect(stations.detail(1)).toBeNull()
    stations.close(1)
    expect(stations.traces(1)).toBeNull()
    expect(FakeWebSocket.last.sent.slice(-2)).toEqual([
      { type: 'unsubscribe', rooms: ['station:1'] },
      { type: 'unsubscribe', rooms: ['traces:1'] },
    ])
  })

  it('add the point of a live estimate to the series of an opened station', async () => {
    const stations = await watching()
    stations.open(1)
    FakeWebSocket.last.grant('station:1', 0)
    await settle()
    FakeWebSocket.last.say({ type: 'event', room: 'station:1', seq: 1, kind: 'estimate', body: estimate() })
    expect(stations.series(1)).toMatchObject([{ at: '2026-11-12T14:30:00.000Z', toward: 67, height: 2.1, spread: 14 }])
  })

  it('send no change without the header that other sites cannot send', async () => {
    await watching()
    expect(server.requests.every(({ headers }) => headers.get('X-Offing') === '1')).toBe(true)
  })
})
