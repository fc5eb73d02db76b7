/**
 * Limits: what is watched, when it raises, when it clears, who is told. SI units; directions in degrees true with
 * waves *from*; spans in seconds; times ISO 8601 UTC. A version is never edited: a change makes the next one.
 */
import { z } from 'zod'
import { consentFields } from './consent.ts'
import { placeQuantityKey } from './placeQuantity.ts'

const time = z.iso.datetime()

/** Low, medium, high, urgent: one to four strokes. */
export const priority = z.enum(['low', 'medium', 'high', 'urgent'])
export type Priority = z.infer<typeof priority>

export const limitClass = z.enum(['wave', 'dataHealth'])
export type LimitClass = z.infer<typeof limitClass>

export const subjectKind = z.enum(['station', 'place', 'system'])
export type SubjectKind = z.infer<typeof subjectKind>

/** Names of `shared/alerts/quantities`, the one registry. */
export const waveQuantityKey = z.enum([
  'significantWaveHeight',
  'peakPeriod',
  'meanPeriod',
  'energyPeriod',
  'energyFlux',
  'surgeHeight',
  'leadingHeight',
  'leadingPeriod',
  'leadingFrom',
  'leadingSpeed',
  'swellHeight',
  'swellPeriod',
  'swellFrom',
  'swellSpeed',
  'windSeaHeight',
  'windSeaPeriod',
  'windSeaFrom',
  'windSeaSpeed',
])
export const dataHealthQuantityKey = z.enum([
  'dataAge',
  'usableSensors',
  'clockOffset',
  'arrayDisagreement',
  'mailQueueAge',
  'diskFree',
])
export const quantityKey = z.enum([
  ...waveQuantityKey.options,
  ...placeQuantityKey.options,
  ...dataHealthQuantityKey.options,
])
export type WaveQuantityKey = z.infer<typeof waveQuantityKey>
export type DataHealthQuantityKey = z.infer<typeof dataHealthQuantityKey>
export type QuantityKey = z.infer<typeof quantityKey>

/** One of the registry's rows, for forms. */
export const quantityView = z.object({
  key: quantityKey,
  /** `Total height`; for a heading of an alert: `Total height, Outer Ledge`. */
  name: z.string(),
  limitClass,
  subjects: z.array(subjectKind),
  /** `m`, `s`, `m/s`, `°`, `kW/m`; empty for a count. Values are in SI: what stands in it is `toUnit` times the value. */
  unit: z.string(),
  toUnit: z.number(),
  decimals: z.number().int(),
  /** A bearing (from): compared with a sector, never above or below. */
  isCircular: z.boolean(),
  hasRise: z.boolean(),
  least: z.number(),
  most: z.number(),
})
export type QuantityView = z.infer<typeof quantityView>

const threshold = {
  quantity: quantityKey,
  /** SI. Above: clear ≤ raise. Below: clear ≥ raise. */
  raise: z.number(),
  clear: z.number(),
}

const aboveComparison = z.strictObject({
  kind: z.literal('above'),
  ...threshold,
  /** Null: the value itself. Else its rise over so many seconds, and raise and clear are rises. */
  riseOverSeconds: z.number().int().min(600).max(86_400).nullable(),
})
const belowComparison = z.strictObject({ kind: z.literal('below'), ...threshold })
const sectorComparison = z.strictObject({
  kind: z.literal('sector'),
  quantity: quantityKey,
  /** Bearings that waves come from, clockwise from the first to the second; over north where from > to. */
  from: z.number().min(0).lt(360),
  to: z.number().min(0).lt(360),
  /** So far outside the sector it clears, degrees on either side. */
  deadBand: z.number().min(0).max(90),
})
export const comparison = z
  .discriminatedUnion('kind', [aboveComparison, belowComparison, sectorComparison])
  .superRefine((one, context) => {
    const refuse = (path: string, message: string) => context.addIssue({ code: 'custom', path: [path], message })
    if (one.kind === 'above' && one.clear > one.raise) refuse('clear', 'must not be above the value that raises')
    if (one.kind === 'below' && one.clear < one.raise) refuse('clear', 'must not be below the value that raises')
    if (one.kind === 'sector' && one.from === one.to) refuse('to', 'must not be the same bearing as from')
  })
export type Comparison = z.infer<typeof comparison>

const clockTime = z.string().regex(/^([01]\d|2[0-3]):[0-5]\d$/, 'must be a time such as 06:30')
const monthDay = z.string().regex(/^(0[1-9]|1[0-2])-(0[1-9]|[12]\d|3[01])$/, 'must be a day such as 05-15')

/** Hours and season in the port's zone; a span over midnight belongs to the day it begins, a season may pass new year. */
export const timeSpan = z.strictObject({
  hours: z
    .strictObject({
      from: clockTime,
      to: clockTime,
      /** 1 Monday to 7 Sunday. */
      days: z.array(z.number().int().min(1).max(7)).min(1).max(7),
    })
    .nullable(),
  /** First and last day, both included. */
  season: z.strictObject({ from: monthDay, to: monthDay }).nullable(),
})
export type TimeSpan = z.infer<typeof timeSpan>

