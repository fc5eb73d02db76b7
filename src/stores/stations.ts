/** Stations and all that is live of them. REST answers and live events pass through one function, `apply`. */
import { defineStore } from 'pinia'
import { computed, reactive, ref, shallowReactive } from 'vue'
import { currentEstimate, seriesPoint, stationView, tracesChunk } from '../../shared/schemas/station.ts'
import type {
  CurrentEstimate,
  EstimateView,
  SeriesPoint,
  StationView,
  TracesChunk,
} from '../../shared/schemas/station.ts'
import * as api from '../api/stations.ts'
import { useLive } from './live.ts'
import type { LiveEvent } from './live.ts'
import { isNewer, pointOf, withEstimate, withNews, withPoints } from './newer.ts'
import { appendTraces } from './traceBuffer.ts'
import type { TraceBuffer } from './traceBuffer.ts'

export type StationNews =
  | { kind: 'stations'; body: StationView[] }
  | { kind: 'station'; body: StationView }
  | { kind: 'estimate'; body: CurrentEstimate }
  | { kind: 'detail'; body: EstimateView }
  | { kind: 'series'; stationId: number; body: SeriesPoint[] }
  | { kind: 'traces'; body: TracesChunk }

export const useStations = defineStore('stations', () => {
  const live = useLive()
  const order = ref<number[]>([])
  const loaded = ref(false)
  const held = shallowReactive(new Map<number, StationView>())
  const seriesHeld = shallowReactive(new Map<number, SeriesPoint[]>())
  const tracesHeld = shallowReactive(new Map<number, TraceBuffer>())
  const detailsHeld = shallowReactive(new Map<number, EstimateView>())
  const opened = reactive(new Map<number, number>())

  /** In the order of the office, which never changes by value. */
  const stations = computed(() => order.value.flatMap((id) => held.get(id) ?? []))
  const byId = (id: number): StationView | undefined => held.get(id)
  /** Rising in time, the last 12 h; a missing window has no point. */
  const series = (id: number): SeriesPoint[] => seriesHeld.get(id) ?? []
  const traces = (id: number): TraceBuffer | null => tracesHeld.get(id) ?? null
  /** Everything about the newest estimate of an opened station; null before it came. */
  const detail = (id: number): EstimateView | null => detailsHeld.get(id) ?? null

  function apply(news: StationNews): void {
    switch (news.kind) {
      case 'stations':
        for (const view of news.body) held.set(view.id, withNews(held.get(view.id), view))
        order.value = news.body.map((view) => view.id)
        loaded.value = true
        return
      case 'station':
        held.set(news.body.id, withNews(held.get(news.body.id), news.body))
        if (!order.value.includes(news.body.id)) order.value = [...order.value, news.body.id]
        return
      case 'estimate': {
        const { body } = news
        const station = held.get(body.stationId)
        if (station) held.set(station.id, withEstimate(station, body))
        if (seriesHeld.has(body.stationId)) apply({ kind: 'series', stationId: body.stationId, body: [pointOf(body)] })
        const shown = detailsHeld.get(body.stationId)
        if (opened.has(body.stationId) && isNewer(body, shown ?? null)) void fetchDetail(body.stationId)
        return
      }
      case 'detail': {
        const { body } = news
        if (isNewer(body, detailsHeld.get(body.stationId) ?? null)) detailsHeld.set(body.stationId, body)
        const station = held.get(body.stationId)
        if (station) held.set(station.id, withEstimate(station, body))
        return
      }
      case 'series':
        seriesHeld.set(news.stationId, withPoints(series(news.stationId), news.body))
        return
      case 'traces':
        tracesHeld.set(news.body.stationId, appendTraces(traces(news.body.stationId), news.body))
    }
  }

  function hear(event: LiveEvent): void {
    const news = asNews(event)
    if (news) apply(news)
  }

  async function fetchDetail(id: number): Promise<void> {
    const body = await api.readLatestEstimate(id)
    if (body) apply({ kind: 'detail', body })
  }

  async function fetchSeries(id: number): Promise<void> {
    const answer = await api.readSeries(id)
    apply({ kind: 'series', stationId: id, body: answer.points })
  }

  /** The ribbons of all stations; the layout's room carries their newest points from then on. */
  const fetchAllSeries = async (): Promise<void> => void (await Promise.all(order.value.map(fetchSeries)))

  async function fetchStations(): Promise<void> {
    apply({ kind: 'stations', body: await api.readStations() })
  }

  let ribbonsShown = 0
  let leaveAll: (() => void) | null = null

  /** For as long as somebody is signed in: every station with its newest estimate. */
  function watchAll(): void {
    leaveAll ??= live.join('stations', {
      async hydrate() {
        await fetchStations()
        if (ribbonsShown > 0) await fetchAllSeries()
      },
      apply: hear,
    })
  }

  function leave(): void {
    leaveAll?.()
    leaveAll = null
  }

  /** Keeps the 12 h series of all stations while a page draws their ribbons; the answer ends that. */
  function keepRibbons(): () => void {
    ribbonsShown += 1
    if (loaded.value) void fetchAllSeries().catch(() => undefined)
    return () => (ribbonsShown -= 1)
  }

  const leavers = new Map<number, (() => void)[]>()

  /** Subscribes to everything of one station: estimate with detail, series, newest readings. */
  function open(id: number): void {
    opened.set(id, (opened.get(id) ?? 0) + 1)
    if (leavers.has(id)) return
    leavers.set(id, [
      live.join(`station:${id}`, {
        async hydrate() {
          const [view] = await Promise.all([api.readStation(id), fetchSeries(id), fetchDetail(id)])
          apply({ kind: 'station', body: view })
        },
        apply: hear,
      }),
      live.join(`traces:${id}`, {
        async hydrate() {
          apply({ kind: 'traces', body: await api.readTraces(id) })
        },
        apply: hear,
      }),
    ])
  }

  function close(id: number): void {
    const users = (opened.get(id) ?? 1) - 1
    if (users > 0) return void opened.set(id, users)
    opened.delete(id)
    for (const leaveRoom of leavers.get(id) ?? []) leaveRoom()
    leavers.delete(id)
    tracesHeld.delete(id)
  }

  return {
    stations,
    loaded,
    byId,
    series,
    traces,
    detail,
    apply,
    watchAll,
    leave,
    keepRibbons,
    fetchAllSeries,
    open,
    close,
  }
})

/** What a live event says of stations; null for anything else, or for a body of unknown form. */
function asNews(event: LiveEvent): StationNews | null {
  if (event.kind === 'station') {
    const parsed = stationView.safeParse(event.body)
    return parsed.success ? { kind: 'station', body: parsed.data } : null
  }
  if (event.kind === 'estimate') {
    const parsed = currentEstimate.safeParse(event.body)
    return parsed.success ? { kind: 'estimate', body: parsed.data } : null
  }
  if (event.kind === 'traces') {
    const parsed = tracesChunk.safeParse(event.body)
    return parsed.success ? { kind: 'traces', body: parsed.data } : null
  }
  if (event.kind === 'seriesPoint') {
    const parsed = seriesPoint.safeParse(event.body)
    const stationId = Number(event.room.split(':')[1])
    return parsed.success && stationId > 0 ? { kind: 'series', stationId, body: [parsed.data] } : null
  }
  return null
}
