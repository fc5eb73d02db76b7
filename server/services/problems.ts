/** What a service refuses, with a stable code and the HTTP status that fits; the error handler gives it its shape. */
import type { Problem } from '../../shared/schemas/problem.ts'

export interface Refusal {
  status: number
  /** Stable, for programs: `resource.whatIsWrong`. */
  code: string
  title: string
  detail?: string
  errors?: Problem['errors']
  retryAfterSeconds?: number
  /** How the resource stands now, where somebody else was quicker. */
  current?: unknown
}

export class Refused extends Error {
  readonly refusal: Refusal

  constructor(refusal: Refusal) {
    super(refusal.detail ?? refusal.title)
    this.name = 'Refused'
    this.refusal = refusal
  }
}

/** `notFound('station', 12)`: 404 with code `station.notFound`. */
export const notFound = (resource: string, id: string | number): Refused =>
  new Refused({
    status: 404,
    code: `${resource}.notFound`,
    title: 'Not found',
    detail: `There is no ${resource} ${id}.`,
  })

export const notSignedIn = (): Refused =>
  new Refused({ status: 401, code: 'session.none', title: 'Not signed in', detail: 'Sign in to go on.' })

export const notAllowed = (): Refused =>
  new Refused({
    status: 403,
    code: 'access.notAllowed',
    title: 'Not allowed',
    detail: 'Your role does not allow this.',
  })

export const isReadOnly = (): Refused =>
  new Refused({
    status: 403,
    code: 'session.readOnly',
    title: 'Read-only',
    detail: 'You have been signed in for long: sign in again to change something.',
  })

export const needsSecondFactor = (): Refused =>
  new Refused({
    status: 403,
    code: 'session.secondFactorNeeded',
    title: 'A second factor is needed',
    detail: 'Administrators of this installation need a second factor: set yours up first.',
  })

/** Faults of an input, field by field. */
export const invalidInput = (errors: NonNullable<Problem['errors']>): Refused =>
  new Refused({ status: 422, code: 'request.invalid', title: 'The input cannot be used', errors })

export const databaseUnavailable = (): Refused =>
  new Refused({
    status: 503,
    code: 'database.unavailable',
    title: 'The database does not answer',
    detail: 'Nothing was lost. Try again in a moment.',
    retryAfterSeconds: 2,
  })

/** 412: somebody else was quicker; `version` is the one that holds now. */
export const changedMeanwhile = (resource: string, version: number, current?: unknown): Refused =>
  new Refused({
    status: 412,
    code: `${resource}.changedMeanwhile`,
    title: 'Changed meanwhile',
    detail: `Somebody changed it while you did: it is at version ${version} now. Look at it again before you save.`,
    ...(current !== undefined && { current }),
  })

/** 428: a change has to say which version it was made from. */
export const versionMissing = (): Refused =>
  new Refused({
    status: 428,
    code: 'request.versionMissing',
    title: 'The version is missing',
    detail: 'Send If-Match with the version that you changed, in quotes.',
  })