/** All comparisons together, and while the hours and the season hold. The first one's quantity heads the alert. */
export const condition = z.strictObject({
  comparisons: z.array(comparison).min(1).max(6),
  /** Outside it the condition is false. */
  when: timeSpan.nullable(),
  /** True for so long before it raises, differences of window ends. */
  onDelaySeconds: z.number().int().min(0).max(86_400),
  /** Clear for so long before it clears. */
  offDelaySeconds: z.number().int().min(0).max(86_400),
  /** It clears only when value + so many standard deviations is clear; it raises on the value. */
  clearSigmas: z.number().min(0).max(3),
  /** Estimates with a worse flag neither raise nor clear: 3 takes suspect ones, 1 only good ones. */
  worstQuality: z.union([z.literal(1), z.literal(3)]),
  /** After clearing it stays until somebody has reset it. */
  latches: z.boolean(),
})
export type Condition = z.infer<typeof condition>

/** Who gets e-mails: each step after so long without a confirmed receipt of the steps before. */
export const recipients = z.strictObject({
  steps: z
    .array(
      z.strictObject({
        afterSeconds: z.number().int().min(0).max(86_400),
        listIds: z.array(z.number().int().positive()).min(1).max(20),
      }),
    )
    .max(10)
    .refine((steps) => steps.every((step, n) => n === 0 || step.afterSeconds >= steps[n - 1].afterSeconds), {
      message: 'must stand in the order of their times',
    }),
  /** To those without a receipt again after so long; null: never. */
  remindEverySeconds: z.number().int().min(60).max(86_400).nullable(),
})
export type Recipients = z.infer<typeof recipients>

/** What a person fills in: the content of one version. */
export const limitContent = z.strictObject({
  /** Heads the alert where given, such as `Swell at the bar`; else quantity and subject do. */
  title: z.string().trim().min(1).max(80).nullable(),
  condition,
  priority,
  recipients,
  /** Outside it the limit is suppressed by design; null: always in force. */
  schedule: timeSpan.nullable(),
  /** Where the number comes from. */
  note: z.string().trim().max(1000),
  /** What the reader of the alert should check. */
  toCheck: z.string().trim().max(500),
  reviewOn: z.iso.date().nullable(),
  /** The alert goes into the CAP feed, open to whoever reaches it. */
  isPublished: z.boolean(),
})
export type LimitContent = z.infer<typeof limitContent>

const reason = z.string().trim().min(3).max(500)

export const limitDraft = z.strictObject({
  subjectKind,
  /** Null for the system itself. */
  subjectId: z.number().int().positive().nullable(),
  content: limitContent,
  reason,
  ...consentFields,
})
export type LimitDraft = z.infer<typeof limitDraft>

/** Needs If-Match with the limit's `version`. */
export const limitChange = z.strictObject({ content: limitContent, reason, ...consentFields })
export type LimitChange = z.infer<typeof limitChange>

export const personName = z.object({ id: z.number().int(), name: z.string() })
export type PersonName = z.infer<typeof personName>

export const limitVersionView = z.object({
  id: z.number().int(),
  number: z.number().int(),
  validFrom: time,
  content: limitContent,
  author: personName.nullable(),
  reason: z.string(),
  consentBy: personName.nullable(),
  aloneReason: z.string().nullable(),
})
export type LimitVersionView = z.infer<typeof limitVersionView>

/** States of ANSI/ISA-18.2-2016; `shared/alerts/transition` is the table. */
export const alertState = z.enum([
  'normal',
  'unacknowledgedActive',
  'acknowledgedActive',
  'returnedUnacknowledged',
  'latchedUnacknowledged',
  'latchedAcknowledged',
  'shelved',
  'suppressed',
  'outOfService',
])
export type AlertState = z.infer<typeof alertState>

export const subjectView = z.object({
  kind: subjectKind,
  id: z.number().int().nullable(),
  /** `Outer Ledge`; `Offing itself` for the system. */
  name: z.string(),
  code: z.string(),
})
export type SubjectView = z.infer<typeof subjectView>

/** What a limit may be set on. */
export const limitSubject = subjectView.extend({ quantities: z.array(quantityKey) })
export type LimitSubject = z.infer<typeof limitSubject>

/** Why a limit was not judged at the newest moment. `settling`: the program has just begun, its stations are catching up. */
export const notJudgedReason = z.enum(['stale', 'failed', 'noValue', 'settling', 'outOfService', 'neverYet'])
export type NotJudgedReason = z.infer<typeof notJudgedReason>

export const shelfView = z.object({
  id: z.number().int(),
  startsAt: time,
  endsAt: time,
  reason: z.string(),
  by: personName.nullable(),
  secondPerson: personName.nullable(),
})
export type ShelfView = z.infer<typeof shelfView>

export const limitView = z.object({
  id: z.number().int(),
  /** For If-Match. */
  version: z.number().int(),
  subject: subjectView,
  limitClass,
  /** `Total height, Outer Ledge`. */
  title: z.string(),
  /** The condition in plain words. */
  words: z.string(),
  current: limitVersionView,
  state: alertState,
  stateSince: time,
  /** Raised with its delays, whatever the life cycle says. */
  isActive: z.boolean(),
  /** The value is beyond its line since then and waits out the on-delay; null when it is not, or is raised. */
  pendingSince: time.nullable(),
  /** End of the newest window judged, or the newest moment for data health. */
  lastJudgedAt: time.nullable(),
  notJudged: notJudgedReason.nullable(),
  /** Value at that moment of the first comparison's quantity, with its standard deviation. */
  value: z.number().nullable(),
  valueSd: z.number().nullable(),
  shelf: shelfView.nullable(),
  outOfService: z.object({ since: time, reason: z.string(), by: personName.nullable() }).nullable(),
  retiredAt: time.nullable(),
  openAlertId: z.number().int().nullable(),
})
export type LimitView = z.infer<typeof limitView>

export const limitWithHistory = limitView.extend({ versions: z.array(limitVersionView) })
