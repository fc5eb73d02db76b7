/** Places and all that is live of them. REST answers and live events pass through one function, `apply`. */
import { defineStore } from 'pinia'
import { computed, ref, shallowReactive, shallowRef } from 'vue'
import { placeView } from '../../shared/schemas/place.ts'
import type { PlaceChange, PlaceDraft, PlaceSettingsChange, PlaceView } from '../../shared/schemas/place.ts'
import type { PlaceCautions } from '../../shared/schemas/placeCautions.ts'
import type { FlagSet, NoticeDraft, NoticeExtension, NoticeView } from '../../shared/schemas/placeNotice.ts'
import type { PlaceSeriesPoint } from '../../shared/schemas/placeOutlook.ts'
import { quantitiesOfKind } from '../../shared/schemas/placeQuantity.ts'
import type { PlaceQuantityKey } from '../../shared/schemas/placeQuantity.ts'
import * as api from '../api/places.ts'
import { useLive } from './live.ts'
import type { LiveEvent } from './live.ts'
import { placePointOf, withPlace, withPlacePoints } from './newerPlace.ts'

export type PlaceNews =
  | { kind: 'places'; body: PlaceView[] }
  | { kind: 'place'; body: PlaceView }
  | { kind: 'series'; placeId: number; quantity: PlaceQuantityKey; body: PlaceSeriesPoint[] }
  | { kind: 'notices'; placeId: number; body: NoticeView[] }

const seriesKey = (placeId: number, quantity: PlaceQuantityKey): string => `${placeId} ${quantity}`

