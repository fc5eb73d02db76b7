/**
 * What a place is, in numbers: the content of one version of `placeSettings`. SI units, levels in metres above datum (a bed below it is
 * negative), bearings in degrees true, times of day in the port's zone. A version is never edited.
 */
import { z } from 'zod'
import { timeSpan } from './limit.ts'
import { adoptedFit } from './placeLocalFit.ts'
import { placeQuantityKey, quantitiesOfKind } from './placeQuantity.ts'

const bearing = z.number().min(0).lt(360)
const source = z.string().trim().min(3, 'must say where the value comes from').max(120)

/** A value with its ± (null: not known) and where it comes from, such as `survey 2024`. */
const surveyed = (least: number, most: number) =>
  z.strictObject({ value: z.number().min(least).max(most), sd: z.number().min(0).nullable(), source })
const level = surveyed(-100, 40)
/** tan of the angle: 1 in 20 is 0.05. */
const slope = surveyed(0.002, 3)

/** One point of a sounded path from the station to the place. */
const pathPoint = z.strictObject({ distance: z.number().min(0).max(200_000), bedLevel: z.number().min(-500).max(10) })

/**
 * How the sea at the station becomes the sea at the place. `asMeasured`: taken over unchanged. `parallelContours`: refraction and shoaling
 * over straight parallel contours with this shore normal (toward the sea). `table`: ratio of heights and turn of direction by period and
 * direction from, made elsewhere (its origin is said); between its values interpolated, outside refused.
 */
export const transfer = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('asMeasured') }),
  z.strictObject({ kind: z.literal('parallelContours'), shoreNormal: bearing }),
  z
    .strictObject({
      kind: z.literal('table'),
      origin: z.string().trim().min(10, 'must say who made the table, how and when').max(300),
      /** s, rising. */
      periods: z.array(z.number().min(1).max(60)).min(1).max(60),
      /** From, degrees true, rising clockwise; may pass north by going beyond 360. */
      directions: z.array(z.number().min(0).lt(720)).min(1).max(120),
      /** By period, then direction. */
      heightRatio: z.array(z.array(z.number().min(0).max(5))),
      /** Degrees added to the direction, clockwise. */
      turn: z.array(z.array(z.number().min(-180).max(180))),
      /** ± of a carried height, share of it. */
      relativeSd: z.number().min(0).max(1),
    })
    .superRefine((table, context) => {
      const rises = (values: number[]) => values.every((value, n) => n === 0 || value > values[n - 1])
      const refuse = (path: string, message: string) => context.addIssue({ code: 'custom', path: [path], message })
      for (const name of ['periods', 'directions'] as const) if (!rises(table[name])) refuse(name, 'must rise')
      for (const name of ['heightRatio', 'turn'] as const) {
        const fits =
          table[name].length === table.periods.length &&
          table[name].every((row) => row.length === table.directions.length)
        if (!fits) refuse(name, 'must have a row for each period and in it a value for each direction')
      }
    }),
])
export type Transfer = z.infer<typeof transfer>

/** One station that may feed the place. */
export const placeFeed = z.strictObject({
  stationId: z.number().int().positive(),
  transfer,
  /** From the station to the place, distances rising from 0; for the arrival of swell groups. Empty: not given. */
  path: z
    .array(pathPoint)
    .max(200)
    .refine(
      (points) => points.every(({ distance }, n) => (n === 0 ? distance === 0 : distance > points[n - 1].distance)),
      {
        message: 'must begin at distance 0 and rise',
      },
    ),
  /** Directions from, clockwise, for which the carrying is meant; null: all. Outside it figures are suspect and say so. */
  validSector: z.strictObject({ from: bearing, to: bearing }).nullable(),
})
export type PlaceFeed = z.infer<typeof placeFeed>

const course = z.strictObject({ name: z.string().trim().min(1).max(30), bearing })

/** First the station that belongs here, then the substitutes in their order. */
const orderOf = <Feed extends z.ZodType<{ stationId: number }>>(feed: Feed) =>
  z
    .array(feed)
    .min(1)
    .max(6)
    .refine((feeds) => new Set(feeds.map(({ stationId }) => stationId)).size === feeds.length, {
      message: 'must name each station once',
    })

const common = {
  /** What a substitute adds to ±: a share of each height, and degrees of each direction. */
  substitute: z.strictObject({ relativeSd: z.number().min(0.05).max(1), headingSd: z.number().min(1).max(45) }),
  /** Whose water level or tide counts here (auxiliary readings of that station); null: none, `nominalLevel` is taken. */
  tideStationId: z.number().int().positive().nullable(),
  /** Still water above datum where no level or tide is known. */
  nominalLevel: level,
  leadQuantity: placeQuantityKey,
  /** Coefficients of the place's own, adopted from logged observations; one for each kind of observation at most. */
  localFits: z
    .array(adoptedFit)
    .max(7)
    .refine((fits) => new Set(fits.map(({ observed }) => observed)).size === fits.length, {
      message: 'must have each kind of observation once',
    })
    .default([]),
}

