/** What a shared schema finds wrong with a form, by path, in words for people. Pure. */
import type { z } from 'zod'

type Issue = z.ZodError['issues'][number]

/** `perUnit`: by path, how many of the schema's unit go into one of the form's (60: typed in minutes, kept in seconds). */
export function faultsOf(error: z.ZodError, perUnit: Record<string, number> = {}): Record<string, string> {
  const faults: Record<string, string> = {}
  for (const issue of error.issues) {
    const path = issue.path.join('.')
    faults[path] ??= faultWords(issue, perUnit[path] ?? 1)
  }
  return faults
}

function faultWords(issue: Issue, per: number): string {
  const figure = (value: number | bigint): string => String(Math.round((Number(value) / per) * 1e4) / 1e4)
  if (issue.code === 'invalid_type') return issue.expected === 'string' ? 'is needed' : 'must be a number'
  if (issue.code === 'too_small') {
    if (issue.origin !== 'number' && issue.origin !== 'int') return ownWords(issue.message) ?? 'is needed'
    return issue.inclusive === false
      ? `must be more than ${figure(issue.minimum)}`
      : `must be at least ${figure(issue.minimum)}`
  }
  if (issue.code === 'too_big') {
    if (issue.origin !== 'number' && issue.origin !== 'int') return `at most ${String(issue.maximum)} characters`
    return `must be at most ${figure(issue.maximum)}`
  }
  return ownWords(issue.message) ?? 'does not fit'
}

/** Words that the schema brings itself; those of the library are none for people. */
const ownWords = (message: string): string | null => (/^(Invalid|Too |Unrecognized)/.test(message) ? null : message)
