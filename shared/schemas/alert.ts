/** Alerts: one occurrence of a limit exceeded, from rise to clearance. SI units; times ISO 8601 UTC. */
import { z } from 'zod'
import { consentFields } from './consent.ts'
import {
  alertState,
  limitClass,
  limitView,
  personName,
  priority,
  quantityKey,
  shelfView,
  subjectView,
} from './limit.ts'

const time = z.iso.datetime()

/** One alert as it stands in the list. A bearing is *from*. */
export const alertView = z.object({
  id: z.number().int(),
  version: z.number().int(),
  isExercise: z.boolean(),
  limitId: z.number().int(),
  limitVersionNumber: z.number().int(),
  limitClass,
  subject: subjectView,
  /** `Total height, Outer Ledge`. */
  title: z.string(),
  priority,
  /** `normal` for one that is over. */
  state: alertState,
  quantity: quantityKey,
  unit: z.string(),
  /** Value in `unit` is `toUnit` times the SI value. */
  toUnit: z.number(),
  decimals: z.number().int(),
  /** Thresholds of the first comparison; null for a sector. */
  raise: z.number().nullable(),
  clear: z.number().nullable(),
  /** The condition in plain words. */
  words: z.string(),
  /** The condition was first true. */
  crossedAt: time,
  /** The on-delay was over. */
  raisedAt: time,
  /** People were told; null while shelved, suppressed or out of service. */
  announcedAt: time.nullable(),
  /** Newest window judged and its value. */
  windowEndsAt: time,
  revision: z.number().int(),
  value: z.number().nullable(),
  valueSd: z.number().nullable(),
  extremeValue: z.number().nullable(),
  extremeAt: time.nullable(),
  acknowledgedAt: time.nullable(),
  acknowledgedBy: personName.nullable(),
  clearedAt: time.nullable(),
  closedAt: time.nullable(),
  shelf: shelfView.nullable(),
  outOfServiceSince: time.nullable(),
  /** Figures stopped: the alert holds at its last value. */
  isHeld: z.boolean(),
  /** Counts of its e-mails, for the alert line. */
  deliveries: z.object({
    queued: z.number().int(),
    accepted: z.number().int(),
    notOut: z.number().int(),
    received: z.number().int(),
  }),
})
export type AlertView = z.infer<typeof alertView>

export const alertEventKind = z.enum([
  'crossed',
  'raised',
  'raisedAgain',
  'extreme',
  'priorityRose',
  'message',
  'receipt',
  'escalated',
  'acknowledged',
  'cleared',
  'latched',
  'reset',
  'shelved',
  'unshelved',
  'shelfExpired',
  'suppressed',
  'resumed',
  'outOfService',
  'returned',
  'limitChanged',
  'late',
  'closed',
])
export type AlertEventKind = z.infer<typeof alertEventKind>

export const alertEventView = z.object({
  id: z.number().int(),
  at: time,
  kind: alertEventKind,
  /** One sentence for people. */
  text: z.string(),
  by: personName.nullable(),
  note: z.string().nullable(),
  value: z.number().nullable(),
})

/** Told: the server's word of acceptance is `acceptedAt`, the person's own is `receivedAt`. */
export const toldView = z.object({
  personId: z.number().int(),
  name: z.string(),
  deliveries: z.array(
    z.object({
      id: z.number().int(),
      messageId: z.number().int(),
      state: z.enum(['queued', 'leased', 'accepted', 'refused', 'unknown', 'givenUp', 'merged']),
      attempts: z.number().int(),
      /** Names of those whose deputy they are. */
      standsInFor: z.string().nullable(),
      nextAttemptAt: time.nullable(),
      acceptedAt: time.nullable(),
    }),
  ),
  receivedAt: time.nullable(),
})

export const alertDetail = alertView.extend({
  limit: limitView,
  /** Newest first. */
  timeline: z.array(alertEventView),
  told: z.array(toldView),
  /** Steps still to come; null when none is. */
  nextStep: z.object({ at: time, step: z.number().int(), lists: z.array(z.string()) }).nullable(),
  caution: z.string(),
})
export type AlertDetail = z.infer<typeof alertDetail>

/** The order: active not acknowledged, active acknowledged, cleared not acknowledged, shelved, out of service. */
export const alertGroup = z.enum(['active', 'acknowledged', 'cleared', 'shelved', 'suppressed', 'outOfService'])
export type AlertGroup = z.infer<typeof alertGroup>

