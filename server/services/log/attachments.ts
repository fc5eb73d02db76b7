/**
 * Files beside lines of the log. What a file is, its first bytes say and not its name; it lies outside everything that is served and goes
 * out as something to be saved, never as something to be shown.
 */
import { createHash, randomUUID } from 'node:crypto'
import { mkdir, open, rename, rm } from 'node:fs/promises'
import { basename, join } from 'node:path'
import type { Readable } from 'node:stream'
import { largestAttachment, mostAttachments } from '../../../shared/schemas/watchLog.ts'
import type { Parts } from '../../config/parts.ts'
import { Attachment, LogEntry } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { notFound, Refused } from '../problems.ts'
import { inTransaction } from '../transaction.ts'
import { mediaTypeOf } from './mediaType.ts'

export interface AttachmentOrder {
  entryId: number
  name: string
  source: Readable
  personId: number
}

const folder = 'attachments'

const tooLarge = (): Refused => {
  const detail = `A file may have ${largestAttachment / 1024 / 1024} MiB at most. Make the photo smaller and try again.`
  return new Refused({ status: 413, code: 'attachment.tooLarge', title: 'Too large', detail })
}

/** Written to a name of its own first, so that a stop leaves nothing half that anybody could open. */
async function receive(source: Readable, path: string): Promise<{ bytes: number; sha256: string; head: Buffer }> {
  const hash = createHash('sha256')
  const file = await open(path, 'wx')
  let bytes = 0
  let head = Buffer.alloc(0)
  try {
    for await (const chunk of source) {
      const part = Buffer.from(chunk)
      bytes += part.length
      if (bytes > largestAttachment) throw tooLarge()
      if (head.length < 4096) head = Buffer.concat([head, part]).subarray(0, 4096)
      hash.update(part)
      await file.write(part)
    }
  } finally {
    await file.close()
  }
  return { bytes, sha256: hash.digest('hex'), head }
}

/** By who wrote the line alone. */
export async function addAttachment(parts: Parts, { entryId, name, source, personId }: AttachmentOrder): Promise<void> {
  await refuseStranger(entryId, personId)
  const directory = join(parts.environment.dataFolder, folder)
  await mkdir(directory, { recursive: true })
  const id = randomUUID()
  const arriving = join(directory, `${id}.part`)
  try {
    const { bytes, sha256, head } = await receive(source, arriving)
    const mediaType = bytes === 0 ? null : mediaTypeOf(head)
    if (mediaType === null) {
      const detail = 'It must be a JPEG, PNG or WebP picture, a PDF or plain text; its content is none of these.'
      throw new Refused({ status: 415, code: 'attachment.kind', title: 'Not a kind of file that is kept', detail })
    }
    await rename(arriving, join(directory, id))
    const row = { entryId, name: basename(name).slice(0, 200), mediaType, bytes, sha256, path: `${folder}/${id}` }
    await inTransaction(parts.sequelize, async (transaction) => {
      const added = await Attachment.create({ ...row, createdAt: parts.clock.now() }, { transaction })
      const audit = { action: 'attachment.add', entity: 'attachment', entityId: added.id, personId, after: row }
      await recordAudit(parts, audit, transaction)
    }).catch(async (error: unknown) => {
      await rm(join(directory, id), { force: true })
      throw error
    })
  } finally {
    await rm(arriving, { force: true })
  }
  parts.bus.publish('log.written', { entryIds: [entryId] })
}

async function refuseStranger(entryId: number, personId: number): Promise<void> {
  const entry = await LogEntry.findByPk(entryId)
  if (!entry) throw notFound('log entry', entryId)
  if (entry.personId !== personId) {
    const detail = 'Only who wrote the entry may add a file to it. Write an entry of your own.'
    throw new Refused({ status: 403, code: 'attachment.notYours', title: 'Not your entry', detail })
  }
  if ((await Attachment.count({ where: { entryId } })) >= mostAttachments) {
    const detail = `An entry has ${mostAttachments} files at most. Write another entry for more.`
    throw new Refused({ status: 409, code: 'attachment.tooMany', title: 'Too many files', detail })
  }
}

/** Throws the 404. `path` is absolute. */
export async function readAttachment(
  { environment }: Pick<Parts, 'environment'>,
  entryId: number,
  attachmentId: number,
): Promise<{ name: string; mediaType: string; path: string }> {
  const row = await Attachment.findOne({ where: { id: attachmentId, entryId } })
  if (!row) throw notFound('attachment', attachmentId)
  return { name: row.name, mediaType: row.mediaType, path: join(environment.dataFolder, row.path) }
}
