/** Level of the water, tide table, pressure of the air and wind, each with its own time and quality. */
import { createHash } from 'node:crypto'
import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import { auxiliaryKind } from '../../shared/schemas/stationSetUpAuxiliary.ts'
import type { AuxiliaryKind, AuxiliaryReadingGiven, AuxiliaryView, auxiliaryOutcome, auxiliaryReadingView } from '../../shared/schemas/stationSetUpAuxiliary.ts' // prettier-ignore
import type { z } from 'zod'
import type { Parts } from '../config/parts.ts'
import { AuxiliaryReading, Import, Station } from '../models/index.ts'
import { flagOf } from './auxiliary/judge.ts'
import { lostWithout, reachSeconds, unitOf, usedFor } from './auxiliary/words.ts'
import { recordAudit } from './audit.ts'
import { invalidInput, notFound, Refused } from './problems.ts'
import { inTransaction } from './transaction.ts'

export type AuxiliaryOutcome = z.infer<typeof auxiliaryOutcome>
type ReadingView = z.infer<typeof auxiliaryReadingView>

const longestDays = 31
const rowsAtOnce = 500
/** A tide table may reach ahead so far; a measured value must not lie in the future. */
const tableReachMs = 3 * 366 * 24 * 3_600_000
const toleratedLeadMs = 120_000

/** All kinds, with or without values, so that what is missing is seen. */
export async function listAuxiliary({ clock }: Pick<Parts, 'clock'>, stationId: number): Promise<AuxiliaryView[]> {
  await requireStation(stationId)
  const now = clock.now()
  return Promise.all(
    auxiliaryKind.options.map(async (kind) => {
      const where = { stationId, kind }
      const [past, next, last] = await Promise.all([
        AuxiliaryReading.findOne({ where: { ...where, takenAt: { [Op.lte]: now } }, order: [['takenAt', 'DESC']] }),
        AuxiliaryReading.findOne({ where: { ...where, takenAt: { [Op.gt]: now } }, order: [['takenAt', 'ASC']] }),
        AuxiliaryReading.findOne({ where, order: [['takenAt', 'DESC']] }),
      ])
      const newest = kind === 'tide' ? nearer(past, next, now) : past
      const reach = reachSeconds[kind]
      const apart = newest ? Math.abs(newest.takenAt.getTime() - now.getTime()) / 1000 : Infinity
      return {
        kind,
        unit: unitOf[kind],
        newest: newest && present(newest),
        reachesUntil: kind === 'tide' && last ? last.takenAt.toISOString() : null,
        reachSeconds: reach,
        isUsed: newest !== null && apart <= reach && newest.qualityFlag !== 4 && newest.qualityFlag !== 9,
        usedFor: usedFor[kind],
        lostWithout: lostWithout[kind],
      }
    }),
  )
}

function nearer(past: AuxiliaryReading | null, next: AuxiliaryReading | null, now: Date): AuxiliaryReading | null {
  if (!past || !next) return past ?? next
  return now.getTime() - past.takenAt.getTime() <= next.takenAt.getTime() - now.getTime() ? past : next
}

export async function auxiliaryBetween(
  stationId: number,
  kind: AuxiliaryKind,
  { from, to }: { from: Date; to: Date },
): Promise<ReadingView[]> {
  await requireStation(stationId)
  const length = to.getTime() - from.getTime()
  if (length <= 0) throw invalidInput([{ path: 'query.to', message: 'must be after from' }])
  if (length > longestDays * 86_400_000) throw invalidInput([{ path: 'query.from', message: `must be at most ${longestDays} days before to` }]) // prettier-ignore
  const rows = await AuxiliaryReading.findAll({
    where: { stationId, kind, takenAt: { [Op.gte]: from, [Op.lt]: to } },
    order: [['takenAt', 'ASC']],
  })
  return rows.map(present)
}

const present = ({ takenAt, value, sd, qualityFlag, importId, source }: AuxiliaryReading): ReadingView => ({
  at: takenAt.toISOString(),
  value,
  sd,
  qualityFlag: qualityFlag as ReadingView['qualityFlag'],
  source: importId === null ? source : 'file',
})

export interface AuxiliaryOrder {
  stationId: number
  readings: readonly AuxiliaryReadingGiven[]
  source: 'push' | 'entered' | 'file'
  personId: number | null
}

/** All of a batch or nothing of it. A later value for the same time takes the place of the earlier one. */
export async function takeAuxiliary(parts: Parts, order: AuxiliaryOrder): Promise<AuxiliaryOutcome> {
  const station = await requireStation(order.stationId)
  if (order.source === 'push' && station.retiredAt) throw isRetired()
  refuseFuture(parts.clock.now(), order.readings)
  const outcome = await inTransaction(parts.sequelize, async (transaction) => {
    const { outcome, replaced } = await storeAll(order, null, transaction)
    // A push a minute would fill the audit: what it replaced is what matters.
    if (order.source !== 'push' || replaced.length > 0) {
      const change = { personId: order.personId, action: 'auxiliary.store', entity: 'station', entityId: order.stationId } // prettier-ignore
      await recordAudit(parts, { ...change, before: replaced.slice(0, 200), after: outcome }, transaction)
    }
    return outcome
  })
  return outcome
}

export interface AuxiliaryFile {
  fileName: string
  fileHash?: Buffer
  noteStored?: (importId: number, outcome: AuxiliaryOutcome, transaction: Transaction) => Promise<void>
}

