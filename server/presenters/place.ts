/** A place as everyone sees it, put together from its tables, its outlooks, notices and limits: for REST and live alike. */
import { thresholdsOf } from '../../shared/alerts/describe.ts'
import { placeQuantityKey } from '../../shared/schemas/placeQuantity.ts'
import type { PlaceLimit, PlaceView } from '../../shared/schemas/place.ts'
import type { OutlookView } from '../../shared/schemas/placeOutlook.ts'
import type { LimitView } from '../../shared/schemas/limit.ts'
import type { NoticeView } from '../../shared/schemas/placeNotice.ts'
import type { Parts } from '../config/parts.ts'
import { acknowledgementsOf } from '../services/alerts.ts'
import { limitsOfPlaces } from '../services/limits.ts'
import { openNotices } from '../services/notices.ts'
import type { NoticeOffice } from '../services/notices.ts'
import { lastGoodOf, listPlaces, newestOutlook, outlookOfWindow, readPlace } from '../services/places.ts'
import type { Around, PlaceFacts } from '../services/places.ts'
import { settingInForce } from '../services/settings.ts'
import { listStations } from '../services/stations.ts'
import { officeOf } from './office.ts'

const minuteMs = 60_000

export async function noticeOfficeOf(parts: Pick<Parts, 'clock' | 'environment'>): Promise<NoticeOffice> {
  const [{ portName, timeZone, isDemonstration, caution }, { warnMinutes }] = await Promise.all([
    officeOf(parts),
    settingInForce(parts, 'notices'),
  ])
  return { portName, timeZone, isDemonstration, caution, warnMs: warnMinutes * minuteMs }
}

type NamesOfStations = { id: number; name: string; staleAfterSeconds: number }[]

async function aroundOf(parts: Parts, facts: PlaceFacts, stations: NamesOfStations): Promise<Around> {
  const first = facts.settings.content.stationOrder[0].stationId
  return {
    cautions: await settingInForce(parts, 'placeCautions'),
    nameOf: (id) => facts.stations.find((station) => station.id === id)?.name ?? `Station ${id}`,
    staleAfterSeconds: stations.find(({ id }) => id === first)?.staleAfterSeconds ?? 900,
  }
}

function presentLimit(
  view: LimitView,
  raised: Map<number, { raisedAt: string; acknowledgedAt: string | null }>,
): PlaceLimit[] {
  const { condition, priority } = view.current.content
  const quantity = placeQuantityKey.safeParse(condition.comparisons[0].quantity)
  if (!quantity.success) return []
  const alert = view.openAlertId === null ? undefined : raised.get(view.openAlertId)
  return [
    {
      ...{ limitId: view.id, quantity: quantity.data, title: view.title, words: view.words, priority },
      ...thresholdsOf(condition),
      ...{ onDelaySeconds: condition.onDelaySeconds, offDelaySeconds: condition.offDelaySeconds },
      ...{ state: view.state, isActive: view.isActive, notJudged: view.notJudged, openAlertId: view.openAlertId },
      ...{ raisedAt: alert?.raisedAt ?? null, acknowledgedAt: alert?.acknowledgedAt ?? null },
      shelvedUntil: view.shelf?.endsAt ?? null,
    },
  ]
}

interface Beside {
  stations: NamesOfStations
  notices: NoticeView[]
  limits: LimitView[]
  raised: Map<number, { raisedAt: string; acknowledgedAt: string | null }>
}

async function presentOne(parts: Parts, facts: PlaceFacts, beside: Beside): Promise<PlaceView> {
  const outlook = await newestOutlook(parts, facts.id, await aroundOf(parts, facts, beside.stations))
  const lastGood = await lastGoodOf(parts, facts.id, facts.settings.content.leadQuantity)
  return {
    ...facts,
    outlook,
    lastGood,
    notices: beside.notices.filter(({ placeId }) => placeId === facts.id),
    limits: beside.limits
      .filter(({ subject }) => subject.id === facts.id)
      .flatMap((limit) => presentLimit(limit, beside.raised)),
  }
}

async function besideOf(parts: Parts, placeIds: number[]): Promise<Beside> {
  const { warnMs } = await noticeOfficeOf(parts)
  const [stations, notices, limits] = await Promise.all([
    listStations(parts),
    openNotices(parts, placeIds, warnMs),
    limitsOfPlaces(parts, placeIds),
  ])
  return {
    stations,
    notices,
    limits,
    raised: await acknowledgementsOf(limits.flatMap(({ openAlertId }) => openAlertId ?? [])),
  }
}

/** In service, by their position. */
export async function presentPlaces(parts: Parts): Promise<PlaceView[]> {
  const places = await listPlaces(parts)
  const beside = await besideOf(
    parts,
    places.map(({ id }) => id),
  )
  return Promise.all(places.map((facts) => presentOne(parts, facts, beside)))
}

/** Throws the 404. */
export async function presentPlace(parts: Parts, placeId: number): Promise<PlaceView> {
  const facts = await readPlace(parts, placeId)
  return presentOne(parts, facts, await besideOf(parts, [placeId]))
}

/** Of one window, with everything behind it; null where there is none. */
export async function presentOutlook(
  parts: Parts,
  placeId: number,
  window: { windowEndsAt: Date; revision: number | null },
): Promise<OutlookView | null> {
  const facts = await readPlace(parts, placeId)
  return outlookOfWindow(parts, placeId, window, await aroundOf(parts, facts, await listStations(parts)))
}
