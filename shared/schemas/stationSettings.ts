/** How a station's windows are cut and its estimates made: the content of one version of `stationSettings`. SI units. */
import { z } from 'zod'
import { qualityLimits } from './qualityLimits.ts'

/** Field by field as `EstimateSettings` of `shared/waves/window` documents them. */
export const estimateSettings = z.strictObject({
  bandFrom: z.number().positive(),
  bandTo: z.number().positive(),
  gravity: z.number().min(9.7).max(9.9),
  density: z.number().min(990).max(1060),
  leastCompleteness: z.number().min(0).max(1),
  leastHeight: z.number().min(0),
  leastPressureResponse: z.number().min(0.01).max(1),
  longestBridgedGap: z.number().min(0),
  spikeSigmas: z.number().positive(),
  flatSuspectSamples: z.number().int().min(2),
  flatFailSamples: z.number().int().min(2),
  rangeShareOfDepth: z.number().positive(),
  /** Absent: the usual thresholds. */
  quality: qualityLimits.optional(),
})

export const stationSettingsContent = z.strictObject({
  windowSeconds: z.number().int().min(300).max(3600),
  hopSeconds: z.number().int().min(10).max(3600),
  /** How long after a window's end it is computed though readings are still missing. */
  graceSeconds: z.number().int().min(0).max(600),
  /** Bearings (degrees true, clockwise from first to second) from which no wave can come. */
  landSectors: z.array(z.tuple([z.number(), z.number()])),
  /** Bearings (degrees true, clockwise from first to second) of the open sea; absent: all that is not land. */
  openSeaSector: z.tuple([z.number(), z.number()]).optional(),
  /** Shortest and longest period the array is meant to read, s; absent: 4 to 20. The design check asks about them. */
  periodRange: z.tuple([z.number().min(2), z.number().max(40)]).optional(),
  estimate: estimateSettings,
})
export type StationSettingsContent = z.infer<typeof stationSettingsContent>

/** One version, as it is shown. */
export const stationSettingsView = z.object({
  id: z.number().int(),
  validFrom: z.iso.datetime(),
  reason: z.string(),
  content: stationSettingsContent,
})
export type StationSettingsView = z.infer<typeof stationSettingsView>
