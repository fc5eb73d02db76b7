/** One order: a file checked, or stored whole. */
import { auxiliaryKind } from '../../../shared/schemas/stationSetUpAuxiliary.ts'
import type { AuxiliaryReadingGiven } from '../../../shared/schemas/stationSetUpAuxiliary.ts'
import type { UploadReport } from '../../../shared/schemas/stationSetUpUploads.ts'
import type { Parts } from '../../config/parts.ts'
import { foretellAuxiliary, importAuxiliary } from '../../services/auxiliary.ts'
import { foretellImport, importReadings } from '../../services/imports.ts'
import type { ImportOrder } from '../../services/imports.ts'
import { failJob, finishJob, reportProgress } from '../../services/longJobs.ts'
import { noteUpload, removeFile, uploadFile } from '../../services/uploads.ts'
import type { UploadFile } from '../../services/uploads.ts'
import { fileRows } from './fileRows.ts'
import type { FileFault } from './fileRows.ts'

/** Somebody cancelled it, or the program stops: nothing of the file is stored. */
export class CalledOff extends Error {}

export interface Order {
  jobId: number
  uploadId: number
  act: 'check' | 'store'
}

/** Reading is most of the work; the rest is storing. */
const readingShare = 0.8
const reportEveryMs = 1_000
/** Values beside the array of one file are held in memory. */
const mostAuxiliary = 600_000

export async function work(parts: Parts, order: Order, isStopped: () => boolean): Promise<void> {
  const { jobId, uploadId, act } = order
  const file = await uploadFile(parts, uploadId)
  if (!file) return failJob(parts, jobId, 'The file is gone: bring it in again')
  if (file.isStored) return finishJob(parts, jobId, 'Stored')
  try {
    const report = file.kind === 'readings' ? await workReadings(parts, order, file, isStopped) : await workAuxiliary(parts, order, file, isStopped) // prettier-ignore
    const isGood = report.faults.length === 0
    if (!isGood || act === 'check') await noteUpload(parts, uploadId, { state: isGood ? 'checked' : 'failed', report })
    if (isGood && act === 'store') await removeFile(file)
    await finishJob(parts, jobId, summary(report, act))
  } catch (error) {
    if (error instanceof CalledOff) {
      // A stop of the program leaves the order as it is: it is begun again at the next start.
      if (!isStopped()) await noteUpload(parts, uploadId, { state: 'cancelled', report: null })
      return
    }
    parts.logger.error({ error, uploadId }, 'a file could not be taken in')
    await noteUpload(parts, uploadId, { state: 'failed', report: emptyReport([{ row: null, reason: 'It failed here; nothing of the file is stored. Try again.' }]) }) // prettier-ignore
    await failJob(parts, jobId, 'It failed here; nothing of the file is stored. Try again.')
  }
}

const emptyReport = (faults: FileFault[]): UploadReport => ({ rows: 0, minutes: 0, stored: 0, repeated: 0, conflicting: 0, startsAt: null, endsAt: null, faults }) // prettier-ignore

function summary({ faults, stored, repeated, conflicting }: UploadReport, act: Order['act']): string {
  if (faults.length > 0) return `${faults.length === 100 ? 'At least 100' : faults.length} faults, nothing stored`
  const verb = act === 'check' ? 'would be new' : 'stored'
  return `${stored} values ${verb}, ${repeated} there already, ${conflicting} there with another value`
}

/** Tells the progress and asks whether to go on, at most once a second. */
function progressOf(parts: Parts, { jobId, act }: Order, isStopped: () => boolean) {
  let told = -Infinity
  return async (share: number): Promise<void> => {
    if (isStopped()) throw new CalledOff()
    if (parts.clock.monotonic() - told < reportEveryMs) return
    told = parts.clock.monotonic()
    const done = share * (act === 'check' ? 0.95 : readingShare)
    if (!(await reportProgress(parts, jobId, done, `${Math.round(share * 100)} % read`))) throw new CalledOff()
  }
}

