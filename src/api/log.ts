import { z } from 'zod'
import { logEntryView } from '../../shared/schemas/watchLog.ts'
import type { LogEntryDraft, LogEntryView, LogKind } from '../../shared/schemas/watchLog.ts'
import { request } from './request.ts'
import { sendFile } from './sendFile.ts'
import type { FileSending } from './sendFile.ts'

export interface LogFilter {
  kind?: LogKind
  personId?: number
  alertId?: number
  from?: string
  to?: string
  text?: string
}

const page = z.object({ entries: z.array(logEntryView), next: z.number().int().nullable() })

export function readLog(filter: LogFilter, before?: number): Promise<z.infer<typeof page>> {
  const asked = Object.entries({ ...filter, before }).flatMap(([name, value]) =>
    value === undefined || value === '' ? [] : [[name, String(value)]],
  )
  return request('GET', `/api/log?${new URLSearchParams(asked)}`, page)
}

export const writeEntry = (draft: LogEntryDraft): Promise<LogEntryView> =>
  request('POST', '/api/log', logEntryView, draft)

export const attach = (
  entryId: number,
  file: File,
  sending: Pick<FileSending, 'onSent' | 'signal'>,
): Promise<LogEntryView> => {
  const path = `/api/log/${entryId}/attachments?${new URLSearchParams({ name: file.name })}`
  return sendFile({ ...sending, path, file }, logEntryView)
}

export const attachmentPath = (entryId: number, attachmentId: number): string =>
  `/api/log/${entryId}/attachments/${attachmentId}`
