/** Files on their way in: received, looked at, ordered to be checked or stored, thrown away. */
import { readdir, rm } from 'node:fs/promises'
import { join } from 'node:path'
import type { Readable } from 'node:stream'
import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import type { UploadLayout, UploadReport, UploadView } from '../../shared/schemas/stationSetUpUploads.ts'
import type { Parts } from '../config/parts.ts'
import { Station, Upload } from '../models/index.ts'
import { recordAudit } from './audit.ts'
import { addJob } from './longJobs.ts'
import { notFound, Refused } from './problems.ts'
import { inTransaction } from './transaction.ts'
import { presentUpload } from './uploads/present.ts'
import { receiveFile, uploadsFolder } from './uploads/receive.ts'

export { columnsFor } from './uploads/present.ts'
export { fileLines, LineTooLong } from './uploads/fileLines.ts'
export { largestFile } from './uploads/receive.ts'

export const uploadJobKind = 'takeInFile'
const keptForMs = 7 * 24 * 3_600_000

export interface UploadOrder {
  stationId: number
  kind: 'readings' | 'auxiliary'
  fileName: string
  source: Readable
  personId: number
}

export async function receiveUpload(parts: Parts, order: UploadOrder): Promise<UploadView> {
  const { stationId, kind, fileName, personId } = order
  if (!(await Station.findByPk(stationId))) throw notFound('station', stationId)
  const file = await receiveFile(parts, order.source)
  const now = parts.clock.now()
  const upload = await inTransaction(parts.sequelize, async (transaction) => {
    const row = await Upload.create(
      { stationId, kind, fileName: fileName.slice(0, 255), ...file, state: 'received', layout: null, report: null, jobId: null, importId: null, personId, createdAt: now, updatedAt: now, retiredAt: null }, // prettier-ignore
      { transaction },
    )
    const change = { personId, action: 'upload.receive', entity: 'upload', entityId: row.id }
    await recordAudit(parts, { ...change, after: { stationId, fileName, bytes: file.bytes } }, transaction)
    return row
  })
  return presentUpload(parts, upload)
}

export async function listUploads(parts: Parts, stationId: number): Promise<UploadView[]> {
  if (!(await Station.findByPk(stationId))) throw notFound('station', stationId)
  const uploads = await Upload.findAll({ where: { stationId, retiredAt: null }, order: [['id', 'DESC']] })
  return Promise.all(uploads.map((upload) => presentUpload(parts, upload)))
}

export async function readUpload(parts: Parts, uploadId: number): Promise<UploadView> {
  return presentUpload(parts, await rowOf(uploadId))
}

/** Ordered as a long job; a file that is under work, or stored, is refused. */
export async function orderUpload(
  parts: Parts,
  { uploadId, act, layout, personId }: { uploadId: number; act: 'check' | 'store'; layout: UploadLayout; personId: number }, // prettier-ignore
): Promise<UploadView> {
  const upload = await rowOf(uploadId)
  if (busy.includes(upload.state)) throw isBusy(upload.state)
  const title = `${act === 'check' ? 'Checking' : 'Storing'} ${upload.fileName}`.slice(0, 200)
  const state = act === 'check' ? 'checking' : 'storing'
  // Whoever is quicker has it: the other finds it busy.
  const [taken] = await Upload.update({ state, layout, report: null, updatedAt: parts.clock.now() }, { where: { id: uploadId, state: { [Op.notIn]: busy }, retiredAt: null } }) // prettier-ignore
  if (taken === 0) throw isBusy((await rowOf(uploadId)).state)
  const jobId = await addJob(parts, { kind: uploadJobKind, title, parameters: { uploadId, act }, personId })
  await upload.update({ jobId })
  await upload.reload()
  parts.bus.publish('upload.ordered', { uploadId })
  return presentUpload(parts, upload)
}

const busy: Upload['state'][] = ['checking', 'storing', 'stored']

export async function discardUpload(parts: Parts, uploadId: number, personId: number): Promise<void> {
  const upload = await rowOf(uploadId)
  if (upload.state === 'checking' || upload.state === 'storing') throw isBusy(upload.state)
  await inTransaction(parts.sequelize, async (transaction) => {
    await upload.update({ retiredAt: parts.clock.now() }, { transaction })
    await recordAudit(parts, { personId, action: 'upload.discard', entity: 'upload', entityId: uploadId }, transaction)
  })
  await rm(join(uploadsFolder(parts), upload.storedAs), { force: true })
}

export interface UploadFile {
  id: number
  stationId: number
  kind: 'readings' | 'auxiliary'
  fileName: string
  path: string
  bytes: number
  fileHash: Buffer
  layout: UploadLayout
  personId: number | null
  isStored: boolean
}

/** What the work needs to know; null for a file that is gone. */
export async function uploadFile(parts: Pick<Parts, 'environment'>, uploadId: number): Promise<UploadFile | null> {
  const row = await Upload.findByPk(uploadId)
  if (!row?.layout || row.retiredAt) return null
  const { id, stationId, kind, fileName, fileHash, layout, personId, state } = row
  const path = join(uploadsFolder(parts), row.storedAs)
  return { id, stationId, kind, fileName, path, bytes: Number(row.bytes), fileHash, layout, personId, isStored: state === 'stored' } // prettier-ignore
}

/** Where the work ended; `stored` within the transaction that stores. */
export async function noteUpload(
  { clock }: Pick<Parts, 'clock'>,
  uploadId: number,
  outcome: { state: Upload['state']; report: UploadReport | null; importId?: number },
  transaction?: Transaction,
): Promise<void> {
  await Upload.update({ ...outcome, updatedAt: clock.now() }, { where: { id: uploadId }, ...(transaction && { transaction }) }) // prettier-ignore
}

/** The work of an order was cancelled, perhaps before it began. */
export async function noteCalledOff({ clock }: Pick<Parts, 'clock'>, jobId: number): Promise<void> {
  await Upload.update(
    { state: 'cancelled', updatedAt: clock.now() },
    { where: { jobId, state: ['checking', 'storing'] } },
  )
}

/** The file itself is not needed any more. */
export const removeFile = (file: UploadFile): Promise<void> => rm(file.path, { force: true })

/** Files that nothing waits for, and those that waited for a week. */
export async function sweepUploads(parts: Pick<Parts, 'environment' | 'clock'>): Promise<void> {
  const now = parts.clock.now()
  const oldest = new Date(now.getTime() - keptForMs)
  await Upload.update({ retiredAt: now }, { where: { retiredAt: null, updatedAt: { [Op.lt]: oldest }, state: { [Op.notIn]: ['checking', 'storing'] } } }) // prettier-ignore
  const wanted = await Upload.findAll({ where: { retiredAt: null, state: { [Op.ne]: 'stored' } } })
  const names = new Set(wanted.map(({ storedAs }) => storedAs))
  const folder = uploadsFolder(parts)
  const files = await readdir(folder).catch(() => [])
  for (const file of files) if (!names.has(file)) await rm(join(folder, file), { force: true })
}

async function rowOf(uploadId: number): Promise<Upload> {
  const upload = await Upload.findByPk(uploadId)
  if (!upload || upload.retiredAt) throw notFound('upload', uploadId)
  return upload
}

const isBusy = (state: Upload['state']): Refused =>
  new Refused({
    status: 409,
    code: state === 'stored' ? 'upload.stored' : 'upload.busy',
    title: state === 'stored' ? 'Already stored' : 'Under work',
    detail: state === 'stored' ? 'The file is stored; undo its import instead.' : 'The file is being worked on: wait, or cancel the work.', // prettier-ignore
  })
