/** A quantity of a place over the last hours or days, from its outlooks. Days further back are packed like those of stations. */
import { qualityFlag } from '../../../shared/schemas/estimate.ts'
import type { PlaceSeriesPoint, PlaceSeriesView } from '../../../shared/schemas/placeOutlook.ts'
import type { PlaceQuantityKey } from '../../../shared/schemas/placeQuantity.ts'
import type { Parts } from '../../config/parts.ts'
import { Place } from '../../models/index.ts'
import { select } from '../../models/sql.ts'
import { invalidInput, notFound } from '../problems.ts'
import { valuesIn } from './values.ts'

export interface PlaceSeriesQuestion {
  quantity: PlaceQuantityKey
  hours: number
  stepSeconds: number
}

/** More are no drawing any more. */
const mostPoints = 5_000

interface PointRow {
  windowEndsAt: Date
  stationId: number | null
  isSubstitute: number
  qualityFlag: number
  figures: unknown
}

function presentPoint(row: PointRow, quantity: PlaceQuantityKey): PlaceSeriesPoint {
  const kept = valuesIn(row.figures)[quantity]
  return {
    at: row.windowEndsAt.toISOString(),
    value: kept?.[0] ?? null,
    sd: kept?.[1] ?? null,
    likelyFrom: kept?.[2] ?? null,
    likelyTo: kept?.[3] ?? null,
    qualityFlag: kept ? qualityFlag.parse(kept[4]) : row.qualityFlag === 9 ? 9 : 4,
    stationId: row.stationId,
    isSubstitute: Boolean(row.isSubstitute),
  }
}

/** The newest of each step; a step without an outlook has no point, so that gaps show. */
export async function readPlaceSeries(
  { clock, sequelize }: Pick<Parts, 'clock' | 'sequelize'>,
  placeId: number,
  { quantity, hours, stepSeconds }: PlaceSeriesQuestion,
): Promise<PlaceSeriesView> {
  if ((hours * 3600) / stepSeconds > mostPoints) {
    const message = `must give at most ${mostPoints} points over the hours asked for`
    throw invalidInput([{ path: 'query.stepSeconds', message }])
  }
  if (!(await Place.findByPk(placeId))) throw notFound('place', placeId)
  const to = clock.now().getTime()
  const from = to - hours * 3_600_000
  const rows = await select<PointRow>(
    sequelize,
    `SELECT o.windowEndsAt, o.stationId, o.isSubstitute, o.qualityFlag, o.figures FROM outlooks o
     JOIN (SELECT MAX(windowEndsAt) AS windowEndsAt FROM outlooks
           WHERE placeId = :placeId AND windowEndsAt > :from AND windowEndsAt <= :to
           GROUP BY CEILING(TO_SECONDS(windowEndsAt) / :stepSeconds)) AS newest ON newest.windowEndsAt = o.windowEndsAt
     WHERE o.placeId = :placeId AND NOT EXISTS (SELECT 1 FROM outlooks newer WHERE newer.placeId = o.placeId
       AND newer.windowEndsAt = o.windowEndsAt AND newer.revision > o.revision)
     ORDER BY o.windowEndsAt`,
    { placeId, from: new Date(from), to: new Date(to), stepSeconds },
  )
  const points = rows.map((row) => presentPoint(row, quantity))
  return { placeId, quantity, from: new Date(from).toISOString(), to: new Date(to).toISOString(), stepSeconds, points }
}
