/** What a draft changes against the version in force, in words. Pure. */
import { conditionWords, spanWords } from '../../../shared/alerts/describe.ts'
import { valueWords } from '../../../shared/alerts/describe.ts'
import { quantityOf } from '../../../shared/alerts/quantities.ts'
import type { LimitContent } from '../../../shared/schemas/limit.ts'
import { age } from '../../../shared/units.ts'

const same = (a: unknown, b: unknown): boolean => JSON.stringify(a) === JSON.stringify(b)

/** `clear below changed from 0.90 m to 0.85 m`; empty where nothing changed. */
export function changesIn(before: LimitContent, after: LimitContent): string[] {
  const changes: string[] = []
  const note = (name: string, from: string, to: string): void => {
    changes.push(`${name} changed from ${from} to ${to}`)
  }
  const [a, b] = [before.condition, after.condition]
  const [first, next] = [a.comparisons[0], b.comparisons[0]]
  const isLike = a.comparisons.length === b.comparisons.length && same(a.comparisons.slice(1), b.comparisons.slice(1))
  if (
    isLike &&
    first.kind === next.kind &&
    first.kind !== 'sector' &&
    next.kind !== 'sector' &&
    first.quantity === next.quantity
  ) {
    const quantity = quantityOf(first.quantity)
    const [raises, clears] = first.kind === 'above' ? ['above', 'below'] : ['below', 'above']
    if (first.raise !== next.raise)
      note(`raise ${raises}`, valueWords(quantity, first.raise), valueWords(quantity, next.raise))
    if (first.clear !== next.clear)
      note(`clear ${clears}`, valueWords(quantity, first.clear), valueWords(quantity, next.clear))
    if (first.kind === 'above' && next.kind === 'above' && first.riseOverSeconds !== next.riseOverSeconds)
      changes.push('the span of the rise changed')
  } else if (!same(a.comparisons, b.comparisons)) note('condition', conditionWords(a), conditionWords(b))
  if (a.onDelaySeconds !== b.onDelaySeconds) note('raise after', age(a.onDelaySeconds), age(b.onDelaySeconds))
  if (a.offDelaySeconds !== b.offDelaySeconds) note('clear after', age(a.offDelaySeconds), age(b.offDelaySeconds))
  if (!same(a.when, b.when)) changes.push(`hours and season: ${b.when ? spanWords(b.when) : 'always'}`)
  if (a.clearSigmas !== b.clearSigmas) note('± counted on clearing', String(a.clearSigmas), String(b.clearSigmas))
  if (a.worstQuality !== b.worstQuality) changes.push('quality rule changed')
  if (a.latches !== b.latches) changes.push(b.latches ? 'stays until reset' : 'no longer stays until reset')
  if (before.priority !== after.priority) note('priority', before.priority, after.priority)
  if (!same(before.recipients, after.recipients)) changes.push('who is told changed')
  if (!same(before.schedule, after.schedule)) changes.push('schedule changed')
  if (before.title !== after.title) changes.push('title changed')
  for (const [key, name] of [
    ['note', 'note'],
    ['toCheck', 'what to check'],
    ['reviewOn', 'review date'],
    ['isPublished', 'publication'],
  ] as const)
    // prettier-ignore
    if (before[key] !== after[key]) changes.push(`${name} changed`)
  return changes
}
