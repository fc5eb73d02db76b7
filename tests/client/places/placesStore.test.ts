import { createPinia, setActivePinia } from 'pinia'
import { beforeEach, describe, expect, it } from 'vitest'
import { usePlaces } from '../../../src/stores/places.ts'
import { withPlace } from '../../../src/stores/newerPlace.ts'
import { FakeServer, FakeWebSocket, settle } from '../support/fakeServer.ts'
import { useLive } from '../../../src/stores/live.ts'
import { placeView } from '../support/placeViews.ts'

const later = (place: ReturnType<typeof placeView>, windowEndsAt: string) => ({
  ...place,
  outlook: { ...place.outlook!, windowEndsAt },
})

beforeEach(() => setActivePinia(createPinia()))

describe('places', () => {
  it('an outlook that was overtaken does not replace the newer one', () => {
    const newer = later(placeView('EN'), '2026-11-12T14:31:00.000Z')
    expect(withPlace(newer, placeView('EN')).outlook!.windowEndsAt).toBe('2026-11-12T14:31:00.000Z')
    expect(withPlace(newer, { ...placeView('EN'), version: 2 })).toBe(newer)
  })

  it('are fetched with the room, and a live event passes through the same function', async () => {
    const place = placeView('EN')
    const server = new FakeServer()
      .install()
      .on('/api/places', { body: { places: [placeView('LA'), place] } })
      .on('/api/places/1/series?quantity=crossSea&hours=12&stepSeconds=300', {
        body: {
          ...{ placeId: 1, quantity: 'crossSea', from: '2026-11-12T02:30:00.000Z', to: '2026-11-12T14:30:00.000Z' },
          ...{ stepSeconds: 300, points: [] },
        },
      })
      .on('/api/places/2/series?quantity=overtopping&hours=12&stepSeconds=300', { status: 500 })
    const live = useLive()
    const places = usePlaces()
    live.connect()
    places.watchAll()
    places.keepTrends()
    FakeWebSocket.last.accept()
    FakeWebSocket.last.grant('places')
    await settle()
    expect(places.places.map(({ code }) => code)).toEqual(['EN', 'LA'])
    expect(server.requests.map(({ path }) => path)).toContain('/api/places')
    places.apply({ kind: 'series', placeId: 1, quantity: 'crossSea', body: [] })
    places.apply({ kind: 'place', body: later(place, '2026-11-12T14:31:00.000Z') })
    expect(places.series(1, 'crossSea').map(({ at }) => at)).toEqual(['2026-11-12T14:31:00.000Z'])
  })
})
