/** A file on its way to the server, with its progress: what `fetch` does not tell. */
import type { z } from 'zod'
import { ContactError } from './problem.ts'
import { accept } from './request.ts'

export interface FileSending {
  path: string
  file: Blob
  /** Share that has left this computer, 0 to 1. */
  onSent: (share: number) => void
  signal: AbortSignal
}

export async function sendFile<T extends z.ZodType>(sending: FileSending, schema: T): Promise<z.infer<T>> {
  return accept(await post(sending), sending.path, schema)
}

function post({ path, file, onSent, signal }: FileSending): Promise<Response> {
  return new Promise((resolve, reject) => {
    const sender = new XMLHttpRequest()
    const fail = (): void => reject(new ContactError(`no answer to POST ${path}`))
    sender.open('POST', path)
    sender.setRequestHeader('Accept', 'application/json')
    sender.setRequestHeader('X-Offing', '1')
    sender.setRequestHeader('Content-Type', 'text/csv')
    sender.upload.onprogress = ({ loaded, total }) => onSent(total > 0 ? loaded / total : 0)
    sender.onload = () => {
      const date = sender.getResponseHeader('Date')
      const headers: Record<string, string> = date ? { Date: date } : {}
      const body = sender.status === 204 ? null : sender.responseText
      resolve(new Response(body, { status: sender.status, headers }))
    }
    sender.onerror = fail
    sender.onabort = fail
    signal.addEventListener('abort', () => sender.abort(), { once: true })
    if (signal.aborted) return fail()
    sender.send(file)
  })
}
