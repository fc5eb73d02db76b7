/** Passphrases and codes asked for from within a session are counted as at the door, so that nobody can try them all. */
import type { Request } from 'express'
import type { Parts } from '../config/parts.ts'
import { Refused } from '../services/problems.ts'
import type { Caller } from '../services/sessions.ts'
import { throttleOf } from '../services/sessions/signInThrottle.ts'

/** Runs `work`; where it throws, the attempt counts as failed. */
export async function counted<Result>(
  parts: Parts,
  { caller, request }: { caller: Caller; request: Request },
  work: () => Promise<Result>,
): Promise<Result> {
  const throttle = throttleOf(parts)
  const address = request.ip ?? 'unknown'
  const wait = throttle.begin(caller.person.email, address)
  if (wait > 0) throw tooManyTries(wait)
  const result = await work()
  throttle.succeeded(caller.person.email, address)
  return result
}

const tooManyTries = (seconds: number): Refused =>
  new Refused({
    status: 429,
    code: 'session.tooManyTries',
    title: 'Too many tries',
    detail: `Wait ${Math.ceil(seconds)} s before the next try.`,
    retryAfterSeconds: seconds,
  })