export const alertCounts = z.object({
  open: z.number().int(),
  unacknowledged: z.number().int(),
  byPriority: z.object({
    low: z.number().int(),
    medium: z.number().int(),
    high: z.number().int(),
    urgent: z.number().int(),
  }),
  cleared: z.number().int(),
  shelved: z.number().int(),
  suppressed: z.number().int(),
  outOfService: z.number().int(),
})

export const alertBoard = z.object({
  serverTime: time,
  /** Open ones in the order in which they are shown; each says its state. */
  alerts: z.array(alertView),
  /** Limits shelved, suppressed or out of service without an open alert. */
  limits: z.array(limitView),
  counts: alertCounts,
  /** "No limit exceeded among N judged, M not judged" with the reasons. */
  judged: z.number().int(),
  notJudged: z.array(z.object({ limitId: z.number().int(), title: z.string(), reason: z.string() })),
  /** Beyond their line, but not yet for their on-delay: no alert, and no calm either. */
  pending: z.array(z.object({ limitId: z.number().int(), title: z.string(), since: time })),
  /** More than 10 announced in 10 min: since when, and by cause. */
  flood: z
    .object({
      since: time,
      count: z.number().int(),
      causes: z.array(z.object({ subject: subjectView, count: z.number().int(), alertIds: z.array(z.number().int()) })),
    })
    .nullable(),
  messagesNotOut: z.object({ count: z.number().int(), since: time.nullable() }),
})
export type AlertBoard = z.infer<typeof alertBoard>

export const alertList = z.object({ alerts: z.array(alertView), next: z.number().int().nullable() })

/** The quantity of an alert's first comparison over the last hours. */
export const alertHistory = z.object({
  quantity: quantityKey,
  raise: z.number().nullable(),
  clear: z.number().nullable(),
  points: z.array(z.object({ at: time, value: z.number(), sd: z.number().nullable() })),
})
export type AlertHistory = z.infer<typeof alertHistory>

export const acknowledgement = z.strictObject({ note: z.string().trim().max(500).nullable().default(null) })
/** `isFirst` false: somebody else had done it, and the alert says who and when. */
export const acknowledgementAnswer = z.object({ isFirst: z.boolean(), alert: alertView })

export const shelving = z.strictObject({
  reason: z.string().trim().min(3).max(500),
  endsAt: time,
  ...consentFields,
})
export type Shelving = z.infer<typeof shelving>
const reason = z.string().trim().min(3).max(500)
export const withReason = z.strictObject({ reason })
/** Taking out of service, retiring: of an urgent limit a second person is asked for. */
export const withReasonAndConsent = z.strictObject({ reason, ...consentFields })
export type ReasonAndConsent = z.infer<typeof withReasonAndConsent>

/** A drill raises an exercise alert of a limit: marked everywhere, left out of statistics and of the sea. */
export const drillOrder = z.strictObject({
  limitId: z.number().int().positive(),
  value: z.number(),
  note: z.string().trim().min(3).max(500),
})

/** ANSI/ISA-18.2-2016 measures for one operator position against their targets. */
export const performanceMeasure = z.object({
  key: z.string(),
  name: z.string(),
  value: z.number().nullable(),
  unit: z.string(),
  target: z.number().nullable(),
  /** Above it is out of hand. */
  most: z.number().nullable(),
  verdict: z.enum(['met', 'near', 'missed', 'notDetermined']),
  detail: z.string(),
})
export const alertPerformance = z.object({
  from: time,
  to: time,
  /** The standard asks for 30 days. */
  days: z.number(),
  isLongEnough: z.boolean(),
  measures: z.array(performanceMeasure),
  byPriority: z.array(
    z.object({ priority, count: z.number().int(), share: z.number().nullable(), target: z.number() }),
  ),
  byDay: z.array(z.object({ day: z.iso.date(), count: z.number().int() })),
  topOffenders: z.array(
    z.object({ limitId: z.number().int(), title: z.string(), count: z.number().int(), share: z.number() }),
  ),
  stale: z.array(z.object({ alertId: z.number().int(), title: z.string(), since: time })),
  chattering: z.array(z.object({ limitId: z.number().int(), title: z.string(), count: z.number().int(), at: time })),
})
export type AlertPerformance = z.infer<typeof alertPerformance>
