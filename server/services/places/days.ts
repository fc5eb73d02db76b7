/** Days of a place's quantities, packed out of its outlooks: what back-tests read. Each has its own flags, and its ± beside it. */
import { placeQuantityKey } from '../../../shared/schemas/placeQuantity.ts'
import type { PlaceQuantityKey } from '../../../shared/schemas/placeQuantity.ts'
import type { Parts } from '../../config/parts.ts'
import { Place, SeriesDay } from '../../models/index.ts'
import type { OutlookValues } from '../../models/outlook.ts'
import { packDay } from '../../models/seriesDayPayload.ts'
import type { DayValues } from '../../models/seriesDayPayload.ts'
import { execute, select } from '../../models/sql.ts'
import { inTransaction } from '../transaction.ts'
import { valuesIn } from './values.ts'

const dayMs = 86_400_000
const minuteMs = 60_000
const job = { job: 'seriesDays', subjectKind: 'place' }
const dayOf = (time: number): string => new Date(time).toISOString().slice(0, 10)
const startOf = (day: string): number => Date.parse(`${day}T00:00:00Z`)

interface Window {
  at: number
  values: OutlookValues
}

/** A window belongs to the UTC day in which it ends, midnight to the day that it begins. */
export async function rebuildPlaceDay(
  { sequelize }: Pick<Parts, 'sequelize'>,
  placeId: number,
  day: string,
): Promise<void> {
  const start = startOf(day)
  const rows = await select<{ windowEndsAt: Date; figures: unknown }>(
    sequelize,
    `SELECT o.windowEndsAt, o.figures FROM outlooks o
     WHERE o.placeId = :placeId AND o.windowEndsAt >= :from AND o.windowEndsAt < :to
       AND NOT EXISTS (SELECT 1 FROM outlooks newer WHERE newer.placeId = o.placeId
         AND newer.windowEndsAt = o.windowEndsAt AND newer.revision > o.revision) ORDER BY o.windowEndsAt`,
    { placeId, from: new Date(start), to: new Date(start + dayMs) },
  )
  const windows = rows.map(({ windowEndsAt, figures }) => ({ at: windowEndsAt.getTime(), values: valuesIn(figures) }))
  const steps = windows.slice(1).map(({ at }, n) => at - windows[n].at)
  const stepMs = Math.min(...steps, steps.length === 0 ? minuteMs : 60 * minuteMs)
  const known = placeQuantityKey.options.filter((key) => windows.some(({ values }) => values[key]))
  const packed = known.flatMap((key) => seriesOf(windows, key, start, stepMs))
  await inTransaction(sequelize, async (transaction) => {
    const subject = { subjectKind: 'place', subjectId: placeId, day }
    await SeriesDay.destroy({ where: subject, transaction })
    const days = packed.map((one) => ({ ...subject, stepSeconds: stepMs / 1000, ...one }))
    await SeriesDay.bulkCreate(days, { transaction })
  })
}

/** The figure and, under its name with `Sd`, its ±. */
function seriesOf(windows: Window[], key: PlaceQuantityKey, start: number, stepMs: number) {
  const length = Math.ceil(dayMs / stepMs)
  const blank = (): DayValues => ({ values: new Float32Array(length).fill(NaN), flags: new Uint8Array(length) })
  const [figure, error] = [blank(), blank()]
  const good: number[] = []
  for (const { at, values } of windows) {
    const slot = Math.floor((at - start) / stepMs)
    const [value, sd, , , flag] = values[key] ?? [NaN, null, null, null, 9]
    figure.flags[slot] = flag
    error.flags[slot] = flag
    figure.values[slot] = value
    if (sd !== null) error.values[slot] = sd
    if (flag === 1 || flag === 3) good.push(value)
  }
  const none = { minimum: null, maximum: null, mean: null }
  const mean = good.reduce((sum, value) => sum + value, 0) / good.length
  const summary = good.length === 0 ? none : { minimum: Math.min(...good), maximum: Math.max(...good), mean }
  return [
    { quantity: key, ...summary, goodCount: good.length, payload: packDay(figure) },
    { quantity: `${key}Sd`, ...none, goodCount: good.length, payload: packDay(error) },
  ]
}

async function firstUnpacked({ sequelize }: Pick<Parts, 'sequelize'>, placeId: number): Promise<string | null> {
  const [row] = await select<{ day: Date | null }>(
    sequelize,
    `SELECT COALESCE(
       (SELECT doneUpTo FROM watermarks WHERE job = :job AND subjectKind = :subjectKind AND subjectId = :placeId),
       (SELECT MIN(windowEndsAt) FROM outlooks WHERE placeId = :placeId)) AS day`,
    { ...job, placeId },
  )
  return row?.day ? dayOf(row.day.getTime()) : null
}

/** Packs every day of every place that closed before `openDay`; a stored watermark says which are due. */
export async function packPlaceDays(parts: Pick<Parts, 'clock' | 'sequelize'>, openDay: string): Promise<void> {
  for (const { id: placeId } of await Place.findAll({ attributes: ['id'], order: [['id', 'ASC']] })) {
    const first = await firstUnpacked(parts, placeId)
    if (first === null || first >= openDay) continue
    for (let day = first; day < openDay; day = dayOf(startOf(day) + dayMs)) await rebuildPlaceDay(parts, placeId, day)
    await execute(
      parts.sequelize,
      `INSERT INTO watermarks (job, subjectKind, subjectId, doneUpTo, epoch, updatedAt)
       VALUES (:job, :subjectKind, :placeId, :openDay, 0, :now)
       ON DUPLICATE KEY UPDATE doneUpTo = VALUES(doneUpTo), updatedAt = VALUES(updatedAt)`,
      { ...job, placeId, openDay: new Date(startOf(openDay)), now: parts.clock.now() },
    )
  }
}
