/** From a place as it stands to the form. Pure. */
import type { PlaceView } from '../../../../shared/schemas/place.ts'
import type { BerthFeed, PlaceFeed } from '../../../../shared/schemas/placeSettings.ts'
import { degreesTyped } from '../../setUp/degrees.ts'
import { spanForm } from '../../limits/limitForm.ts'
import { newFeed, newPlaceForm } from './placeForm.ts'
import type { FeedForm, PlaceForm, SurveyedForm } from './placeForm.ts'

const typed = (value: number): string => String(Math.round(value * 1e6) / 1e6)
const surveyed = ({ value, sd, source }: { value: number; sd: number | null; source: string }): SurveyedForm => ({
  ...{ value: typed(value), sd: sd === null ? '' : typed(sd), source },
})

function feedForm(feed: PlaceFeed | BerthFeed): FeedForm {
  const empty = newFeed(feed.stationId)
  if ('factor' in feed) return { ...empty, factor: surveyed(feed.factor), isInBasin: feed.isInBasin }
  const { transfer, path, validSector } = feed
  return {
    ...empty,
    transferKind: transfer.kind,
    ...(transfer.kind === 'parallelContours' ? { shoreNormal: typed(transfer.shoreNormal) } : {}),
    ...(transfer.kind === 'table'
      ? { table: transfer, tableOrigin: transfer.origin, tableSd: typed(transfer.relativeSd * 100) }
      : {}),
    path: path.map(({ distance, bedLevel }) => `${typed(distance)} ${typed(bedLevel)}`).join('\n'),
    hasSector: validSector !== null,
    ...(validSector ? { sectorFrom: typed(validSector.from), sectorTo: typed(validSector.to) } : {}),
  }
}

export function placeFormOf(place: PlaceView): PlaceForm {
  const { content } = place.settings
  const form: PlaceForm = {
    ...newPlaceForm(content.kind, content.leadQuantity, null),
    ...{ code: place.code, shortName: place.shortName, name: place.name, team: place.team ?? '' },
    ...{ latitude: degreesTyped(place.latitude), longitude: degreesTyped(place.longitude) },
    ...{ position: String(place.position), noticeListIds: [...place.noticeListIds] },
    area: (place.areaPolygon ?? []).map((point) => point.map(typed).join(' ')).join('\n'),
    ...{ tideStationId: content.tideStationId, nominal: surveyed(content.nominalLevel), localFits: content.localFits },
    substituteShare: typed(content.substitute.relativeSd * 100),
    substituteHeading: typed(content.substitute.headingSd),
    feeds: content.stationOrder.map(feedForm),
  }
  switch (content.kind) {
    case 'entrance':
      return {
        ...form,
        ...{ channelAxis: typed(content.channelAxis), width: typed(content.width), bed: surveyed(content.bedLevel) },
        courses: content.courses.map(({ name, bearing }) => ({ name, bearing: typed(bearing) })),
      }
    case 'breakwater':
      return {
        ...form,
        ...{ form: content.form, crest: surveyed(content.crestLevel), roughness: surveyed(content.roughness) },
        ...(content.seawardSlope ? { seawardSlope: surveyed(content.seawardSlope) } : {}),
        ...{ bed: surveyed(content.toeBedLevel), seawardNormal: typed(content.seawardNormal) },
        ...{ hasPublicAccess: content.hasPublicAccess, accessNote: content.accessNote },
      }
    case 'berth':
      return {
        ...form,
        ...{ basinLength: typed(content.basin.length), basinWidth: typed(content.basin.width) },
        ...{ bed: surveyed(content.basin.bedLevel), mouth: content.basin.mouth },
        meanings: content.meanings.map(({ craft, from, words }) => ({ craft, from: typed(from), words })),
      }
    case 'beach':
      return {
        ...form,
        ...{ shoreNormal: typed(content.shoreNormal), foreshore: surveyed(content.foreshoreSlope) },
        ...{ nearshore: surveyed(content.nearshoreSlope), sediment: content.sediment },
        patrol: content.patrol.map(spanForm),
        rip: {
          ...{ height: typed(content.ripReasons.height), incidence: typed(content.ripReasons.incidence) },
          ...{ spread: typed(content.ripReasons.spread), lowWaterHours: typed(content.ripReasons.lowWaterHours) },
        },
      }
  }
}
