/**
 * The demonstration's past as it travels from the simulator (which makes it) to the server (which imports it): a
 * folder with `manifest.json`, one readings file a station (`time,ID,ID,…`, as a logger would write it) and one
 * file of past sea states a station and step.
 */
import { z } from 'zod'

export const pastSeaState = z.object({
  at: z.iso.datetime(),
  /** Depth with tide, m. */
  waterDepth: z.number(),
  systems: z.array(
    z.object({
      name: z.enum(['swell', 'wind sea']),
      significantWaveHeight: z.number(),
      peakPeriod: z.number(),
      toward: z.number(),
      directionalSpread: z.number(),
      phaseSpeed: z.number(),
    }),
  ),
})
export type PastSeaState = z.infer<typeof pastSeaState>

export const pastManifest = z.object({
  madeAt: z.iso.datetime(),
  /** End of the readings: the live stream begins here. */
  until: z.iso.datetime(),
  scenario: z.string(),
  /** With scenario and anchor (the scenario's hour zero) it makes the same sea again, so that a stream joins. */
  seed: z.number().int(),
  anchor: z.iso.datetime(),
  stations: z.array(
    z.object({
      code: z.string(),
      readingsFile: z.string(),
      readingsFrom: z.iso.datetime(),
      /**
       * Each file: JSON array of pastSeaState, rising in time, at most some days long. A state is the mean of the 20
       * minutes that end at its time; the last is no later than `readingsFrom`.
       */
      seaStates: z.array(z.object({ file: z.string(), stepSeconds: z.number().int() })),
    }),
  ),
})
export type PastManifest = z.infer<typeof pastManifest>
