/** How a file of readings is to be read, as it is typed, and its way from and to the contract. Pure. */
import { uploadLayout } from '../../../shared/schemas/stationSetUpUploads.ts'
import type {
  ReadingUnit,
  UploadLayout,
  UploadReport,
  UploadView,
} from '../../../shared/schemas/stationSetUpUploads.ts'
import { clockUtc, dateUtc } from '../../../shared/times.ts'
import { decimals } from '../../../shared/units.ts'
import { numberIn } from '../limits/limitForm.ts'
import { faultsOf } from './formFaults.ts'

export interface UploadForm {
  delimiter: UploadLayout['delimiter']
  decimal: UploadLayout['decimal']
  linesAbove: string
  timeColumn: string
  /** Empty: the time column says both. */
  clockColumn: string
  timeForm: UploadLayout['timeForm']
  /** `+01:00`; of times that name no zone. */
  zone: string
  /** By heading: letter of the sensor or the quantity; empty: not read. */
  columns: Record<string, { letter: string; unit: ReadingUnit | '' }>
  /** Parted by spaces. */
  missing: string
}

export const delimiterWords = { ',': 'comma', ';': 'semicolon', '\t': 'tab' } as const
export const timeFormWords = {
  iso: 'date and time, such as 2026-11-12 14:30:00.25',
  epochSeconds: 'seconds since 1970',
  epochMilliseconds: 'milliseconds since 1970',
} as const

const zoneOf = (minutes: number): string => {
  const [hours, rest] = [Math.floor(Math.abs(minutes) / 60), Math.abs(minutes) % 60]
  return `${minutes < 0 ? '\u2212' : '+'}${String(hours).padStart(2, '0')}:${String(rest).padStart(2, '0')}`
}
/** Minutes; NaN where it is no offset. */
export function minutesOfZone(zone: string): number {
  const found = /^([+-]?)(\d{1,2})(?::?([0-5]\d))?$/.exec(zone.trim().replace('\u2212', '-'))
  if (!found) return NaN
  return (found[1] === '-' ? -1 : 1) * (Number(found[2]) * 60 + Number(found[3] ?? 0))
}

export function uploadFormOf(layout: UploadLayout | null, headings: readonly string[]): UploadForm {
  const columns: UploadForm['columns'] = {}
  for (const heading of headings) {
    const known = layout?.columns.find((one) => one.column === heading)
    columns[heading] = { letter: known?.letter ?? '', unit: known?.unit ?? '' }
  }
  return {
    delimiter: layout?.delimiter ?? ',',
    decimal: layout?.decimal ?? '.',
    linesAbove: String(layout?.linesAbove ?? 0),
    timeColumn: layout?.timeColumn ?? headings[0] ?? '',
    clockColumn: layout?.clockColumn ?? '',
    timeForm: layout?.timeForm ?? 'iso',
    zone: zoneOf(layout?.utcOffsetMinutes ?? 0),
    columns,
    missing: (layout?.missing ?? []).join(' '),
  }
}

export function layoutOf(form: UploadForm): { layout: UploadLayout | null; faults: Record<string, string> } {
  const parsed = uploadLayout.safeParse({
    ...{ delimiter: form.delimiter, decimal: form.decimal, linesAbove: numberIn(form.linesAbove) },
    ...{ timeColumn: form.timeColumn, clockColumn: form.clockColumn || null, timeForm: form.timeForm },
    utcOffsetMinutes: minutesOfZone(form.zone),
    columns: Object.entries(form.columns)
      .filter(([, { letter }]) => letter !== '')
      .map(([column, { letter, unit }]) => ({ column, letter, unit: unit || null })),
    missing: form.missing.split(/\s+/).filter((word) => word !== ''),
  })
  if (parsed.success) return { layout: parsed.data, faults: {} }
  const faults = faultsOf(parsed.error)
  if (faults.columns) faults.columns = 'say of one column at least what it holds'
  if (faults.utcOffsetMinutes) faults.utcOffsetMinutes = 'such as +00:00 or \u221203:30'
  return { layout: null, faults }
}

const moment = (iso: string): string => `${dateUtc(Date.parse(iso))} ${clockUtc(Date.parse(iso))}`

/** `Mon 30 Nov 2026 08:31 to 08:33 UTC`; the day is said twice only where it changes. */
export function spanWords({ startsAt, endsAt }: Pick<UploadReport, 'startsAt' | 'endsAt'>): string {
  if (!startsAt || !endsAt) return 'no span'
  const isOneDay = dateUtc(Date.parse(startsAt)) === dateUtc(Date.parse(endsAt))
  return `${moment(startsAt)} to ${isOneDay ? clockUtc(Date.parse(endsAt)) : moment(endsAt)} UTC`
}

/** What a report says, one line each. */
export function reportLines(report: UploadReport, isStored: boolean): [string, string][] {
  return [
    ['Rows', decimals(report.rows, 0)],
    ['Span', spanWords(report)],
    [isStored ? 'Readings stored' : 'Readings it would store', decimals(report.stored, 0)],
    ['Stand there already, left out', decimals(report.repeated, 0)],
    ['Stand there with another value, put aside', decimals(report.conflicting, 0)],
  ]
}

export function bytesWords(bytes: number): string {
  if (bytes < 1e6) return `${decimals(bytes / 1e3, bytes < 1e4 ? 1 : 0)} kB`
  return `${decimals(bytes / 1e6, bytes < 1e7 ? 1 : 0)} MB`
}

export const uploadStateWords: Record<UploadView['state'], string> = {
  received: 'brought in, not checked yet',
  checking: 'being checked, nothing is stored',
  checked: 'checked, nothing is stored yet',
  storing: 'being stored, all or nothing',
  stored: 'stored',
  failed: 'failed, nothing of it is stored',
  cancelled: 'cancelled, nothing of it is stored',
}
