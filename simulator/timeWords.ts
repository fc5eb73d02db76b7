/** Spans and moments as they are written on the command line. */
import { UsageError } from './usageError.ts'

const unitMilliseconds: Record<string, number> = { s: 1000, m: 60_000, h: 3_600_000, d: 86_400_000 }

/** `25m`, `90s`, `6h`, `2d` in milliseconds. */
export function parseSpan(text: string, option: string): number {
  const match = /^(\d+(?:\.\d+)?)([smhd])$/.exec(text)
  if (!match) throw new UsageError(`--${option}: "${text}" is no span of time; write 90s, 25m, 6h or 2d`)
  return Number(match[1]) * unitMilliseconds[match[2]]
}

/** `now`, `-6h` (a span ago) or an ISO time, in milliseconds since 1970 UTC. */
export function parseMoment(text: string, option: string, now: number): number {
  if (text === 'now') return now
  if (text.startsWith('-')) return now - parseSpan(text.slice(1), option)
  const moment = /^\d{4}-\d\d-\d\d(T.*)?$/.test(text) ? Date.parse(text) : NaN
  if (!Number.isNaN(moment)) return moment
  throw new UsageError(`--${option}: "${text}" is no moment; write now, -6h or 2026-12-01T06:00:00Z`)
}
