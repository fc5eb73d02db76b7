/**
 * Confirming the clock offset that an estimate found of a sensor. From then on it is applied once, before the fit.
 *
 *   GET  /api/stations/:stationId/clockOffsets   -> confirmedOffset[], those in force of the deployed sensors
 *   POST /api/stations/:stationId/clockOffsets   offsetConfirmation -> 201 confirmedOffset
 */
import { z } from 'zod'

const time = z.iso.datetime()

/** Which estimate found it: the value is taken from there, so that nobody types it wrongly. */
export const offsetConfirmation = z.strictObject({
  letter: z.string().min(1).max(16),
  windowEndsAt: time,
  revision: z.number().int().min(1),
  reason: z.string().trim().min(3, 'say why in a few words').max(500),
})
export type OffsetConfirmation = z.infer<typeof offsetConfirmation>

export const confirmedOffset = z.object({
  letter: z.string(),
  /** A value stamped t was taken at t + offsetSeconds. */
  offsetSeconds: z.number(),
  /** One standard deviation, s. */
  sd: z.number(),
  validFrom: time,
  confirmedBy: z.string().nullable(),
  reason: z.string(),
})
export type ConfirmedOffset = z.infer<typeof confirmedOffset>