/** Bed at the place. */
const bedLevel = level

export const entranceSettings = z.strictObject({
  kind: z.literal('entrance'),
  ...common,
  stationOrder: orderOf(placeFeed),
  /** Inbound, degrees true. */
  channelAxis: bearing,
  /** Least width, m. */
  width: z.number().positive().max(5000),
  bedLevel,
  /** Inbound and outbound as a rule; the first one's words lead. */
  courses: z.array(course).min(1).max(6),
})

export const breakwaterSettings = z.strictObject({
  kind: z.literal('breakwater'),
  ...common,
  stationOrder: orderOf(placeFeed),
  crestLevel: level,
  form: z.enum(['smoothSlope', 'rubbleSlope', 'vertical']),
  /** Null for a vertical face. */
  seawardSlope: slope.nullable(),
  /** γ_f: 1 smooth, about 0.4 to 0.55 for rock. */
  roughness: surveyed(0.3, 1),
  toeBedLevel: level,
  /** Where the seaward face looks, degrees true. */
  seawardNormal: bearing,
  hasPublicAccess: z.boolean(),
  /** Who walks there and how it is closed, in the harbour's words. */
  accessNote: z.string().trim().max(200),
})

/** A station whose long waves are read for the berths. */
export const berthFeed = z.strictObject({
  stationId: z.number().int().positive(),
  /** Long waves at the berths over long waves at the station; 1 for a gauge in the basin. */
  factor: surveyed(0.01, 20),
  isInBasin: z.boolean(),
})
export type BerthFeed = z.infer<typeof berthFeed>

export const berthSettings = z.strictObject({
  kind: z.literal('berth'),
  ...common,
  stationOrder: orderOf(berthFeed),
  /** The basin along which water can swing. */
  basin: z.strictObject({
    length: z.number().positive().max(20_000),
    width: z.number().positive().max(20_000),
    bedLevel,
    /** Open: the mouth is a node. Between: neither a wall nor wide open, and the periods of both are told. */
    mouth: z.enum(['closed', 'open', 'between']),
  }),
  /** What the berthing master reads beside the figure; from metres of long swell on. */
  meanings: z
    .array(
      z.strictObject({
        craft: z.string().trim().min(1).max(60),
        from: z.number().min(0),
        words: z.string().trim().min(1).max(80),
      }),
    )
    .max(12),
})

export const beachSettings = z.strictObject({
  kind: z.literal('beach'),
  ...common,
  stationOrder: orderOf(placeFeed),
  /** Where the beach looks, degrees true. */
  shoreNormal: bearing,
  /** Between the run-down and the berm; for run-up. */
  foreshoreSlope: slope,
  /** Through the surf zone; for breaking. */
  nearshoreSlope: slope,
  sediment: z.enum(['sand', 'gravel']),
  /** Patrolled at these hours and seasons; empty: never. */
  patrol: z.array(timeSpan).max(6),
  /** From when on each reason for a rip caution counts. */
  ripReasons: z.strictObject({
    /** H_m0, m. */
    height: z.number().min(0.1).max(5),
    /** Degrees from square to the shore. */
    incidence: z.number().min(1).max(90),
    /** Degrees of directional spread. */
    spread: z.number().min(1).max(60),
    /** Hours before and after low water. */
    lowWaterHours: z.number().min(0).max(6),
  }),
})

export const placeSettingsContent = z
  .discriminatedUnion('kind', [entranceSettings, breakwaterSettings, berthSettings, beachSettings])
  .superRefine((content, context) => {
    const refuse = (path: string, message: string) => context.addIssue({ code: 'custom', path: [path], message })
    if (!quantitiesOfKind[content.kind].includes(content.leadQuantity)) {
      refuse('leadQuantity', `is not a quantity of a place of kind ${content.kind}`)
    }
    if (content.kind === 'breakwater' && (content.form === 'vertical') !== (content.seawardSlope === null)) {
      refuse('seawardSlope', content.form === 'vertical' ? 'a vertical face has none' : 'is needed for a slope')
    }
  })
export type PlaceSettingsContent = z.infer<typeof placeSettingsContent>
export type EntranceSettings = z.infer<typeof entranceSettings>
export type BreakwaterSettings = z.infer<typeof breakwaterSettings>
export type BerthSettings = z.infer<typeof berthSettings>
export type BeachSettings = z.infer<typeof beachSettings>
