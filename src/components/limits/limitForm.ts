/** The editor's own form of a limit, in the units people read, and its way from and to the contract. Pure. */
import { quantityOf } from '../../../shared/alerts/quantities.ts'
import { limitContent } from '../../../shared/schemas/limit.ts'
import type { Comparison, LimitContent, Priority, QuantityKey, TimeSpan } from '../../../shared/schemas/limit.ts'

export interface ComparisonForm {
  quantity: QuantityKey
  kind: 'above' | 'below' | 'sector' | 'rise'
  /** As typed, in the quantity's unit. */
  raise: string
  clear: string
  riseMinutes: string
  from: string
  to: string
  deadBand: string
}

export interface SpanForm {
  hasHours: boolean
  from: string
  to: string
  days: number[]
  hasSeason: boolean
  seasonFrom: string
  seasonTo: string
}

export interface StepForm {
  afterMinutes: string
  listId: number
}

export interface LimitForm {
  title: string
  comparisons: ComparisonForm[]
  when: SpanForm
  raiseAfter: string
  clearAfter: string
  clearSigmas: number
  worstQuality: 1 | 3
  latches: boolean
  priority: Priority
  steps: StepForm[]
  remindMinutes: string
  schedule: SpanForm
  note: string
  toCheck: string
  reviewOn: string
  isPublished: boolean
}

/** A number as people type it: comma or point, true minus; NaN for anything else. */
export function numberIn(typed: string): number {
  const plain = typed.trim().replace(',', '.').replace('\u2212', '-')
  return /^-?\d+(\.\d+)?$/.test(plain) ? Number(plain) : NaN
}

const written = (value: number, quantity: QuantityKey): string => {
  const { toUnit, decimals } = quantityOf(quantity)
  return (value * toUnit).toFixed(decimals)
}
const minutes = (seconds: number): string => String(Math.round((seconds / 60) * 100) / 100)
const seconds = (typed: string): number => Math.round(numberIn(typed) * 60)

const everyDay = [1, 2, 3, 4, 5, 6, 7]

export function spanForm(span: TimeSpan | null): SpanForm {
  return {
    hasHours: span?.hours != null,
    from: span?.hours?.from ?? '06:00',
    to: span?.hours?.to ?? '22:00',
    days: [...(span?.hours?.days ?? everyDay)],
    hasSeason: span?.season != null,
    seasonFrom: span?.season?.from ?? '05-15',
    seasonTo: span?.season?.to ?? '09-15',
  }
}

export function spanOf(form: SpanForm): TimeSpan | null {
  if (!form.hasHours && !form.hasSeason) return null
  return {
    hours: form.hasHours ? { from: form.from, to: form.to, days: [...form.days].sort((a, b) => a - b) } : null,
    season: form.hasSeason ? { from: form.seasonFrom, to: form.seasonTo } : null,
  }
}

export function comparisonForm(comparison: Comparison): ComparisonForm {
  const { quantity } = comparison
  const empty = { raise: '', clear: '', riseMinutes: '60', from: '200', to: '290', deadBand: '10' }
  if (comparison.kind === 'sector')
    return {
      ...{ quantity, kind: 'sector', ...empty },
      ...{ from: String(comparison.from), to: String(comparison.to), deadBand: String(comparison.deadBand) },
    }
  const figures = { raise: written(comparison.raise, quantity), clear: written(comparison.clear, quantity) }
  if (comparison.kind === 'below') return { ...empty, ...figures, quantity, kind: 'below' }
  const rise = comparison.riseOverSeconds
  return {
    ...{ ...empty, ...figures, quantity },
    kind: rise === null ? 'above' : 'rise',
    riseMinutes: rise === null ? '60' : minutes(rise),
  }
}

export function comparisonOf(form: ComparisonForm): unknown {
  const { quantity } = form
  const { toUnit } = quantityOf(quantity)
  if (form.kind === 'sector')
    return {
      ...{ kind: 'sector', quantity, from: numberIn(form.from), to: numberIn(form.to) },
      deadBand: numberIn(form.deadBand),
    }
  const figures = { raise: numberIn(form.raise) / toUnit, clear: numberIn(form.clear) / toUnit }
  if (form.kind === 'below') return { kind: 'below', quantity, ...figures }
  const riseOverSeconds = form.kind === 'rise' ? seconds(form.riseMinutes) : null
  return { kind: 'above', quantity, ...figures, riseOverSeconds }
}

