/**
 * Outlooks: what one estimate means at a place. Computed and stored with each estimate that feeds the place. SI units; bearings in degrees
 * true (inside a figure's inputs radians, as its unit says); times ISO 8601 UTC. Nothing in it says that a place is safe.
 *
 * GET /api/places/:placeId/outlooks/:windowEndsAt?revision=  places.read  -> outlookView (newest revision where none is named)
 * GET /api/places/:placeId/series?quantity=&hours=12&stepSeconds=300  places.read  -> placeSeriesView
 */
import { z } from 'zod'
import { figure } from '../hazards/figure.ts'
import { qualityFlag } from './estimate.ts'
import { observationKind } from './placeLocalFit.ts'
import { placeQuantityKey } from './placeQuantity.ts'

const time = z.iso.datetime()
const degrees = z.number()

/** One figure with what stands beside it. Name, unit and decimals of the quantity: `shared/places/quantities`. */
export const outlookFigure = z.object({
  quantity: placeQuantityKey,
  figure,
  /** Of the figure itself: no better than the estimate's; suspect from a substitute or outside the method's range. */
  qualityFlag,
})
export type OutlookFigure = z.infer<typeof outlookFigure>

/** The figure as it is shown, with the caution fit for it from the settings; never empty. */
const cautionedFigure = outlookFigure.extend({ caution: z.string() })

export const systemAtPlace = z.object({
  /** The tracker's; null: energy of no system. */
  key: z.number().int().nullable(),
  name: z.string(),
  /** As measured at the station, after what a substitute adds to ±. */
  height: z.number(),
  heightSd: z.number().nullable(),
  period: z.number().nullable(),
  toward: degrees.nullable(),
  towardSd: degrees.nullable(),
  spread: degrees.nullable(),
  /** Carried to the place; null where it was not carried or cannot be. */
  heightHere: z.number().nullable(),
  towardHere: degrees.nullable(),
  /** Why it could not be carried. */
  notCarried: z.string().nullable(),
  /** Entrances: heights across and along the axis, and shares of the energies. */
  across: z.number().nullable(),
  along: z.number().nullable(),
  acrossShare: z.number().nullable(),
  alongShare: z.number().nullable(),
  /** `directional spectrum`, `spread of the system`, … */
  spreadFrom: z.string().nullable(),
})
export type SystemAtPlace = z.infer<typeof systemAtPlace>

/** What the sea does to a vessel on one course. */
export const courseOutlook = z.object({
  name: z.string(),
  bearing: degrees,
  /** `from the port quarter, setting to starboard`; null without a system. */
  words: z.string().nullable(),
  /** Both set to the same side, or null where they differ. */
  setsTo: z.enum(['port', 'starboard']).nullable(),
  meets: z.enum(['head sea', 'following']).nullable(),
  systems: z.array(z.object({ key: z.number().int(), name: z.string(), words: z.string() })),
})

export const tideNow = z.object({
  /** Still water above datum, m. */
  level: z.number(),
  sd: z.number().nullable(),
  source: z.enum(['measured', 'predicted', 'nominal']),
  /** The station whose readings they are; null for nominal. */
  stationName: z.string().nullable(),
  /** Null where it is not known, as with a nominal level. */
  stage: z.enum(['rising', 'falling', 'high water', 'low water']).nullable(),
  highWater: z.object({ at: time, level: z.number() }).nullable(),
  /** The nearest low water, before or after. */
  lowWater: z.object({ at: time, level: z.number() }).nullable(),
})
export type TideNow = z.infer<typeof tideNow>

/** A listed reason for a rip caution: present, absent or not known (null). Never a grade. */
export const ripReason = z.object({
  name: z.enum(['height', 'incidence', 'spread', 'tide']),
  isPresent: z.boolean().nullable(),
  /** `1.9 m at Fairway`, `13° off square at the break`; the reason where it is not known. */
  value: z.string(),
  /** `counts above 0.7 m`. */
  counts: z.string(),
  source: z.string(),
  fromMemory: z.boolean(),
})
export const ripCaution = z.object({
  present: z.number().int(),
  known: z.number().int(),
  reasons: z.array(ripReason),
  caution: z.string(),
})

