/** How a person has their screens: units, times, display. It changes how figures look and never what is stored or judged. */
import { z } from 'zod'

export const heightUnit = z.enum(['m', 'ft'])
export type HeightUnit = z.infer<typeof heightUnit>
export const speedUnit = z.enum(['m/s', 'kn'])
export type SpeedUnit = z.infer<typeof speedUnit>
export const textSizes = [100, 125, 150, 200] as const

export const preferences = z.object({
  heightUnit: heightUnit.default('m'),
  speedUnit: speedUnit.default('m/s'),
  /** IANA zone of the time that stands beside UTC; null: the port's. */
  besideUtc: z.string().min(1).max(60).nullable().default(null),
  /** Night display from half an hour after sunset until sunrise. */
  bySun: z.boolean().default(false),
  still: z.boolean().default(false),
  moreContrast: z.boolean().default(false),
  /** Per cent. */
  textSize: z.union([z.literal(100), z.literal(125), z.literal(150), z.literal(200)]).default(100),
  /** Single keys such as `g w` do something. */
  keys: z.boolean().default(true),
  /** Screen readers say `two four seven degrees true`. */
  spokenDigits: z.boolean().default(true),
  /** The tone of an alert comes again each minute until somebody acknowledges. */
  repeatsTone: z.boolean().default(true),
})
export type Preferences = z.infer<typeof preferences>

export const usualPreferences: Preferences = preferences.parse({})

/** Some of them, each replacing what was there. */
export const preferencesChange = z.strictObject({
  heightUnit: heightUnit.optional(),
  speedUnit: speedUnit.optional(),
  besideUtc: z.string().min(1).max(60).nullable().optional(),
  bySun: z.boolean().optional(),
  still: z.boolean().optional(),
  moreContrast: z.boolean().optional(),
  textSize: z.union([z.literal(100), z.literal(125), z.literal(150), z.literal(200)]).optional(),
  keys: z.boolean().optional(),
  spokenDigits: z.boolean().optional(),
  repeatsTone: z.boolean().optional(),
})
export type PreferencesChange = z.infer<typeof preferencesChange>
