/**
 * The watch log: entries are added and never altered; a correction is a new entry that names the old one. Times ISO 8601 UTC. The program
 * stamps each entry of a person with the lead station's figures at that moment.
 *
 * GET  /api/log?before=&kind=&personId=&alertId=&from=&to=&text=  log.read    -> { entries: logEntryView[], next } newest first
 * GET  /api/log/:entryId                                          log.read    -> logEntryView
 * POST /api/log                                                   log.change  logEntryDraft -> 201 logEntryView
 * POST /api/log/:entryId/attachments?name=                        log.change  the file itself as application/octet-stream, by who wrote the entry
 *                                                                             -> 201 logEntryView
 * GET  /api/log/:entryId/attachments/:attachmentId                log.read    -> the file, to be saved and not shown
 * Live: room `watch`, kind `logEntry`, body logEntryView; also again when a correction or a file was added to it.
 */
import { z } from 'zod'
import { missingFigure, stationFigure } from './bulletin.ts'
import { alertState, personName, priority } from './limit.ts'

const time = z.iso.datetime()

/** What a line is about; `entry` was written by a person, `watch` by taking over and handing over. */
export const logKind = z.enum([
  'entry',
  'watch',
  'alert',
  'message',
  'limit',
  'place',
  'notice',
  'bulletin',
  'drill',
  'station',
  'system',
])
export type LogKind = z.infer<typeof logKind>

export const logEntryDraft = z.strictObject({
  text: z.string().trim().min(1, 'write something').max(4000),
  correctsId: z.number().int().positive().nullable().default(null),
  alertId: z.number().int().positive().nullable().default(null),
  placeId: z.number().int().positive().nullable().default(null),
})
export type LogEntryDraft = z.infer<typeof logEntryDraft>

/** The mark of an alert as it stood at that line; it never changes afterwards. */
export const logMark = z.object({ priority, state: alertState })

export const logAttachment = z.object({
  id: z.number().int(),
  name: z.string(),
  mediaType: z.string(),
  bytes: z.number().int(),
  sha256: z.string(),
})

const otherEntry = z.object({ id: z.number().int(), at: time })

export const logEntryView = z.object({
  id: z.number().int(),
  at: time,
  kind: logKind,
  /** Null: the program itself. */
  person: personName.nullable(),
  text: z.string(),
  /** Of the lead station when it was written; null for the program's own lines. */
  figures: z.discriminatedUnion('kind', [stationFigure, missingFigure]).nullable(),
  mark: logMark.nullable(),
  corrects: otherEntry.nullable(),
  correctedBy: z.array(otherEntry),
  /** Resources it speaks of, such as `{ alertId: 418 }`. */
  links: z.record(z.string(), z.union([z.number(), z.string()])),
  attachments: z.array(logAttachment),
})
export type LogEntryView = z.infer<typeof logEntryView>

/** Of an attachment; more than a photo of a phone. */
export const largestAttachment = 12 * 1024 * 1024
export const mostAttachments = 8
