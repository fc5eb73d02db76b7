/** Thresholds of the QARTOD tests as they are typed, and their way from and to the contract. Pure. */
import type { z } from 'zod'
import { qualityLimits } from '../../../shared/schemas/qualityLimits.ts'
import { defaultQualityLimits } from '../../../shared/waves/qualityLimits.ts'
import type { QualityLimits } from '../../../shared/waves/qualityLimits.ts'
import { numberIn } from '../limits/limitForm.ts'
import { faultsOf } from './formFaults.ts'

export type QualityContent = z.infer<typeof qualityLimits>
type SpanKey = 'instrumentSpan' | 'depthSpan' | 'periodSpan' | 'spreadSpan'
type FigureKey = Exclude<keyof QualityContent, SpanKey>

export interface QualityForm {
  figures: Record<FigureKey, string>
  /** Both ends empty where none is given. */
  spans: Record<SpanKey, { from: string; to: string }>
}

/** `per`: how the figure is typed. */
export const qualityFigures: Record<FigureKey, { label: string; unit: string; per: number }> = {
  suspectCompleteness: { label: 'Sensor suspect below', unit: '% of readings', per: 0.01 },
  segmentShift: { label: 'Level may shift within a window by', unit: 'm or dbar', per: 1 },
  acceleration: { label: 'Greatest acceleration', unit: '% of gravity', per: 0.01 },
  suspectDeviation: { label: 'Signal suspect below, one sigma', unit: 'm or dbar', per: 1 },
  failDeviation: { label: 'Signal lost below, one sigma', unit: 'm or dbar', per: 1 },
  neighbourLevel: { label: 'Level off its neighbours', unit: 'm', per: 1 },
  neighbourHeight: { label: 'Height off its neighbours', unit: '%', per: 0.01 },
  greatestHeightShare: { label: 'Greatest height', unit: '% of depth', per: 0.01 },
  lowFrequencyShare: { label: 'Energy below 0.05 Hz', unit: '%', per: 0.01 },
  tailShare: { label: 'A tail may add to the height', unit: '%', per: 0.01 },
  heightChange: { label: 'Height changes in half an hour by', unit: 'm', per: 1 },
  heightChangeShare: { label: 'and by', unit: '% of itself', per: 0.01 },
  periodChange: { label: 'Peak period changes by', unit: 's', per: 1 },
  headingChange: { label: 'Heading changes by', unit: '°', per: 1 },
  recordDeviations: { label: 'Off the mean of the last days by', unit: 'σ', per: 1 },
  suspectRepeats: { label: 'Same height suspect after', unit: 'windows', per: 1 },
  failRepeats: { label: 'Same height fails after', unit: 'windows', per: 1 },
}

export const qualitySpans: Record<SpanKey, { label: string; unit: string; mayBeEmpty: boolean }> = {
  instrumentSpan: { label: 'Instrument reads', unit: 'm or dbar', mayBeEmpty: true },
  depthSpan: { label: 'Still water is', unit: 'm deep', mayBeEmpty: true },
  periodSpan: { label: 'Periods are', unit: 's', mayBeEmpty: false },
  spreadSpan: { label: 'Spread is', unit: '°', mayBeEmpty: false },
}

const typed = (value: number): string => String(Math.round(value * 1e6) / 1e6)
const keysOf = <K extends string>(record: Record<K, unknown>): K[] => Object.keys(record) as K[]

export function qualityFormOf(limits: QualityLimits = defaultQualityLimits): QualityForm {
  const figure = (key: FigureKey): string => typed(limits[key] / qualityFigures[key].per)
  const span = (key: SpanKey): { from: string; to: string } => {
    const ends = limits[key]
    return ends ? { from: typed(ends[0]), to: typed(ends[1]) } : { from: '', to: '' }
  }
  return {
    figures: {
      ...{ suspectCompleteness: figure('suspectCompleteness'), segmentShift: figure('segmentShift') },
      ...{ acceleration: figure('acceleration'), suspectDeviation: figure('suspectDeviation') },
      ...{ failDeviation: figure('failDeviation'), neighbourLevel: figure('neighbourLevel') },
      ...{ neighbourHeight: figure('neighbourHeight'), greatestHeightShare: figure('greatestHeightShare') },
      ...{ lowFrequencyShare: figure('lowFrequencyShare'), tailShare: figure('tailShare') },
      ...{ heightChange: figure('heightChange'), heightChangeShare: figure('heightChangeShare') },
      ...{ periodChange: figure('periodChange'), headingChange: figure('headingChange') },
      ...{ recordDeviations: figure('recordDeviations'), suspectRepeats: figure('suspectRepeats') },
      failRepeats: figure('failRepeats'),
    },
    spans: {
      ...{ instrumentSpan: span('instrumentSpan'), depthSpan: span('depthSpan') },
      ...{ periodSpan: span('periodSpan'), spreadSpan: span('spreadSpan') },
    },
  }
}

/** Faults by the names of the contract, `periodSpan` and `acceleration`. */
export function qualityOf(form: QualityForm): { quality: QualityContent | null; faults: Record<string, string> } {
  const figures = keysOf(qualityFigures).map((key) => {
    const value = numberIn(form.figures[key]) * qualityFigures[key].per
    return [key, Math.round(value * 1e9) / 1e9]
  })
  const spans = keysOf(qualitySpans).map((key) => {
    const { from, to } = form.spans[key]
    const isEmpty = from.trim() === '' && to.trim() === '' && qualitySpans[key].mayBeEmpty
    return [key, isEmpty ? null : [numberIn(from), numberIn(to)]]
  })
  const parsed = qualityLimits.safeParse(Object.fromEntries([...figures, ...spans]))
  if (parsed.success) return { quality: parsed.data, faults: {} }
  const perUnit = Object.fromEntries(keysOf(qualityFigures).map((key) => [key, qualityFigures[key].per]))
  const faults: Record<string, string> = {}
  for (const [path, words] of Object.entries(faultsOf(parsed.error, perUnit))) faults[path.split('.')[0]] ??= words
  return { quality: null, faults }
}

/** What differs, in words; undefined stands for the usual thresholds. */
export function qualityChanges(before: QualityLimits | undefined, after: QualityLimits | undefined): string[] {
  const [old, now] = [qualityFormOf(before), qualityFormOf(after)]
  const span = ({ from, to }: { from: string; to: string }): string => (from === '' ? 'not given' : `${from} to ${to}`)
  return [
    ...keysOf(qualityFigures)
      .filter((key) => old.figures[key] !== now.figures[key])
      .map(
        (key) => `${qualityFigures[key].label} ${old.figures[key]} to ${now.figures[key]} ${qualityFigures[key].unit}`,
      ),
    ...keysOf(qualitySpans)
      .filter((key) => span(old.spans[key]) !== span(now.spans[key]))
      .map(
        (key) =>
          `${qualitySpans[key].label}: ${span(old.spans[key])}, now ${span(now.spans[key])} ${qualitySpans[key].unit}`,
      ),
  ]
}