/** A file of them, undone by its import: what stands there with another value is left as it is, so that nothing is lost by undoing. */
export async function importAuxiliary(
  parts: Parts,
  order: AuxiliaryOrder,
  { fileName, fileHash, noteStored }: AuxiliaryFile,
): Promise<{ importId: number; outcome: AuxiliaryOutcome }> {
  const { stationId, personId, readings } = order
  const now = parts.clock.now()
  return inTransaction(parts.sequelize, async (transaction) => {
    const row = await Import.create(
      { stationId, kind: 'auxiliary', fileName: fileName.slice(0, 255), fileHash: fileHash ?? hashOf(readings), status: 'running', counts: null, faults: null, personId, createdAt: now, finishedAt: null, undoneAt: null }, // prettier-ignore
      { transaction },
    )
    const { outcome } = await storeAll(order, row.id, transaction)
    const times = readings.map(({ at }) => Date.parse(at))
    const span = times.reduce((both, at) => ({ from: Math.min(both.from, at), to: Math.max(both.to, at) }), { from: Infinity, to: -Infinity }) // prettier-ignore
    const counts = { rows: readings.length, minutes: 0, stored: outcome.stored, repeated: outcome.repeated, conflicting: outcome.replaced, ...span } // prettier-ignore
    await row.update({ status: 'done', counts, finishedAt: now }, { transaction })
    await noteStored?.(row.id, outcome, transaction)
    const change = { personId, action: 'import.store', entity: 'import', entityId: row.id }
    await recordAudit(parts, { ...change, after: { fileName, ...counts } }, transaction)
    return { importId: row.id, outcome }
  })
}

const hashOf = (readings: readonly AuxiliaryReadingGiven[]): Buffer =>
  createHash('sha256').update(JSON.stringify(readings)).digest()

/** What storing would do: nothing is written. */
export async function foretellAuxiliary(order: AuxiliaryOrder): Promise<AuxiliaryOutcome> {
  const outcome: AuxiliaryOutcome = { stored: 0, repeated: 0, replaced: 0, flagged: 0 }
  for (let n = 0; n < order.readings.length; n += rowsAtOnce) {
    await compare(order, order.readings.slice(n, n + rowsAtOnce), outcome)
  }
  return outcome
}

async function storeAll(order: AuxiliaryOrder, importId: number | null, transaction: Transaction) {
  const outcome: AuxiliaryOutcome = { stored: 0, repeated: 0, replaced: 0, flagged: 0 }
  const replaced: object[] = []
  for (let n = 0; n < order.readings.length; n += rowsAtOnce) {
    const {
      rows: changed,
      added,
      before,
    } = await compare(order, order.readings.slice(n, n + rowsAtOnce), outcome, transaction)
    const rows = importId === null ? changed : added
    if (importId === null) replaced.push(...before)
    if (rows.length === 0) continue
    await AuxiliaryReading.bulkCreate(
      rows.map((row) => ({ ...row, stationId: order.stationId, importId, source: order.source })),
      { updateOnDuplicate: ['value', 'sd', 'qualityFlag', 'importId', 'source'], transaction },
    )
  }
  return { outcome, replaced }
}

/** Counts what is new, repeated or other than what stands there; answers the rows to write. */
async function compare(
  { stationId }: AuxiliaryOrder,
  readings: readonly AuxiliaryReadingGiven[],
  outcome: AuxiliaryOutcome,
  transaction?: Transaction,
) {
  const rows = readings.map(({ kind, at, value, sd, qualityFlag }) => ({
    kind,
    takenAt: new Date(at),
    value,
    sd: sd ?? null,
    qualityFlag: qualityFlag ?? flagOf(kind, value),
  }))
  const known = await AuxiliaryReading.findAll({
    where: { stationId, takenAt: { [Op.in]: rows.map(({ takenAt }) => takenAt) } },
    ...(transaction && { transaction }),
  })
  const keyOf = ({ kind, takenAt }: { kind: string; takenAt: Date }): string => `${kind}/${takenAt.getTime()}`
  const stored = new Map(known.map((row) => [keyOf(row), row]))
  const before: object[] = []
  const changed = rows.filter((row) => {
    const there = stored.get(keyOf(row))
    const isSame = there?.value === row.value && there.sd === row.sd
    if (isSame) outcome.repeated += 1
    else if (there) outcome.replaced += 1
    else outcome.stored += 1
    if (!isSame && row.qualityFlag > 2) outcome.flagged += 1
    if (there && !isSame) before.push({ kind: row.kind, at: row.takenAt, value: there.value, sd: there.sd })
    return !isSame
  })
  return { rows: changed, added: changed.filter((row) => !stored.has(keyOf(row))), before }
}

function refuseFuture(now: Date, readings: readonly AuxiliaryReadingGiven[]): void {
  const faults = readings.flatMap(({ kind, at }, index) => {
    const lead = Date.parse(at) - now.getTime()
    const most = kind === 'tide' ? tableReachMs : toleratedLeadMs
    return lead > most ? [{ path: `readings.${index}.at`, message: 'lies in the future' }] : []
  })
  if (faults.length > 0) throw invalidInput(faults.slice(0, 50))
}

async function requireStation(stationId: number): Promise<Station> {
  const station = await Station.findByPk(stationId)
  if (!station) throw notFound('station', stationId)
  return station
}

const isRetired = (): Refused =>
  new Refused({
    status: 409,
    code: 'station.retired',
    title: 'The station is retired',
    detail: 'Nothing more is taken from it.',
  })