/** What a quantity is first compared by when it is chosen. */
export function firstComparison(quantity: QuantityKey): ComparisonForm {
  const { isCircular, decimals } = quantityOf(quantity)
  const isLow = quantity === 'usableSensors' || quantity === 'diskFree'
  const starts: Partial<Record<QuantityKey, [number, number]>> = {
    ...{ dataAge: [15, 14], usableSensors: [4, 4], diskFree: [10, 12], clockOffset: [1, 0.8], mailQueueAge: [10, 8] },
    ...{ arrayDisagreement: [0, 0], energyFlux: [40, 34] },
    ...{
      placeHeight: [2, 1.7],
      crossSea: [1, 0.85],
      alongSea: [1.5, 1.3],
      overtopping: [1, 0.8],
      longSwell: [0.08, 0.07],
    },
    ...{ largestVolume: [600, 500], breakerHeight: [1.5, 1.3], runUp: [1.5, 1.3], setUp: [0.3, 0.25] },
    longshoreCurrent: [0.5, 0.4],
  }
  const isPeriod = /[pP]eriod$/.test(quantity)
  const isSpeed = /[sS]peed$/.test(quantity)
  const [raise, clear] = starts[quantity] ?? (isPeriod ? [14, 13] : isSpeed ? [12, 11] : [2.5, 2.2])
  return {
    quantity,
    kind: isCircular ? 'sector' : isLow ? 'below' : 'above',
    raise: raise.toFixed(decimals),
    clear: clear.toFixed(decimals),
    riseMinutes: '60',
    ...{ from: '200', to: '290', deadBand: '10' },
  }
}

/** In the order given. */
export const quantitiesAmong = (told: QuantityKey[]) => told.map(quantityOf)

export function formOf(content: LimitContent): LimitForm {
  const { condition, recipients } = content
  return {
    title: content.title ?? '',
    comparisons: condition.comparisons.map(comparisonForm),
    when: spanForm(condition.when),
    raiseAfter: minutes(condition.onDelaySeconds),
    clearAfter: minutes(condition.offDelaySeconds),
    clearSigmas: condition.clearSigmas,
    worstQuality: condition.worstQuality,
    latches: condition.latches,
    priority: content.priority,
    steps: recipients.steps.flatMap(({ afterSeconds, listIds }) =>
      listIds.map((listId) => ({ afterMinutes: minutes(afterSeconds), listId })),
    ),
    remindMinutes: recipients.remindEverySeconds === null ? '' : minutes(recipients.remindEverySeconds),
    schedule: spanForm(content.schedule),
    note: content.note,
    toCheck: content.toCheck,
    reviewOn: content.reviewOn ?? '',
    isPublished: content.isPublished,
  }
}

export function newForm(): LimitForm {
  return {
    ...{ title: '', comparisons: [firstComparison('significantWaveHeight')], when: spanForm(null) },
    ...{ raiseAfter: '10', clearAfter: '30', clearSigmas: 1, worstQuality: 3, latches: false, priority: 'high' },
    ...{ steps: [], remindMinutes: '8', schedule: spanForm(null), note: '', toCheck: '', reviewOn: '' },
    isPublished: false,
  }
}

/** Lists with the same time are one step; steps stand in the order of their times. */
function stepsOf(steps: StepForm[]): { afterSeconds: number; listIds: number[] }[] {
  const byTime = new Map<number, number[]>()
  for (const { afterMinutes, listId } of steps) {
    const after = seconds(afterMinutes)
    byTime.set(after, [...(byTime.get(after) ?? []), listId])
  }
  return [...byTime].sort(([a], [b]) => a - b).map(([afterSeconds, listIds]) => ({ afterSeconds, listIds }))
}

/** Faults by path, such as `condition.comparisons.0.clear`, in words. */
export type FormResult = { content: LimitContent; faults: null } | { content: null; faults: Record<string, string> }

export function contentOf(form: LimitForm): FormResult {
  const parsed = limitContent.safeParse({
    title: form.title.trim() || null,
    condition: {
      comparisons: form.comparisons.map(comparisonOf),
      when: spanOf(form.when),
      onDelaySeconds: seconds(form.raiseAfter),
      offDelaySeconds: seconds(form.clearAfter),
      ...{ clearSigmas: form.clearSigmas, worstQuality: form.worstQuality, latches: form.latches },
    },
    priority: form.priority,
    recipients: {
      steps: stepsOf(form.steps),
      remindEverySeconds: form.remindMinutes.trim() === '' ? null : seconds(form.remindMinutes),
    },
    schedule: spanOf(form.schedule),
    ...{ note: form.note, toCheck: form.toCheck, reviewOn: form.reviewOn || null, isPublished: form.isPublished },
  })
  if (parsed.success) return { content: parsed.data, faults: null }
  const faults: Record<string, string> = {}
  for (const { path, code, message } of parsed.error.issues)
    faults[path.join('.')] ??= code === 'invalid_type' ? 'must be a number' : message.replace(/^Invalid input: /, '')
  return { content: null, faults }
}