async function workReadings(
  parts: Parts,
  order: Order,
  file: UploadFile,
  isStopped: () => boolean,
): Promise<UploadReport> {
  const { rows, faults } = await fileRows(parts, file, progressOf(parts, order, isStopped))
  // The first row says by which settings the file was taken.
  const first = await rows.next()
  const letters = file.layout.columns.map(({ letter }) => letter)
  const span: Span = { from: null, to: null }
  const importing: ImportOrder = {
    stationId: file.stationId,
    source: 'import',
    rows: first.done ? [] : noting(prepended(first.value, rows), span),
    letters,
    fileName: file.fileName,
    fileHash: file.fileHash,
    personId: file.personId,
    readFaults: faults,
    ...(!first.done && { takenAt: new Date(first.value.timeMs) }),
    noteStored: ({ importId, counts }, transaction) =>
      noteUpload(parts, file.id, { state: 'stored', importId, report: reportOf(counts, span, []) }, transaction),
  }
  const { counts, faults: found } =
    order.act === 'check' ? await foretellImport(parts, importing) : await importReadings(parts, importing)
  return reportOf(counts, span, found)
}

interface Span {
  from: number | null
  to: number | null
}

type Row = { timeMs: number; values: (number | null)[]; line: number }

async function* prepended(first: Row, rest: AsyncGenerator<Row>): AsyncGenerator<Row> {
  yield first
  yield* rest
}

async function* noting(rows: AsyncGenerator<Row>, span: Span): AsyncGenerator<Row> {
  for await (const row of rows) {
    span.from ??= row.timeMs
    span.to = row.timeMs
    yield row
  }
}

const reportOf = (
  counts: Omit<UploadReport, 'startsAt' | 'endsAt' | 'faults'>,
  { from, to }: Span,
  faults: FileFault[],
): UploadReport => ({
  // prettier-ignore
  ...counts,
  startsAt: from === null ? null : new Date(from).toISOString(),
  endsAt: to === null ? null : new Date(to).toISOString(),
  faults,
})

async function workAuxiliary(
  parts: Parts,
  order: Order,
  file: UploadFile,
  isStopped: () => boolean,
): Promise<UploadReport> {
  const { rows, faults } = await fileRows(parts, file, progressOf(parts, order, isStopped))
  const kinds = file.layout.columns.map(({ letter }) => auxiliaryKind.safeParse(letter).data)
  const readings: AuxiliaryReadingGiven[] = []
  const span: Span = { from: null, to: null }
  const latest = parts.clock.now().getTime()
  let count = 0
  let before = -Infinity
  for await (const { timeMs, values, line } of noting(rows, span)) {
    count += 1
    if (timeMs <= before) faults.push({ row: line, reason: 'the time is not after that of the row above' })
    before = timeMs
    if (readings.length > mostAuxiliary) {
      faults.push({ row: line, reason: `more than ${mostAuxiliary} values: cut the file into parts` })
      break
    }
    values.forEach((value, n) => {
      const kind = kinds[n]
      if (value === null || !kind) return
      if (kind !== 'tide' && timeMs > latest) faults.push({ row: line, reason: 'a measured value lies in the future' })
      else readings.push({ kind, at: new Date(timeMs).toISOString(), value })
    })
    if (faults.length >= 100) break
  }
  if (readings.length === 0 && faults.length === 0) faults.push({ row: null, reason: 'there are no values' })
  const counts = { rows: count, minutes: 0, stored: 0, repeated: 0, conflicting: 0 }
  if (faults.length > 0) return reportOf(counts, span, faults.slice(0, 100))
  const taking = { stationId: file.stationId, readings, source: 'file', personId: file.personId } as const
  const counted = ({ stored, repeated, replaced }: Awaited<ReturnType<typeof foretellAuxiliary>>): UploadReport =>
    reportOf({ ...counts, stored, repeated, conflicting: replaced }, span, [])
  if (order.act === 'check') return counted(await foretellAuxiliary(taking))
  const { outcome } = await importAuxiliary(parts, taking, {
    fileName: file.fileName,
    fileHash: file.fileHash,
    noteStored: (importId, stored, transaction) =>
      noteUpload(parts, file.id, { state: 'stored', importId, report: counted(stored) }, transaction),
  })
  return counted(outcome)
}
