import { z } from 'zod'
import { placeSettingsVersion, placeView } from '../../shared/schemas/place.ts'
import type {
  PlaceChange,
  PlaceDraft,
  PlaceSettingsChange,
  PlaceSettingsVersion,
  PlaceView,
} from '../../shared/schemas/place.ts'
import { placeCautions } from '../../shared/schemas/placeCautions.ts'
import type { PlaceCautions } from '../../shared/schemas/placeCautions.ts'
import { flagSet, noticeView } from '../../shared/schemas/placeNotice.ts'
import type { FlagSet, NoticeDraft, NoticeExtension, NoticeView } from '../../shared/schemas/placeNotice.ts'
import { localFitView } from '../../shared/schemas/placeLocalFit.ts'
import type { LocalFitAdoption, LocalFitView } from '../../shared/schemas/placeLocalFit.ts'
import { observationList, observationView } from '../../shared/schemas/placeObservation.ts'
import type { ObservationDraft, ObservationView } from '../../shared/schemas/placeObservation.ts'
import { placeSeriesView } from '../../shared/schemas/placeOutlook.ts'
import type { PlaceSeriesView } from '../../shared/schemas/placeOutlook.ts'
import type { PlaceQuantityKey } from '../../shared/schemas/placeQuantity.ts'
import { request } from './request.ts'

const at = (id: number): string => `/api/places/${id}`

export const readPlaces = async (): Promise<PlaceView[]> =>
  (await request('GET', '/api/places', z.object({ places: z.array(placeView) }))).places

export const readPlace = (id: number): Promise<PlaceView> => request('GET', at(id), placeView)

export const readPlaceSeries = (
  id: number,
  quantity: PlaceQuantityKey,
  hours = 12,
  stepSeconds = 300,
): Promise<PlaceSeriesView> =>
  request('GET', `${at(id)}/series?quantity=${quantity}&hours=${hours}&stepSeconds=${stepSeconds}`, placeSeriesView)

export const readPlaceSettings = async (id: number): Promise<PlaceSettingsVersion[]> =>
  (await request('GET', `${at(id)}/settings`, z.object({ versions: z.array(placeSettingsVersion) }))).versions

export const createPlace = (draft: PlaceDraft): Promise<PlaceView> => request('POST', '/api/places', placeView, draft)

export const changePlace = (id: number, version: number, change: PlaceChange): Promise<PlaceView> =>
  request('PUT', at(id), placeView, change, version)

export const changePlaceSettings = (id: number, version: number, change: PlaceSettingsChange): Promise<PlaceView> =>
  request('POST', `${at(id)}/settings`, placeView, change, version)

export const retirePlace = (id: number, version: number, reason: string): Promise<PlaceView> =>
  request('DELETE', at(id), placeView, { reason }, version)

export const restorePlace = (id: number, version: number, reason: string): Promise<PlaceView> =>
  request('POST', `${at(id)}/restore`, placeView, { reason }, version)

/** Newest first, with those that are over. */
export const readNotices = async (id: number, days = 30): Promise<NoticeView[]> =>
  (await request('GET', `${at(id)}/notices?days=${days}`, z.object({ notices: z.array(noticeView) }))).notices

export const setNotice = (id: number, draft: NoticeDraft): Promise<NoticeView> =>
  request('POST', `${at(id)}/notices`, noticeView, draft)

export const extendNotice = (id: number, version: number, extension: NoticeExtension): Promise<NoticeView> =>
  request('PUT', `/api/notices/${id}`, noticeView, extension, version)

export const withdrawNotice = (id: number, version: number, reason: string): Promise<NoticeView> =>
  request('POST', `/api/notices/${id}/withdraw`, noticeView, { reason }, version)

export const readFlagSet = (): Promise<FlagSet> => request('GET', '/api/beachFlags', flagSet)

export const readPlaceCautions = (): Promise<PlaceCautions> => request('GET', '/api/placeCautions', placeCautions)

export const readObservations = (id: number, before: number | null): Promise<z.infer<typeof observationList>> =>
  request('GET', `${at(id)}/observations${before === null ? '' : `?before=${before}`}`, observationList)

export const logObservation = (id: number, draft: ObservationDraft): Promise<ObservationView> =>
  request('POST', `${at(id)}/observations`, observationView, draft)

export const withdrawObservation = (id: number, reason: string): Promise<ObservationView> =>
  request('POST', `/api/observations/${id}/withdraw`, observationView, { reason })

/** One for each kind of observation of the place's form. */
export const readLocalFits = async (id: number): Promise<LocalFitView[]> =>
  (await request('GET', `${at(id)}/localFits`, z.object({ fits: z.array(localFitView) }))).fits

/** A new version of the settings; who sees nothing newer is refused. */
export const adoptLocalFit = (id: number, version: number, adoption: LocalFitAdoption): Promise<PlaceView> =>
  request('POST', `${at(id)}/localFits`, placeView, adoption, version)
