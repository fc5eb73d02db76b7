/**
 * Every route is declared once: method, path, what it asks of `shared/access`, shapes of what comes in and goes out.
 * Authorisation, validation and the OpenAPI document all come from that declaration.
 */
import type { Application, Request, Response } from 'express'
import type { z } from 'zod'
import { actions } from '../../shared/access.ts'
import type { Action } from '../../shared/access.ts'
import { authorize } from '../middleware/authorize.ts'
import { withDeadline } from '../middleware/deadline.ts'
import { invalidInput, notSignedIn } from '../services/problems.ts'
import type { Caller } from '../services/sessions.ts'

type Shape = z.ZodType
type Taken<S extends Shape | undefined> = S extends Shape ? z.output<S> : undefined

/** What a handler is given: checked input, and who asks. */
export interface Asked<P extends Shape | undefined, Q extends Shape | undefined, B extends Shape | undefined> {
  params: Taken<P>
  query: Taken<Q>
  body: Taken<B>
  /** Null: nobody is signed in. */
  visitor: Caller | null
  /** Who is signed in; throws the 401 where nobody is. */
  readonly caller: Caller
  request: Request
  /** For headers and cookies; the answer itself is what the handler returns. */
  response: Response
}

export interface Declaration<
  P extends Shape | undefined,
  Q extends Shape | undefined,
  B extends Shape | undefined,
  A extends Shape | undefined,
> {
  method: 'get' | 'post' | 'put' | 'patch' | 'delete'
  /** As express writes it: `/api/stations/:stationId`. */
  path: string
  action: Action
  /** One line for the API's document. */
  summary: string
  /** Shapes of the path's parameters, the query (both arrive as text) and the JSON body. */
  params?: P
  query?: Q
  body?: B
  /** Shape of the answer; what it does not name never leaves the server. Without it: 204. */
  answer?: A
  /** Type of an answer that is text instead of JSON, such as `application/atom+xml`. */
  media?: string
  /** Of the answer when all is well; 200, or 204 without an answer. */
  status?: number
  /** After so long the answer is 503. */
  deadlineMilliseconds?: number
  handle(asked: Asked<P, Q, B>): Promise<A extends Shape ? z.input<A> : void>
}

export interface Route {
  method: 'get' | 'post' | 'put' | 'patch' | 'delete'
  path: string
  action: Action
  summary: string
  params: Shape | undefined
  query: Shape | undefined
  body: Shape | undefined
  answer: Shape | undefined
  media: string | undefined
  status: number
  /** Who, may they, shape, one call, present. */
  serve(request: Request, response: Response): Promise<void>
}

const usualDeadline = 5_000

export function route<
  P extends Shape | undefined = undefined,
  Q extends Shape | undefined = undefined,
  B extends Shape | undefined = undefined,
  A extends Shape | undefined = undefined,
>(declared: Declaration<P, Q, B, A>): Route {
  const { method, path, action, summary, params, query, body, answer, media } = declared
  const status = declared.status ?? (answer ? 200 : 204)
  async function serve(request: Request, response: Response): Promise<void> {
    const visitor = request.visitor ?? null
    authorize(visitor, action)
    const asked: Asked<P, Q, B> = {
      params: taken(params, request.params, 'params.'),
      query: taken(query, request.query, 'query.'),
      body: taken(body, request.body ?? {}, ''),
      visitor,
      get caller() {
        if (!visitor) throw notSignedIn()
        return visitor
      },
      request,
      response,
    }
    const result = await withDeadline(declared.handle(asked), declared.deadlineMilliseconds ?? usualDeadline)
    // A file was sent by its handler.
    if (response.writableEnded) return
    response.status(status)
    if (!response.get('Cache-Control')) response.set('Cache-Control', 'no-store')
    if (media) response.type(media).send(String(result))
    else if (answer) response.json(answer.parse(result))
    else response.end()
  }
  return { method, path, action, summary, params, query, body, answer, media, status, serve }
}

/** Checks one part of the input; the faults name it by path, those of the body as a form names its fields. */
function taken<S extends Shape | undefined>(shape: S | undefined, value: unknown, prefix: string): Taken<S> {
  const parsed = shape?.safeParse(value)
  if (parsed && !parsed.success) {
    throw invalidInput(
      parsed.error.issues.map((issue) => ({ path: prefix + issue.path.join('.'), message: issue.message })),
    )
  }
  return parsed?.data as Taken<S>
}

/** Mounts the routes; one that asks for nothing in `shared/access`, or that stands there twice, stops the start. */
export function mountRoutes(app: Application, routes: Route[]): void {
  const seen = new Set<string>()
  for (const { method, path, action, serve } of routes) {
    const name = `${method.toUpperCase()} ${path}`
    if (!actions.includes(action)) throw new Error(`${name} asks for ${action}, which has no row in shared/access`)
    if (seen.has(name)) throw new Error(`${name} is declared twice`)
    seen.add(name)
    app[method](path, serve)
  }
}
