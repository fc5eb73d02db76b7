/** A place's settings as they are typed, by kind. Numbers are text until they are saved; slopes as the tangent. Pure. */
import type { Team } from '../../../../shared/schemas/session.ts'
import type { PlaceKind, PlaceQuantityKey } from '../../../../shared/schemas/placeQuantity.ts'
import type {
  BerthSettings,
  BreakwaterSettings,
  PlaceSettingsContent,
  Transfer,
} from '../../../../shared/schemas/placeSettings.ts'
import type { SpanForm } from '../../limits/limitForm.ts'

/** A value with its ± (empty: not known) and where it comes from. */
export interface SurveyedForm {
  value: string
  sd: string
  source: string
}

export interface FeedForm {
  stationId: number
  transferKind: Transfer['kind']
  shoreNormal: string
  /** Read from a file; null: none yet. */
  table: Extract<Transfer, { kind: 'table' }> | null
  tableOrigin: string
  tableSd: string
  /** Lines of `distance bed level`. */
  path: string
  hasSector: boolean
  sectorFrom: string
  sectorTo: string
  /** Berths: long waves here over long waves at the station. */
  factor: SurveyedForm
  isInBasin: boolean
}

export interface PlaceForm {
  kind: PlaceKind
  code: string
  shortName: string
  name: string
  team: Team | ''
  latitude: string
  longitude: string
  position: string
  noticeListIds: number[]
  /** Lines of `longitude latitude`. */
  area: string
  leadQuantity: PlaceQuantityKey
  tideStationId: number | null
  nominal: SurveyedForm
  substituteShare: string
  substituteHeading: string
  feeds: FeedForm[]
  /** Adopted fits stay as they are: they are changed beside their evidence. */
  localFits: PlaceSettingsContent['localFits']
  /** Entrance and breakwater toe, basin. */
  bed: SurveyedForm
  channelAxis: string
  width: string
  courses: { name: string; bearing: string }[]
  form: BreakwaterSettings['form']
  crest: SurveyedForm
  seawardSlope: SurveyedForm
  roughness: SurveyedForm
  seawardNormal: string
  hasPublicAccess: boolean
  accessNote: string
  basinLength: string
  basinWidth: string
  mouth: BerthSettings['basin']['mouth']
  meanings: { craft: string; from: string; words: string }[]
  shoreNormal: string
  foreshore: SurveyedForm
  nearshore: SurveyedForm
  sediment: 'sand' | 'gravel'
  patrol: SpanForm[]
  rip: { height: string; incidence: string; spread: string; lowWaterHours: string }
}

export const surveyedForm = (value = '', sd = '', source = ''): SurveyedForm => ({ value, sd, source })

export const newFeed = (stationId: number): FeedForm => ({
  ...{ stationId, transferKind: 'asMeasured', shoreNormal: '', table: null, tableOrigin: '', tableSd: '15' },
  ...{ path: '', hasSector: false, sectorFrom: '', sectorTo: '', factor: surveyedForm('1', '', ''), isInBasin: false },
})

export function newPlaceForm(kind: PlaceKind, lead: PlaceQuantityKey, stationId: number | null): PlaceForm {
  return {
    ...{ kind, code: '', shortName: '', name: '', team: '', latitude: '', longitude: '', position: '1' },
    ...{ noticeListIds: [], area: '', leadQuantity: lead, tideStationId: stationId, nominal: surveyedForm('0') },
    ...{ substituteShare: '15', substituteHeading: '8', feeds: stationId === null ? [] : [newFeed(stationId)] },
    ...{ localFits: [], bed: surveyedForm(), channelAxis: '', width: '', form: 'rubbleSlope', crest: surveyedForm() },
    courses: [
      { name: 'Inbound', bearing: '' },
      { name: 'Outbound', bearing: '' },
    ],
    ...{ seawardSlope: surveyedForm(), roughness: surveyedForm(), seawardNormal: '', hasPublicAccess: false },
    ...{ accessNote: '', basinLength: '', basinWidth: '', mouth: 'closed', meanings: [], shoreNormal: '' },
    ...{ foreshore: surveyedForm(), nearshore: surveyedForm(), sediment: 'sand', patrol: [] },
    rip: { height: '0.7', incidence: '20', spread: '20', lowWaterHours: '2' },
  }
}
