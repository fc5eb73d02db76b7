import { createReadStream } from 'node:fs'
import { pipeline } from 'node:stream/promises'
import { z } from 'zod'
import { logEntryDraft, logEntryView, logKind } from '../../shared/schemas/watchLog.ts'
import type { Parts } from '../config/parts.ts'
import { leadSeaNow } from '../presenters/seaNow.ts'
import { addAttachment, readAttachment, readEntry, readLog, writeEntry } from '../services/log.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const entryInPath = z.object({ entryId: idInPath })
const moment = z.iso.datetime()
const question = z.object({
  before: idInPath.optional(),
  kind: logKind.optional(),
  personId: idInPath.optional(),
  alertId: idInPath.optional(),
  from: moment.optional(),
  to: moment.optional(),
  text: z.string().max(200).optional(),
})
/** A photo over a slow line. */
const receivingDeadline = 5 * 60_000

export const logRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/log',
    action: 'log.read',
    summary: 'The watch log, newest first, by kind, person, alert, span and words',
    query: question,
    answer: z.object({ entries: z.array(logEntryView), next: z.number().int().nullable() }),
    handle: ({ query }) => readLog(query),
  }),
  route({
    method: 'get',
    path: '/api/log/:entryId',
    action: 'log.read',
    summary: 'One entry with what was added to it since',
    params: entryInPath,
    answer: logEntryView,
    handle: ({ params }) => readEntry(params.entryId),
  }),
  route({
    method: 'post',
    path: '/api/log',
    action: 'log.change',
    summary: 'A new entry, stamped with the lead station now; a correction names the entry that it corrects',
    body: logEntryDraft,
    answer: logEntryView,
    status: 201,
    async handle({ body, caller }) {
      const figures = await leadSeaNow(parts)
      return readEntry(await writeEntry(parts, { draft: body, personId: caller.person.id, figures }))
    },
  }),
  route({
    method: 'post',
    path: '/api/log/:entryId/attachments',
    action: 'log.change',
    summary: "A file to one's own entry: the body itself; picture, PDF or plain text by its content",
    params: entryInPath,
    query: z.object({ name: z.string().trim().min(1).max(200) }),
    answer: logEntryView,
    status: 201,
    deadlineMilliseconds: receivingDeadline,
    async handle({ params: { entryId }, query, caller, request }) {
      await addAttachment(parts, { entryId, name: query.name, source: request, personId: caller.person.id })
      return readEntry(entryId)
    },
  }),
  route({
    method: 'get',
    path: '/api/log/:entryId/attachments/:attachmentId',
    action: 'log.read',
    summary: 'A file of an entry, to be saved',
    params: entryInPath.extend({ attachmentId: idInPath }),
    media: 'application/octet-stream',
    deadlineMilliseconds: receivingDeadline,
    async handle({ params: { entryId, attachmentId }, response }) {
      const { name, mediaType, path } = await readAttachment(parts, entryId, attachmentId)
      response.set('Cache-Control', 'private, no-store')
      response.set('X-Content-Type-Options', 'nosniff')
      // Nothing that somebody brought in runs as a page of ours.
      response.set('Content-Security-Policy', "default-src 'none'; sandbox")
      response.attachment(name)
      response.type(mediaType)
      await pipeline(createReadStream(path), response)
    },
  }),
]
