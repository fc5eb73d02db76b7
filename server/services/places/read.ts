/** Places as their own tables have them; outlooks, notices and limits belong to others. */
import type { PlaceSettingsVersion, PlaceView } from '../../../shared/schemas/place.ts'
import type { Parts } from '../../config/parts.ts'
import { Person, Place, PlaceSettings, Station } from '../../models/index.ts'
import { notFound } from '../problems.ts'
import { contentOf } from './rows.ts'

export type PlaceFacts = Omit<PlaceView, 'outlook' | 'lastGood' | 'notices' | 'limits'>
type Reading = Pick<Parts, 'clock' | 'sequelize'>

async function presentVersions({ sequelize }: Reading, rows: PlaceSettings[]): Promise<PlaceSettingsVersion[]> {
  const ids = [...new Set(rows.flatMap(({ authorId }) => authorId ?? []))]
  const people = ids.length === 0 ? [] : await Person.findAll({ where: { id: ids }, attributes: ['id', 'name'] })
  return rows.map(({ id, validFrom, content, authorId, reason }) => {
    const author = people.find((person) => person.id === authorId)
    return {
      ...{ id, reason, validFrom: validFrom.toISOString(), content: contentOf(sequelize, id, content) },
      author: author ? { id: author.id, name: author.name } : null,
    }
  })
}

async function factsOf(parts: Reading, places: Place[]): Promise<PlaceFacts[]> {
  if (places.length === 0) return []
  const [rows, stations] = await Promise.all([
    PlaceSettings.findAll({
      where: { placeId: places.map(({ id }) => id) },
      order: [
        ['validFrom', 'DESC'],
        ['id', 'DESC'],
      ],
    }),
    Station.findAll({ attributes: ['id', 'code', 'name'], order: [['id', 'ASC']] }),
  ])
  const now = parts.clock.now()
  // A place whose first version is still to come shows that one.
  const inForce = places.flatMap((place) => {
    const own = rows.filter(({ placeId }) => placeId === place.id)
    return own.find(({ validFrom }) => validFrom <= now) ?? own.at(-1) ?? []
  })
  const versions = await presentVersions(parts, inForce)
  return places.flatMap((place) => {
    const settings = versions[inForce.findIndex(({ placeId }) => placeId === place.id)]
    if (!settings) return []
    const { id, version, kind, code, shortName, name, team, latitude, longitude, areaPolygon, position, noticeListIds } = place // prettier-ignore
    const { stationOrder, tideStationId } = settings.content
    const named = [...stationOrder.map(({ stationId }) => stationId), tideStationId]
    return {
      ...{ id, version, kind, code, shortName, name, team, latitude, longitude, areaPolygon, position, noticeListIds },
      settings,
      stations: stations.filter((station) => named.includes(station.id)).map(({ id: stationId, code: stationCode, name: stationName }) => ({ id: stationId, code: stationCode, name: stationName })), // prettier-ignore
      retiredAt: place.retiredAt?.toISOString() ?? null,
    }
  })
}

/** In service, by their position. */
export async function listPlaces(parts: Reading): Promise<PlaceFacts[]> {
  const order: [string, string][] = [
    ['position', 'ASC'],
    ['id', 'ASC'],
  ]
  return factsOf(parts, await Place.findAll({ where: { retiredAt: null }, order }))
}

/** In service or not; throws the 404. */
export async function readPlace(parts: Reading, placeId: number): Promise<PlaceFacts> {
  const place = await Place.findByPk(placeId)
  const [facts] = place ? await factsOf(parts, [place]) : []
  if (!facts) throw notFound('place', placeId)
  return facts
}

/** Newest first. */
export async function listPlaceSettings(parts: Reading, placeId: number): Promise<PlaceSettingsVersion[]> {
  if (!(await Place.findByPk(placeId))) throw notFound('place', placeId)
  const rows = await PlaceSettings.findAll({
    where: { placeId },
    order: [
      ['validFrom', 'DESC'],
      ['id', 'DESC'],
    ],
  })
  return presentVersions(parts, rows)
}
