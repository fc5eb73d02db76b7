/** Files of readings taken in: all of a file or nothing of it, and undone by taking its parts out again. */
import type { Transaction } from 'sequelize'
import type { Parts } from '../config/parts.ts'
import { Import } from '../models/index.ts'
import { execute, select } from '../models/sql.ts'
import { recordAudit } from './audit.ts'
import { notFound, Refused } from './problems.ts'
import { takeCommitId } from './readings/commitIds.ts'
import { loadReadUpTo, noteDirtyWindows } from './readings/dirty.ts'
import type { DirtyCause } from './readings/dirty.ts'
import { storeMinutes } from './readings/importedBlocks.ts'
import type { BlockCounts } from './readings/importedBlocks.ts'
import { packImport } from './readings/importedMinutes.ts'
import type { Imported, ImportFault, ImportRow } from './readings/importedMinutes.ts'
import { holdStation } from './readings/lanes.ts'
import { durableUntil, noteDurable } from './readings/links.ts'
import { loadDeployments, loadSampleRates, loadStationFacts } from './readings/station.ts'
import type { StationFacts } from './readings/station.ts'
import { inTransaction } from './transaction.ts'

const minuteMs = 60_000
const futureSlackMs = 2_000

export { listImports, readImport } from './imports/list.ts'
export type { ImportFault, ImportRow }

export interface ImportOrder {
  stationId: number
  source: 'demonstration' | 'import'
  /** Rising in time, at the station's rate, with gaps where there are any. */
  rows: AsyncIterable<ImportRow> | Iterable<ImportRow>
  /** Sensors in the order of each row's values. */
  letters: string[]
  fileName: string
  /** Null: the program itself. */
  personId: number | null
  /** What was found wrong while the rows were read, filled as they are; with any of them nothing is stored. */
  readFaults?: readonly ImportFault[]
  /** Of the file; absent: of what the rows hold. */
  fileHash?: Buffer
  /** A time within the rows: by which settings they were taken; absent: by those of now. */
  takenAt?: Date
  /** Written in the transaction that stores. */
  noteStored?: (outcome: ImportOutcome, transaction: Transaction) => Promise<void>
}

export interface ImportOutcome {
  importId: number
  /** `failed`: nothing of the file was stored, for the reasons in `faults`. */
  status: 'done' | 'failed'
  counts: BlockCounts & { rows: number; minutes: number }
  faults: ImportFault[]
}

export async function importReadings(parts: Parts, order: ImportOrder): Promise<ImportOutcome> {
  const { station, imported, deploymentAt } = await packed(parts, order)
  if (imported.faults.length > 0) return fail(parts, order, imported)
  return holdStation(station.id, () => store(parts, order, station, imported, deploymentAt))
}

export interface ImportForecast {
  counts: ImportOutcome['counts']
  faults: ImportFault[]
  /** ms since 1970 UTC; null for no rows. */
  span: { from: number; to: number } | null
}

/** What storing would do: nothing is written. */
export async function foretellImport(parts: Parts, order: ImportOrder): Promise<ImportForecast> {
  const { station, imported, deploymentAt } = await packed(parts, order)
  const span = spanOf(station, imported)
  const none = { stored: 0, repeated: 0, conflicting: 0 }
  const { rows, faults } = imported
  if (faults.length > 0) return { counts: { rows, minutes: imported.minutes.length, ...none }, faults, span }
  const making = { station, source: order.source, importId: 0, commitId: 0, deploymentAt }
  const { counts, added } = await storeMinutes(imported.minutes, making)
  return { counts: { rows, minutes: added.length, ...counts }, faults, span }
}

function spanOf({ sampleRate }: StationFacts, { minutes }: Imported): { from: number; to: number } | null {
  const [first, last] = [minutes[0], minutes.at(-1)]
  return first && last ? { from: first.startsAt, to: last.startsAt + (last.length / sampleRate) * 1000 } : null
}

async function packed(parts: Parts, order: ImportOrder) {
  const station = await loadStationFacts(order.stationId, order.takenAt ?? parts.clock.now())
  if (!station) throw notFound('station', order.stationId)
  const [deployments, rateAt] = await Promise.all([loadDeployments(order.stationId), loadSampleRates(order.stationId)])
  const imported = await packImport(order.rows, {
    sampleRate: station.sampleRate,
    letters: order.letters,
    faultAt: (minute) =>
      faultAt(minute, order.letters, deployments, parts.clock.now().getTime()) ??
      rateFault(rateAt(minute), station.sampleRate),
  })
  const readFaults = order.readFaults ?? []
  // Of rows that could not be read nothing can be said as a whole.
  const own = imported.faults.filter(({ row }) => row !== null || readFaults.length === 0)
  const faults = [...readFaults, ...own].sort((a, b) => (a.row ?? 0) - (b.row ?? 0))
  return {
    station,
    imported: { ...imported, faults: faults.slice(0, mostFaults) },
    deploymentAt: (time: number) => deployments.at(time)?.id ?? null,
  }
}

const mostFaults = 100

const rateFault = (inForce: number | null, sampleRate: number): string | null =>
  inForce === null || inForce === sampleRate
    ? null
    : `the station was set to ${inForce} Hz then, and to ${sampleRate} Hz where the file begins: cut the file there`

type Deployments = Awaited<ReturnType<typeof loadDeployments>>

