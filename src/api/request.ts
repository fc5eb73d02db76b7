/** One way to the server: own origin, session cookie, `X-Offing` header, answers checked by the shared schemas. */
import type { z } from 'zod'
import { problem } from '../../shared/schemas/problem.ts'
import { ContactError, ProblemError } from './problem.ts'

export type Method = 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE'

interface Listeners {
  /** Any answer is contact; `serverTimeMs` from its Date header, which counts whole seconds only. */
  answered(serverTimeMs: number | null): void
  /** The session is no longer valid. */
  unauthorized(): void
}

let listeners: Listeners = { answered: () => undefined, unauthorized: () => undefined }

/** Called once when the program starts; stores are told of what every answer carries. */
export function listenToAnswers(next: Listeners): void {
  listeners = next
}

/** Longer than the server lets any request take. */
const answerTimeoutMs = 30_000

export async function request<T extends z.ZodType>(
  method: Method,
  path: string,
  schema: T,
  body?: unknown,
  /** Of the row that is edited: the server refuses a change of an older one. */
  ifMatch?: number,
): Promise<z.infer<T>> {
  return accept(await send(method, path, body, ifMatch), path, schema)
}

/** What an answer says, in the form that is expected; throws what the server refused. */
export async function accept<T extends z.ZodType>(response: Response, path: string, schema: T): Promise<z.infer<T>> {
  const sentAt = Date.parse(response.headers.get('Date') ?? '')
  listeners.answered(Number.isNaN(sentAt) ? null : sentAt)
  const answer: unknown = response.status === 204 ? undefined : await readJson(response)
  if (!response.ok) throw refusal(response, path, answer)
  const parsed = schema.safeParse(answer)
  if (!parsed.success) throw new ContactError(`${path} answered in an unknown form`, { cause: parsed.error })
  return parsed.data
}

async function send(method: Method, path: string, body: unknown, ifMatch?: number): Promise<Response> {
  try {
    return await fetch(path, {
      method,
      credentials: 'same-origin',
      headers: {
        Accept: 'application/json',
        'X-Offing': '1',
        ...(body === undefined ? {} : { 'Content-Type': 'application/json' }),
        ...(ifMatch === undefined ? {} : { 'If-Match': `"${ifMatch}"` }),
      },
      body: body === undefined ? undefined : JSON.stringify(body),
      signal: AbortSignal.timeout(answerTimeoutMs),
    })
  } catch (error) {
    throw new ContactError(`no answer to ${method} ${path}`, { cause: error })
  }
}

async function readJson(response: Response): Promise<unknown> {
  try {
    return await response.json()
  } catch {
    return undefined
  }
}

function refusal(response: Response, path: string, answer: unknown): Error {
  const parsed = problem.safeParse(answer)
  if (!parsed.success) return new ContactError(`${path} answered ${response.status}`)
  if (response.status === 401 && path !== '/api/session') listeners.unauthorized()
  return new ProblemError(parsed.data)
}
