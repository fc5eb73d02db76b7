/** Places with all versions of their settings, as outlooks need them: asked by time. Versions never change, so each is checked once. */
import type { Sequelize, Transaction } from 'sequelize'
import { placeSettingsContent } from '../../../shared/schemas/placeSettings.ts'
import type { PlaceSettingsContent } from '../../../shared/schemas/placeSettings.ts'
import { select } from '../../models/sql.ts'

export interface PlaceVersion {
  id: number
  /** ms since 1970 UTC. */
  validFrom: number
  content: PlaceSettingsContent
}

export interface PlaceTimeline {
  id: number
  name: string
  versions: PlaceVersion[]
}

interface VersionRow {
  id: number
  placeId: number
  name: string
  validFrom: Date
  content: unknown
}

/** Of each database of the process. */
const contents = new WeakMap<Sequelize, Map<number, PlaceSettingsContent>>()

/** JSON columns come as text or taken apart, as the driver sees fit. */
export const fromJson = (stored: unknown): unknown => (typeof stored === 'string' ? JSON.parse(stored) : stored)

export function contentOf(sequelize: Sequelize, id: number, stored: unknown): PlaceSettingsContent {
  const known = contents.get(sequelize) ?? new Map<number, PlaceSettingsContent>()
  contents.set(sequelize, known)
  const content = known.get(id) ?? placeSettingsContent.parse(fromJson(stored))
  known.set(id, content)
  return content
}

/** Places in service, by id, each with its versions in the order of their beginning. */
export async function readPlaceTimelines(sequelize: Sequelize, transaction?: Transaction): Promise<PlaceTimeline[]> {
  const rows = await select<VersionRow>(
    sequelize,
    `SELECT s.id, s.placeId, p.name, s.validFrom, s.content FROM places p JOIN placeSettings s ON s.placeId = p.id
     WHERE p.retiredAt IS NULL ORDER BY s.placeId, s.validFrom, s.id`,
    {},
    transaction,
  )
  const places = new Map<number, PlaceTimeline>()
  for (const { id, placeId, name, validFrom, content } of rows) {
    const place = places.get(placeId) ?? { id: placeId, name, versions: [] }
    places.set(placeId, place)
    place.versions.push({ id, validFrom: validFrom.getTime(), content: contentOf(sequelize, id, content) })
  }
  return [...places.values()]
}

/** The version in force at a moment: the one that began last, and of equals the newer one. */
export const versionAt = ({ versions }: PlaceTimeline, at: number): PlaceVersion | null =>
  versions.findLast(({ validFrom }) => validFrom <= at) ?? null