function faultAt(minute: number, letters: readonly string[], deployments: Deployments, now: number): string | null {
  if (minute > now + futureSlackMs) return 'readings lie in the future'
  const deployment = deployments.at(minute)
  if (!deployment) return 'the station was not yet deployed'
  const unknown = letters.find((letter) => !deployment.letters.includes(letter))
  if (unknown !== undefined) return `sensor ${unknown} was not deployed`
  return new Set(letters).size < letters.length ? 'a sensor is named twice' : null
}

const rowOf = (parts: Parts, order: ImportOrder, { contentHash }: Imported) => ({
  stationId: order.stationId,
  kind: order.source === 'import' ? 'readings' : 'demonstration',
  fileName: order.fileName.slice(0, 255),
  fileHash: order.fileHash ?? contentHash,
  personId: order.personId,
  createdAt: parts.clock.now(),
  finishedAt: parts.clock.now(),
  undoneAt: null,
})

async function fail(parts: Parts, order: ImportOrder, imported: Imported): Promise<ImportOutcome> {
  const counts = { rows: imported.rows, minutes: 0, stored: 0, repeated: 0, conflicting: 0 }
  const row = await Import.create({
    ...rowOf(parts, order, imported),
    status: 'failed',
    counts,
    faults: imported.faults,
  })
  return { importId: row.id, status: 'failed', counts, faults: imported.faults }
}

async function store(
  parts: Parts,
  order: ImportOrder,
  station: StationFacts,
  imported: Imported,
  deploymentAt: (timeMs: number) => number | null,
): Promise<ImportOutcome> {
  const commitId = await takeCommitId()
  const { outcome, added } = await inTransaction(parts.sequelize, async (transaction) => {
    const row = await Import.create(
      { ...rowOf(parts, order, imported), status: 'running', counts: null, faults: null },
      { transaction },
    )
    const making = { station, source: order.source, importId: row.id, commitId, deploymentAt }
    const stored = await storeMinutes(imported.minutes, making, transaction)
    const counts = { rows: imported.rows, minutes: stored.added.length, ...stored.counts }
    await row.update({ status: 'done', counts: { ...counts, ...spanOf(station, imported) }, finishedAt: parts.clock.now() }, { transaction }) // prettier-ignore
    await noteDirtyMinutes(parts, station, stored.added, 'import', transaction)
    const outcome = { importId: row.id, status: 'done' as const, counts, faults: [] }
    await order.noteStored?.(outcome, transaction)
    const change = { personId: order.personId, action: 'import.store', entity: 'import', entityId: row.id }
    await recordAudit(parts, { ...change, after: { fileName: order.fileName, ...counts } }, transaction)
    return { outcome, added: stored.added }
  })
  announce(parts, station, imported, added)
  return outcome
}

async function noteDirtyMinutes(
  { clock }: Parts,
  station: StationFacts,
  minutes: readonly number[],
  cause: DirtyCause,
  transaction: Transaction,
): Promise<void> {
  const now = clock.now().getTime()
  const readUpTo = await loadReadUpTo([station], durableUntil, now, transaction)
  const changes = minutes.map((minute) => ({ station, from: minute, to: minute + minuteMs }))
  await noteDirtyWindows(changes, readUpTo, cause, now, transaction)
}

function announce({ bus }: Parts, { id, sampleRate }: StationFacts, { minutes }: Imported, added: number[]): void {
  const stored = new Set(added)
  for (const { startsAt, length, present } of minutes) {
    if (stored.has(startsAt)) noteDurable(id, startsAt, startsAt + (length / sampleRate) * 1000, present)
  }
  const [first, last] = [added[0], added.at(-1)]
  if (first === undefined || last === undefined) return
  bus.publish('readings.stored', { stationId: id, from: first, to: last + minuteMs, late: true })
}

/** Takes the parts of an import out again and has their windows computed anew. */
export async function undoImport(
  parts: Parts,
  importId: number,
  personId: number | null,
  reason: string | null = null,
): Promise<void> {
  const known = await Import.findByPk(importId)
  if (!known) throw notFound('import', importId)
  const station = await loadStationFacts(known.stationId, parts.clock.now())
  if (!station) throw notFound('station', known.stationId)
  await holdStation(station.id, () =>
    inTransaction(parts.sequelize, async (transaction) => {
      const row = await Import.findByPk(importId, { lock: transaction.LOCK.UPDATE, transaction })
      if (row?.status !== 'done') {
        throw new Refused({ status: 409, code: 'import.notDone', title: 'There is nothing to undo' })
      }
      const blocks = 'importId = :importId AND stationId = :stationId'
      const values = { importId, stationId: station.id }
      const minutes = await select<{ startsAt: Date }>(
        parts.sequelize,
        `SELECT startsAt FROM readingBlocks WHERE ${blocks} ORDER BY startsAt`,
        values,
        transaction,
      )
      await execute(parts.sequelize, `DELETE FROM readingBlocks WHERE ${blocks}`, values, transaction)
      await execute(parts.sequelize, `DELETE FROM auxiliaryReadings WHERE ${blocks}`, values, transaction)
      await noteDirtyMinutes(parts, station, minutes.map(({ startsAt }) => startsAt.getTime()), 'undo', transaction) // prettier-ignore
      await row.update({ status: 'undone', undoneAt: parts.clock.now() }, { transaction })
      await recordAudit(
        parts,
        {
          personId,
          action: 'import.undo',
          entity: 'import',
          entityId: importId,
          before: row.counts,
          after: { reason },
        },
        transaction,
      )
    }),
  )
}