export const arrival = z.object({
  stationId: z.number().int(),
  stationName: z.string(),
  /** Along the sounded path, m. */
  distance: z.number(),
  /** s, of the leading system's period. */
  groups: figure,
  crests: figure,
})

/** What of the outlook is computed by pure code and stored. */
export const outlookContent = z.object({
  /** Why there is no figure at all; null where there are some. */
  reason: z.string().nullable(),
  qualityFlag,
  /** `Not measured here. Pennow Bar is stale since 14:10 UTC. …`; null at the place's own station. */
  substituteWords: z.string().nullable(),
  tide: tideNow.nullable(),
  sea: z
    .object({
      height: z.number(),
      heightSd: z.number().nullable(),
      peakPeriod: z.number().nullable(),
      systems: z.array(systemAtPlace),
    })
    .nullable(),
  figures: z.array(outlookFigure),
  courses: z.array(courseOutlook),
  arrivals: z.array(arrival.omit({ stationName: true })),
  rip: ripCaution.omit({ caution: true }).nullable(),
  /** How often it was logged here at such figures, by an adopted local fit: 0 to 1 with its likely range, or why it is not told. */
  chances: z.array(
    z.object({
      observed: observationKind,
      label: z.string(),
      /** Observations behind it. */
      count: z.number().int(),
      figure,
    }),
  ),
  /** The basin's own periods, longest first. */
  basin: z.array(
    z.object({
      kind: z.enum(['closed', 'open']),
      mode: z.number().int(),
      period: figure,
      /** Of what swings within 15 % of the period, m, and its share of the energy of the band; null where the spectrum does not reach. */
      height: z.number().nullable().default(null),
      share: z.number().nullable().default(null),
    }),
  ),
  /** Long waves at the berths by frequency: Hz and m²/Hz, the station's times the square of the factor. */
  longWaves: z
    .object({ frequency: z.array(z.number()), density: z.array(z.number()) })
    .nullable()
    .default(null),
  /** Sentences that belong beside the figures, such as that any overtopping means no access. */
  remarks: z.array(z.string()),
})
export type OutlookContent = z.infer<typeof outlookContent>

export const outlookView = outlookContent.extend({
  placeId: z.number().int(),
  windowStartsAt: time,
  windowEndsAt: time,
  revision: z.number().int(),
  computedAt: time,
  /** The station whose estimate it is; null where none could feed the place. */
  source: z
    .object({
      stationId: z.number().int(),
      name: z.string(),
      code: z.string(),
      estimateRevision: z.number().int(),
      isSubstitute: z.boolean(),
    })
    .nullable(),
  /** Of the source, or of the place's first station. */
  staleAfterSeconds: z.number().int(),
  settingsId: z.number().int(),
  softwareVersion: z.string(),
  figures: z.array(cautionedFigure),
  rip: ripCaution.nullable(),
  arrivals: z.array(arrival),
  /** Details have passed their retention: values are there, how they were made is not. */
  isThinned: z.boolean(),
})
export type OutlookView = z.infer<typeof outlookView>

export const placeSeriesPoint = z.object({
  at: time,
  /** Null: no figure; then `qualityFlag` is 4 or 9. */
  value: z.number().nullable(),
  sd: z.number().nullable(),
  likelyFrom: z.number().nullable(),
  likelyTo: z.number().nullable(),
  qualityFlag,
  stationId: z.number().int().nullable(),
  isSubstitute: z.boolean(),
})
export type PlaceSeriesPoint = z.infer<typeof placeSeriesPoint>

export const placeSeriesView = z.object({
  placeId: z.number().int(),
  quantity: placeQuantityKey,
  from: time,
  to: time,
  stepSeconds: z.number().int(),
  /** Rising in time; a missing window has no point, so gaps show. */
  points: z.array(placeSeriesPoint),
})
export type PlaceSeriesView = z.infer<typeof placeSeriesView>