export const usePlaces = defineStore('places', () => {
  const live = useLive()
  const held = shallowReactive(new Map<number, PlaceView>())
  const seriesHeld = shallowReactive(new Map<string, PlaceSeriesPoint[]>())
  const noticesHeld = shallowReactive(new Map<number, NoticeView[]>())
  const flagSet = shallowRef<FlagSet | null>(null)
  const cautions = shallowRef<PlaceCautions | null>(null)
  const loaded = ref(false)

  /** In service, in the order of the office, which never changes by value. */
  const places = computed(() =>
    [...held.values()]
      .filter((place) => place.retiredAt === null)
      .sort((a, b) => a.position - b.position || a.id - b.id),
  )
  const byId = (id: number): PlaceView | undefined => held.get(id)
  /** Rising in time, the last 12 h; a missing window has no point. */
  const series = (id: number, quantity: PlaceQuantityKey): PlaceSeriesPoint[] =>
    seriesHeld.get(seriesKey(id, quantity)) ?? []
  /** Of a place that was opened, newest first, with those that are over. */
  const notices = (id: number): NoticeView[] => noticesHeld.get(id) ?? held.get(id)?.notices ?? []

  function apply(news: PlaceNews): void {
    switch (news.kind) {
      case 'places': {
        const listed = new Set(news.body.map(({ id }) => id))
        for (const id of held.keys()) if (!listed.has(id)) held.delete(id)
        for (const body of news.body) apply({ kind: 'place', body })
        loaded.value = true
        return
      }
      case 'place': {
        const { body } = news
        held.set(body.id, withPlace(held.get(body.id), body))
        if (!body.outlook) return
        for (const quantity of quantitiesOfKind[body.kind]) {
          if (!seriesHeld.has(seriesKey(body.id, quantity))) continue
          const point = placePointOf(body.outlook, quantity)
          if (point) apply({ kind: 'series', placeId: body.id, quantity, body: [point] })
        }
        return
      }
      case 'series':
        seriesHeld.set(
          seriesKey(news.placeId, news.quantity),
          withPlacePoints(series(news.placeId, news.quantity), news.body),
        )
        return
      case 'notices':
        noticesHeld.set(news.placeId, news.body)
    }
  }

  function hear(event: LiveEvent): void {
    if (event.kind !== 'place') return
    const parsed = placeView.safeParse(event.body)
    if (!parsed.success) return
    apply({ kind: 'place', body: parsed.data })
    if (opened.has(parsed.data.id)) void fetchNotices(parsed.data.id).catch(() => undefined)
  }

  async function fetchSeries(id: number, quantity: PlaceQuantityKey): Promise<void> {
    const { points } = await api.readPlaceSeries(id, quantity)
    apply({ kind: 'series', placeId: id, quantity, body: points })
  }
  async function fetchNotices(id: number): Promise<void> {
    apply({ kind: 'notices', placeId: id, body: await api.readNotices(id) })
  }
  /** Of every place the quantity that leads, for the row on Watch. */
  const fetchTrends = async (): Promise<void> =>
    void (await Promise.all(
      [...held.values()].map((place) => fetchSeries(place.id, place.settings.content.leadQuantity)),
    ))

  let trendsShown = 0
  let leaveAll: (() => void) | null = null
  /** For as long as somebody is signed in: every place with its newest outlook. */
  function watchAll(): void {
    leaveAll ??= live.join('places', {
      async hydrate() {
        apply({ kind: 'places', body: await api.readPlaces() })
        if (trendsShown > 0) await fetchTrends()
      },
      apply: hear,
    })
  }
  function leave(): void {
    leaveAll?.()
    leaveAll = null
  }
  /** Keeps the trends of all places while a page draws them; the answer ends that. */
  function keepTrends(): () => void {
    trendsShown += 1
    if (loaded.value) void fetchTrends().catch(() => undefined)
    return () => (trendsShown -= 1)
  }

  const opened = new Map<number, () => void>()
  /** Everything of one place: its trends and all its notices. The answer ends it. */
  function open(id: number): () => void {
    opened.get(id)?.()
    const leaveRoom = live.join(`place:${id}`, {
      async hydrate() {
        const view = await api.readPlace(id)
        apply({ kind: 'place', body: view })
        const quantities = quantitiesOfKind[view.kind]
        await Promise.all([fetchNotices(id), ...quantities.map((quantity) => fetchSeries(id, quantity))])
      },
      apply: hear,
    })
    const close = (): void => {
      leaveRoom()
      if (opened.get(id) === close) opened.delete(id)
    }
    opened.set(id, close)
    return close
  }

  /** What follows from an act comes over the wire too; who acted sees it at once. */
  async function afterNotice(notice: NoticeView): Promise<void> {
    const { placeId } = notice
    await Promise.all([
      fetchNotices(placeId),
      api.readPlace(placeId).then((body) => apply({ kind: 'place', body })),
    ]).catch(() => undefined)
  }
  const setNotice = async (placeId: number, draft: NoticeDraft): Promise<void> =>
    afterNotice(await api.setNotice(placeId, draft))
  const extendNotice = async ({ id, version }: NoticeView, extension: NoticeExtension): Promise<void> =>
    afterNotice(await api.extendNotice(id, version, extension))
  const withdrawNotice = async ({ id, version }: NoticeView, reason: string): Promise<void> =>
    afterNotice(await api.withdrawNotice(id, version, reason))
  async function readFlagSet(): Promise<void> {
    flagSet.value ??= await api.readFlagSet()
  }
  async function readCautions(): Promise<void> {
    cautions.value ??= await api.readPlaceCautions()
  }

  async function taken(answer: Promise<PlaceView>): Promise<PlaceView> {
    const body = await answer
    apply({ kind: 'place', body })
    return body
  }
  /** What an administrator does; each answer is the place as it stands then. */
  const setUp = {
    create: (draft: PlaceDraft) => taken(api.createPlace(draft)),
    change: ({ id, version }: PlaceView, change: PlaceChange) => taken(api.changePlace(id, version, change)),
    order: ({ id, version }: PlaceView, change: PlaceSettingsChange) =>
      taken(api.changePlaceSettings(id, version, change)),
    retire: ({ id, version }: PlaceView, reason: string) => taken(api.retirePlace(id, version, reason)),
    restore: ({ id, version }: PlaceView, reason: string) => taken(api.restorePlace(id, version, reason)),
    open: (id: number) => taken(api.readPlace(id)),
  }

  return {
    ...{ setUp, readSettings: api.readPlaceSettings },
    ...{
      places,
      loaded,
      byId,
      series,
      notices,
      flagSet,
      cautions,
      apply,
      watchAll,
      leave,
      keepTrends,
      fetchTrends,
      open,
    },
    ...{ setNotice, extendNotice, withdrawNotice, readFlagSet, readCautions },
  }
})
