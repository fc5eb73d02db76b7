/**
 * The demonstration's places on the invented coast. Every number is invented and says so; levels are above mean level, the stations' datum.
 * Stations are named by code: the seeder knows their numbers.
 */
import { opposite } from '../directions.ts'
import type { PlaceDraft } from '../schemas/place.ts'
import type { BerthFeed, PlaceFeed, PlaceSettingsContent } from '../schemas/placeSettings.ts'
import { position } from './coast.ts'
import type { Metres } from './coast.ts'

const invented = 'invented for the demonstration'
const surveyed = (value: number, sd: number | null, source = invented) => ({ value, sd, source })
const usual = { nominalLevel: surveyed(0, 0.8, 'mean level, invented for the demonstration'), localFits: [] }
const substitute = { relativeSd: 0.15, headingSd: 8 }

/** Distance along and level of the bed, m. */
const path = (...points: [distance: number, bedLevel: number][]): PlaceFeed['path'] =>
  points.map(([distance, bedLevel]) => ({ distance, bedLevel }))

type StationIds = (code: string) => number

const asMeasured = (stationId: number, along: PlaceFeed['path'], validSector: PlaceFeed['validSector']): PlaceFeed => ({
  ...{ stationId, transfer: { kind: 'asMeasured' }, path: along, validSector },
})
const overContours = (stationId: number, shoreNormal: number, along: PlaceFeed['path']): PlaceFeed => ({
  ...{ stationId, transfer: { kind: 'parallelContours', shoreNormal }, path: along, validSector: null },
})
const throughMouth = (stationId: number, value: number): BerthFeed => ({
  ...{ stationId, factor: surveyed(value, 0.15 * value), isInBasin: false },
})

interface DemonstrationPlace extends Omit<
  PlaceDraft,
  'settings' | 'reason' | 'latitude' | 'longitude' | 'areaPolygon' | 'position' | 'noticeListIds'
> {
  at: Metres
  /** Names of lists. */
  noticeLists: string[]
  settings(idOf: StationIds): PlaceSettingsContent
}

const channelAxis = 38
const open = { from: 200, to: 285 }
const allWeek = [1, 2, 3, 4, 5, 6, 7]
const patrol = [{ hours: { from: '09:00', to: '17:00', days: allWeek }, season: null }]
const ripReasons = { height: 0.7, incidence: 20, spread: 20, lowWaterHours: 2 }

export const demonstrationPlaces: DemonstrationPlace[] = [
  {
    ...{ code: 'EN', shortName: 'Entrance', name: 'Marrowick Entrance', team: 'harbour', at: [1180, 1820] },
    noticeLists: ['Harbour duty'],
    settings: (idOf) => ({
      ...{ kind: 'entrance', substitute, ...usual, leadQuantity: 'crossSea', tideStationId: idOf('FW') },
      stationOrder: [
        asMeasured(idOf('FW'), path([0, -11.6], [450, -10.4], [900, -9]), { from: 218, to: 270 }),
        asMeasured(idOf('OL'), path([0, -14.2], [700, -12.6], [1300, -10.8], [1850, -9]), { from: 218, to: 270 }),
      ],
      ...{ channelAxis, width: 96, bedLevel: surveyed(-9, 0.2) },
      courses: [
        { name: 'Inbound', bearing: channelAxis },
        { name: 'Outbound', bearing: opposite(channelAxis) },
      ],
    }),
  },
  {
    ...{ code: 'LA', shortName: 'Long Arm', name: 'Long Arm walk', team: 'harbour', at: [1610, 1620] },
    noticeLists: ['Harbour duty', 'Breakwater'],
    settings: (idOf) => ({
      ...{ kind: 'breakwater', substitute, ...usual, leadQuantity: 'overtopping', tideStationId: idOf('FW') },
      stationOrder: [asMeasured(idOf('FW'), [], open), asMeasured(idOf('OL'), [], open)],
      ...{ form: 'rubbleSlope', crestLevel: surveyed(3.4, 0.05), seawardSlope: surveyed(1 / 1.5, 0.03) },
      ...{ roughness: surveyed(0.45, 0.03), toeBedLevel: surveyed(-7.2, 0.3), seawardNormal: 221 },
      ...{ hasPublicAccess: true, accessNote: 'Public walk on the crest; the warden closes the gate at its root.' },
    }),
  },
  {
    ...{ code: 'B36', shortName: 'Berths 3–6', name: 'Berths 3–6', team: 'harbour', at: [1540, 2070] },
    noticeLists: ['Harbour duty'],
    settings: (idOf) => ({
      ...{ kind: 'berth', substitute, ...usual, leadQuantity: 'longSwell', tideStationId: idOf('FW') },
      stationOrder: [throughMouth(idOf('FW'), 1), throughMouth(idOf('OL'), 0.85)],
      basin: { length: 300, width: 140, bedLevel: surveyed(-6, 0.2), mouth: 'between' },
      meanings: [
        { craft: 'Moored ship above 60 m', from: 0.08, words: 'surge likely, tend lines' },
        { craft: 'Fishing craft to 30 m', from: 0.06, words: 'movement at the fenders' },
      ],
    }),
  },
  {
    ...{ code: 'PS', shortName: 'Pennow Sands', name: 'Pennow Sands', team: 'beach safety', at: [2525, 1205] },
    noticeLists: ['Beach patrol', 'Harbour duty'],
    settings: (idOf) => ({
      ...{ kind: 'beach', substitute, ...usual, leadQuantity: 'breakerHeight', tideStationId: idOf('FW') },
      stationOrder: [
        overContours(idOf('PB'), 218, path([0, -7.4], [500, -5], [950, -2.5])),
        overContours(idOf('FW'), 218, path([0, -11.6], [700, -8], [1400, -5], [1850, -2.5])),
      ],
      ...{ shoreNormal: 218, foreshoreSlope: surveyed(0.05, 0.01), nearshoreSlope: surveyed(0.05, 0.01) },
      ...{ sediment: 'sand', patrol, ripReasons },
    }),
  },
  {
    ...{ code: 'OB', shortName: 'Oldcask Bay', name: 'Oldcask Bay', team: 'beach safety', at: [185, 2570] },
    noticeLists: ['Beach patrol'],
    settings: (idOf) => ({
      ...{ kind: 'beach', substitute, ...usual, leadQuantity: 'breakerHeight', tideStationId: idOf('FW') },
      stationOrder: [overContours(idOf('OL'), 200, []), overContours(idOf('FW'), 200, [])],
      ...{ shoreNormal: 200, foreshoreSlope: surveyed(0.04, 0.01), nearshoreSlope: surveyed(0.015, 0.004) },
      ...{ sediment: 'sand', patrol, ripReasons },
    }),
  },
]

/** As the seeder adds them, in their order. */
export const placeDraftsOf = (idOf: StationIds, listIdOf: (name: string) => number | null): PlaceDraft[] =>
  demonstrationPlaces.map(({ at, noticeLists, settings, ...described }, n) => {
    const [longitude, latitude] = position(at)
    return {
      ...{ ...described, latitude, longitude, areaPolygon: null, position: n + 1, reason: 'Demonstration' },
      noticeListIds: noticeLists.flatMap((name) => listIdOf(name) ?? []),
      settings: settings(idOf),
    }
  })
