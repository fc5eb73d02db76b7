/** How a station is read and computed, as it is typed, and its way from and to the contract. Pure. */
import { stationSettingsDraft } from '../../../shared/schemas/stationSetUp.ts'
import type { StationSettingsDraft } from '../../../shared/schemas/stationSetUp.ts'
import type { StationSettingsContent } from '../../../shared/schemas/stationSettings.ts'
import { defaultEstimateSettings } from '../../../shared/waves/window.ts'
import { numberIn } from '../limits/limitForm.ts'
import { faultsOf } from './formFaults.ts'
import { qualityChanges, qualityFormOf, qualityOf } from './qualityForm.ts'
import type { QualityForm } from './qualityForm.ts'

export type EstimateKey = Exclude<keyof StationSettingsContent['estimate'], 'quality'>

export interface SectorForm {
  from: string
  to: string
}

export interface SettingsForm {
  sampleRate: string
  /** min */
  window: string
  /** s */
  hop: string
  grace: string
  land: SectorForm[]
  hasOpenSea: boolean
  openSea: SectorForm
  periodFrom: string
  periodTo: string
  estimate: Record<EstimateKey, string>
  /** Own thresholds of the quality tests; otherwise the usual ones. */
  hasQuality: boolean
  quality: QualityForm
}

/** Label, unit and help of every threshold, in their order; `per`: how the figure is typed. */
export const thresholds: { key: EstimateKey; label: string; unit: string; help: string; per: number }[] = [
  { key: 'leastCompleteness', label: 'Least share of readings', unit: '%', per: 0.01, help: 'A sensor with less is left out of the window.' },
  { key: 'longestBridgedGap', label: 'Longest gap bridged', unit: 's', per: 1, help: 'By a straight line; longer gaps stay gaps.' },
  { key: 'spikeSigmas', label: 'Spike beyond', unit: 'σ', per: 1, help: 'Robust standard deviations off what the neighbours say.' },
  { key: 'flatSuspectSamples', label: 'Flat line suspect after', unit: 'readings', per: 1, help: 'Equal readings in a row.' },
  { key: 'flatFailSamples', label: 'Flat line fails after', unit: 'readings', per: 1, help: 'The sensor is left out then.' },
  { key: 'rangeShareOfDepth', label: 'Gross range about the mean', unit: '% of depth', per: 0.01, help: 'A reading further off is a fault.' },
  { key: 'leastHeight', label: 'No direction below', unit: 'm', per: 1, help: 'Height under which no vector is given.' },
  { key: 'leastPressureResponse', label: 'Least pressure response', unit: '%', per: 0.01, help: 'Shorter waves are not carried up from the bed.' },
  { key: 'bandFrom', label: 'Lowest frequency', unit: 'Hz', per: 1, help: 'Of the band that is looked at.' },
  { key: 'bandTo', label: 'Highest frequency', unit: 'Hz', per: 1, help: 'At most half the sample rate.' },
  { key: 'gravity', label: 'Gravity', unit: 'm/s²', per: 1, help: '9.81 in middle latitudes.' },
  { key: 'density', label: 'Density of the water', unit: 'kg/m³', per: 1, help: 'About 1025 in the sea.' },
] // prettier-ignore

const usualPeriods: [number, number] = [4, 20]
const typed = (value: number): string => String(Math.round(value * 1e6) / 1e6)
function estimateForm(estimate: StationSettingsContent['estimate']): Record<EstimateKey, string> {
  const figure = (key: EstimateKey): string =>
    typed(estimate[key] / (thresholds.find((one) => one.key === key)?.per ?? 1))
  return {
    ...{ bandFrom: figure('bandFrom'), bandTo: figure('bandTo'), gravity: figure('gravity') },
    ...{ density: figure('density'), leastCompleteness: figure('leastCompleteness') },
    ...{ leastHeight: figure('leastHeight'), leastPressureResponse: figure('leastPressureResponse') },
    ...{ longestBridgedGap: figure('longestBridgedGap'), spikeSigmas: figure('spikeSigmas') },
    ...{ flatSuspectSamples: figure('flatSuspectSamples'), flatFailSamples: figure('flatFailSamples') },
    rangeShareOfDepth: figure('rangeShareOfDepth'),
  }
}

export function settingsFormOf({ sampleRate, content }: StationSettingsDraft): SettingsForm {
  const [periodFrom, periodTo] = content.periodRange ?? usualPeriods
  const [from, to] = content.openSeaSector ?? [180, 300]
  return {
    sampleRate: typed(sampleRate),
    window: typed(content.windowSeconds / 60),
    hop: typed(content.hopSeconds),
    grace: typed(content.graceSeconds),
    land: content.landSectors.map(([start, end]) => ({ from: typed(start), to: typed(end) })),
    hasOpenSea: content.openSeaSector !== undefined,
    openSea: { from: typed(from), to: typed(to) },
    ...{ periodFrom: typed(periodFrom), periodTo: typed(periodTo) },
    estimate: estimateForm(content.estimate),
    hasQuality: content.estimate.quality !== undefined,
    quality: qualityFormOf(content.estimate.quality),
  }
}

