/** Stored outlooks as they are read: the newest, the one of a window, the last that had the lead figure. */
import { promisify } from 'node:util'
import { inflateRaw } from 'node:zlib'
import type { Sequelize } from 'sequelize'
import { placeQuantityOf } from '../../../shared/places/quantities.ts'
import { outlookContent } from '../../../shared/schemas/placeOutlook.ts'
import type { OutlookContent, OutlookView } from '../../../shared/schemas/placeOutlook.ts'
import { qualityFlag } from '../../../shared/schemas/estimate.ts'
import { placeQuantityKey } from '../../../shared/schemas/placeQuantity.ts'
import type { PlaceQuantityKey } from '../../../shared/schemas/placeQuantity.ts'
import type { PlaceCautions } from '../../../shared/schemas/placeCautions.ts'
import type { Parts } from '../../config/parts.ts'
import { select } from '../../models/sql.ts'
import type { SqlValues } from '../../models/sql.ts'
import { valuesIn } from './values.ts'

const inflate = promisify(inflateRaw)

interface OutlookRow {
  placeId: number
  windowStartsAt: Date
  windowEndsAt: Date
  revision: number
  computedAt: Date
  stationId: number | null
  stationName: string | null
  stationCode: string | null
  staleAfterSeconds: number | null
  estimateRevision: number | null
  isSubstitute: number
  placeSettingsId: number
  softwareVersion: string
  qualityFlag: number
  reason: string | null
  figures: unknown
  payload: Buffer | null
}

const read = (sequelize: Sequelize, which: string, values: SqlValues): Promise<OutlookRow[]> =>
  select<OutlookRow>(
    sequelize,
    `SELECT o.*, s.name AS stationName, s.code AS stationCode, s.staleAfterSeconds
     FROM outlooks o LEFT JOIN stations s ON s.id = o.stationId WHERE o.placeId = :placeId AND ${which}`,
    values,
  )

type Reading = Pick<Parts, 'clock' | 'sequelize'>

/** Values without how they were made: what is left when an outlook has been thinned. */
function contentWithout(row: OutlookRow): OutlookContent {
  const values = valuesIn(row.figures)
  const figures = placeQuantityKey.options.flatMap((quantity) => {
    const kept = values[quantity]
    if (!kept) return []
    const [value, sd, from, to, flag] = kept
    const figure = {
      ...{ value, sd, reason: null, words: null, likely: from === null || to === null ? null : { from, to } },
      unit: quantity === 'overtopping' ? ('m³/s/m' as const) : quantity === 'largestVolume' ? ('m³/m' as const) : quantity === 'longshoreCurrent' ? ('m/s' as const) : ('m' as const), // prettier-ignore
      uncertaintyFrom: 'no longer kept',
      validity: { inRange: true, checks: [] },
      method: { name: placeQuantityOf(quantity).name, formula: '', source: 'no longer kept', fromMemory: false, assumptions: [] }, // prettier-ignore
      inputs: [],
    }
    return [{ quantity, figure, qualityFlag: qualityFlag.parse(flag) }]
  })
  return {
    ...{ reason: row.reason, qualityFlag: qualityFlag.parse(row.qualityFlag), substituteWords: null, tide: null },
    ...{
      sea: null,
      figures,
      courses: [],
      arrivals: [],
      rip: null,
      chances: [],
      basin: [],
      longWaves: null,
      remarks: [],
    },
  }
}

export interface Around {
  cautions: PlaceCautions
  /** Of stations, by id. */
  nameOf(stationId: number): string
  /** Of the place's own station, where none feeds it. */
  staleAfterSeconds: number
}

async function present(row: OutlookRow, { cautions, nameOf, staleAfterSeconds }: Around): Promise<OutlookView> {
  const content = row.payload
    ? outlookContent.parse(JSON.parse((await inflate(row.payload)).toString('utf8')))
    : contentWithout(row)
  return {
    ...content,
    placeId: row.placeId,
    windowStartsAt: row.windowStartsAt.toISOString(),
    windowEndsAt: row.windowEndsAt.toISOString(),
    revision: row.revision,
    computedAt: row.computedAt.toISOString(),
    source:
      row.stationId === null
        ? null
        : {
            ...{ stationId: row.stationId, name: row.stationName ?? '', code: row.stationCode ?? '' },
            ...{ estimateRevision: row.estimateRevision ?? 0, isSubstitute: Boolean(row.isSubstitute) },
          },
    staleAfterSeconds: row.staleAfterSeconds ?? staleAfterSeconds,
    settingsId: row.placeSettingsId,
    softwareVersion: row.softwareVersion,
    figures: content.figures.map((figure) => ({ ...figure, caution: cautions[figure.quantity] })),
    rip: content.rip && { ...content.rip, caution: cautions.rip },
    arrivals: content.arrivals.map((arrival) => ({ ...arrival, stationName: nameOf(arrival.stationId) })),
    isThinned: row.payload === null,
  }
}

/** The newest of a place, however old: its reader judges the age. */
export async function newestOutlook(
  { sequelize }: Reading,
  placeId: number,
  around: Around,
): Promise<OutlookView | null> {
  const [row] = await read(sequelize, 'TRUE ORDER BY o.windowEndsAt DESC, o.revision DESC LIMIT 1', { placeId })
  return row ? present(row, around) : null
}

/** Of one window; the newest revision where none is named. */
export async function outlookOfWindow(
  { sequelize }: Reading,
  placeId: number,
  { windowEndsAt, revision }: { windowEndsAt: Date; revision: number | null },
  around: Around,
): Promise<OutlookView | null> {
  const which = revision === null ? '' : 'AND o.revision = :revision'
  const condition = `o.windowEndsAt = :windowEndsAt ${which} ORDER BY o.revision DESC LIMIT 1`
  const [row] = await read(sequelize, condition, { placeId, windowEndsAt, revision })
  return row ? present(row, around) : null
}

/** A figure older than this is no longer told as the last good one. */
const rememberedMs = 30 * 24 * 3_600_000

/** The newest window that had a figure of this quantity that was not failed, in short. */
export async function lastGoodOf(
  { sequelize, clock }: Reading,
  placeId: number,
  quantity: PlaceQuantityKey,
): Promise<{ windowEndsAt: string; value: number; sd: number | null; stationName: string } | null> {
  const since = new Date(clock.now().getTime() - rememberedMs)
  const condition = `o.windowEndsAt >= :since AND o.stationId IS NOT NULL AND JSON_EXISTS(o.figures, :path)
    ORDER BY o.windowEndsAt DESC, o.revision DESC LIMIT 1`
  const [row] = await read(sequelize, condition, { placeId, since, path: `$.${quantity}` })
  const kept = row && valuesIn(row.figures)[quantity]
  if (!row || !kept) return null
  return {
    windowEndsAt: row.windowEndsAt.toISOString(),
    value: kept[0],
    sd: kept[1],
    stationName: row.stationName ?? '',
  }
}
