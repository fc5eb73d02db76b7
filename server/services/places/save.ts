/**
 * Outlooks of the places that a station feeds, written in the transaction of its estimate: both are there or neither is. A place's fault
 * must not stop the estimate, so what cannot be computed is stored as such.
 */
import { promisify } from 'node:util'
import { deflateRaw } from 'node:zlib'
import type { Transaction } from 'sequelize'
import { outlookOf } from '../../../shared/places/outlook.ts'
import type { Outlook as OutlookMade } from '../../../shared/places/outlook.ts'
import { tideAt } from '../../../shared/places/tide.ts'
import { softwareVersion } from '../../config/softwareVersion.ts'
import type { Parts } from '../../config/parts.ts'
import { Outlook } from '../../models/index.ts'
import type { OutlookValues } from '../../models/outlook.ts'
import { select } from '../../models/sql.ts'
import { readPlaceTimelines, versionAt } from './rows.ts'
import type { PlaceTimeline, PlaceVersion } from './rows.ts'
import { sourcesAt } from './sources.ts'
import type { Sources } from './sources.ts'

const deflate = promisify(deflateRaw)

export interface SavedOutlook {
  placeId: number
  windowEndsAt: number
  revision: number
}

type Saving = Pick<Parts, 'clock' | 'logger' | 'sequelize'>

/** A station's estimate of this window was just written in the transaction. */
export async function saveOutlooks(
  parts: Saving,
  estimate: { stationId: number; windowStartsAt: number; windowEndsAt: number },
  transaction: Transaction,
): Promise<SavedOutlook[]> {
  const { stationId, windowEndsAt: at } = estimate
  const timelines = await readPlaceTimelines(parts.sequelize, transaction)
  const fed = timelines.flatMap((place) => {
    const version = versionAt(place, at)
    return version?.content.stationOrder.some((feed) => feed.stationId === stationId) ? [{ place, version }] : []
  })
  if (fed.length === 0) return []
  // Two stations may feed a place at once: its revisions are counted by one of them at a time.
  const ids = fed.map(({ place }) => place.id)
  await select(parts.sequelize, 'SELECT id FROM places WHERE id IN (:ids) ORDER BY id FOR UPDATE', { ids }, transaction)
  const sources = sourcesAt(parts.sequelize, at, transaction)
  const saved: SavedOutlook[] = []
  for (const { place, version } of fed) {
    const outlook = await makeOutlook(parts, place, version, sources, at)
    const row = await saveOne(parts, { place, version, outlook, estimate }, transaction)
    if (row) saved.push(row)
  }
  return saved
}

async function makeOutlook(
  { logger }: Saving,
  place: PlaceTimeline,
  { content: settings }: PlaceVersion,
  sources: Sources,
  at: number,
): Promise<OutlookMade> {
  const stations = await Promise.all(settings.stationOrder.map(({ stationId }) => sources.stationOf(stationId)))
  const levels = settings.tideStationId === null ? null : await sources.levelsOf(settings.tideStationId)
  try {
    return outlookOf({ at, settings, stations, tide: tideAt(levels, settings, at) })
  } catch (error) {
    logger.error({ error, place: place.name }, 'an outlook could not be computed')
    const nothing = {
      figures: [],
      courses: [],
      arrivals: [],
      rip: null,
      chances: [],
      basin: [],
      longWaves: null,
      remarks: [],
    }
    const content = { ...nothing, qualityFlag: 4 as const, substituteWords: null, tide: null, sea: null }
    return {
      content: { ...content, reason: 'It could not be computed: the fault stands in the server’s log.' },
      feed: null,
    }
  }
}

interface Making {
  place: PlaceTimeline
  version: PlaceVersion
  outlook: OutlookMade
  /** The one that was just written. */
  estimate: { stationId: number; windowStartsAt: number; windowEndsAt: number }
}

interface KnownRow {
  revision: number
  stationId: number | null
  estimateRevision: number | null
  placeSettingsId: number
}

async function saveOne(
  { clock, sequelize }: Saving,
  { place, version, outlook, estimate }: Making,
  transaction: Transaction,
): Promise<SavedOutlook | null> {
  const { content, feed } = outlook
  const { windowStartsAt, windowEndsAt } = feed?.estimate ?? estimate
  const [known] = await select<KnownRow>(
    sequelize,
    // Locking, for the transaction's own view is older than the lock on the place: another station's outlook may have come since.
    `SELECT revision, stationId, estimateRevision, placeSettingsId FROM outlooks
     WHERE placeId = :placeId AND windowEndsAt = :windowEndsAt ORDER BY revision DESC LIMIT 1 FOR UPDATE`,
    { placeId: place.id, windowEndsAt: new Date(windowEndsAt) },
    transaction,
  )
  const isRenewed = known?.stationId === estimate.stationId && windowEndsAt === estimate.windowEndsAt
  if (known && !isBetter(known, version, feed, isRenewed)) return null
  const revision = (known?.revision ?? 0) + 1
  await Outlook.create(
    {
      ...{
        placeId: place.id,
        windowEndsAt: new Date(windowEndsAt),
        revision,
        windowStartsAt: new Date(windowStartsAt),
      },
      ...{
        computedAt: clock.now(),
        stationId: feed?.station.id ?? null,
        estimateRevision: feed?.estimate.revision ?? null,
      },
      ...{ isSubstitute: (feed?.index ?? 0) > 0, placeSettingsId: version.id, softwareVersion },
      ...{ qualityFlag: content.qualityFlag, reason: content.reason?.slice(0, 300) ?? null },
      figures: valuesOf(outlook),
      payload: await deflate(JSON.stringify(content)),
    },
    { transaction },
  )
  return { placeId: place.id, windowEndsAt, revision }
}

/**
 * A window has its outlook already: another replaces it where it comes from a station earlier in the order, from a newer estimate of the
 * same one, or where there was none. `isRenewed`: its own station's estimate of this window has just been written anew.
 */
function isBetter(known: KnownRow, { content }: PlaceVersion, feed: OutlookMade['feed'], isRenewed: boolean): boolean {
  const isSame = known.stationId !== null && known.stationId === feed?.station.id
  if (isSame) return feed.estimate.revision > (known.estimateRevision ?? 0)
  if (isRenewed) return true
  if (!feed) return false
  if (known.stationId === null) return true
  const before = content.stationOrder.findIndex(({ stationId }) => stationId === known.stationId)
  return before < 0 || feed.index < before
}

const valuesOf = ({ content }: OutlookMade): OutlookValues =>
  Object.fromEntries(
    content.figures.flatMap(({ quantity, figure: { value, sd, likely }, qualityFlag }) =>
      value === null ? [] : [[quantity, [value, sd, likely?.from ?? null, likely?.to ?? null, qualityFlag]]],
    ),
  )