export const newSettingsForm = (): SettingsForm =>
  settingsFormOf({
    sampleRate: 4,
    content: {
      ...{ windowSeconds: 1200, hopSeconds: 60, graceSeconds: 10, landSectors: [] },
      estimate: { ...defaultEstimateSettings, quality: undefined },
    },
  })

export type SettingsFormResult =
  { settings: StationSettingsDraft; faults: null } | { settings: null; faults: Record<string, string> }

const sector = ({ from, to }: SectorForm): [number, number] => [numberIn(from), numberIn(to)]

/** Faults by the names of the contract, such as `content.windowSeconds`. */
export function settingsOf(form: SettingsForm): SettingsFormResult {
  const quality = qualityOf(form.quality)
  const parsed = stationSettingsDraft.safeParse({
    sampleRate: numberIn(form.sampleRate),
    content: {
      windowSeconds: Math.round(numberIn(form.window) * 60),
      hopSeconds: numberIn(form.hop),
      graceSeconds: numberIn(form.grace),
      landSectors: form.land.map(sector),
      ...(form.hasOpenSea && { openSeaSector: sector(form.openSea) }),
      periodRange: [numberIn(form.periodFrom), numberIn(form.periodTo)],
      estimate: {
        ...Object.fromEntries(
          thresholds.map(({ key, per }) => [key, Math.round(numberIn(form.estimate[key]) * per * 1e9) / 1e9]),
        ),
        ...(form.hasQuality && { quality: quality.quality ?? undefined }),
      },
    },
  })
  const faults = parsed.success ? {} : faultsOf(parsed.error, perUnit)
  ownFaults(form, faults)
  if (form.hasQuality)
    for (const [key, words] of Object.entries(quality.faults)) faults[`content.estimate.quality.${key}`] = words
  if (parsed.success && Object.keys(faults).length === 0) return { settings: parsed.data, faults: null }
  return { settings: null, faults }
}

const perUnit: Record<string, number> = {
  'content.windowSeconds': 60,
  ...Object.fromEntries(thresholds.map(({ key, per }) => [`content.estimate.${key}`, per])),
}

/** What no single field shows. */
function ownFaults(form: SettingsForm, faults: Record<string, string>): void {
  const [windowSeconds, hop] = [Math.round(numberIn(form.window) * 60), numberIn(form.hop)]
  if (hop > windowSeconds) faults['content.hopSeconds'] ??= 'must not be longer than the window'
  if (numberIn(form.periodFrom) >= numberIn(form.periodTo))
    faults['content.periodRange.1'] ??= 'must be longer than the shortest'
  const bearing = (text: string): boolean => numberIn(text) >= 0 && numberIn(text) <= 360
  form.land.forEach(({ from, to }, index) => {
    if (!bearing(from)) faults[`content.landSectors.${index}.0`] = 'a bearing from 0 to 360'
    if (!bearing(to)) faults[`content.landSectors.${index}.1`] = 'a bearing from 0 to 360'
  })
  if (!form.hasOpenSea) return
  if (!bearing(form.openSea.from)) faults['content.openSeaSector.0'] = 'a bearing from 0 to 360'
  if (!bearing(form.openSea.to)) faults['content.openSeaSector.1'] = 'a bearing from 0 to 360'
}

/** What differs between two settings, in words. */
export function settingsChanges(before: StationSettingsDraft, after: StationSettingsDraft): string[] {
  const [old, now] = [settingsFormOf(before), settingsFormOf(after)]
  const changes: string[] = []
  const note = (label: string, a: string, b: string, unit = ''): void => {
    if (a !== b) changes.push(`${label} ${a} to ${b}${unit ? ` ${unit}` : ''}`)
  }
  note('Sample rate', old.sampleRate, now.sampleRate, 'Hz')
  note('Window', old.window, now.window, 'min')
  note('Hop', old.hop, now.hop, 's')
  note('Grace', old.grace, now.grace, 's')
  note('Land', sectorsWords(old.land), sectorsWords(now.land))
  note('Open sea', old.hasOpenSea ? sectorsWords([old.openSea]) : 'all but land', now.hasOpenSea ? sectorsWords([now.openSea]) : 'all but land') // prettier-ignore
  note('Periods', `${old.periodFrom} to ${old.periodTo}`, `${now.periodFrom} to ${now.periodTo}`, 's')
  for (const { key, label, unit } of thresholds) note(label, old.estimate[key], now.estimate[key], unit)
  changes.push(...qualityChanges(before.content.estimate.quality, after.content.estimate.quality))
  return changes
}

const sectorsWords = (sectors: SectorForm[]): string =>
  sectors.map(({ from, to }) => `${from}° to ${to}° T`).join(' and ') || 'none'
