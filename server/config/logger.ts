/** One JSON line an event. Secrets never reach it: what carries them is cut out by name. */
import pino from 'pino'
import type { DestinationStream, Logger } from 'pino'
import { loggedError } from './loggedError.ts'

export type { Logger }

const secretNames = ['password', 'passwordHash', 'token', 'secret', 'key', 'authorization', 'cookie', 'jwtSecret']

export const redactedPaths = [
  ...secretNames.flatMap((name) => [name, `*.${name}`, `*.*.${name}`]),
  'req.headers.authorization',
  'req.headers.cookie',
  'res.headers["set-cookie"]',
]

export function createLogger(level: string, destination?: DestinationStream): Logger {
  const options = {
    level,
    base: null,
    timestamp: pino.stdTimeFunctions.isoTime,
    formatters: { level: (label: string) => ({ level: label }) },
    redact: { paths: redactedPaths, censor: '[cut out]' },
    serializers: { error: loggedError, err: loggedError },
  }
  return destination ? pino(options, destination) : pino(options)
}
