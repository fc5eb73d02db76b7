/**
 * The register of a station's instruments. Actions `stationSetUp.read`, `stationSetUp.change`.
 *
 *   GET  /api/stations/:stationId/sensors                            -> sensorRecord[]
 *   PUT  /api/stations/:stationId/sensors/:sensorId  sensorChange, If-Match "version" of the sensor -> sensorRecord
 *   POST /api/stations/:stationId/sensors/:sensorId/clockOffsets  clockOffsetOrder -> 201 sensorRecord
 *
 * Instruments are entered by putting a deployment in force that names their serial.
 */
import { z } from 'zod'

const time = z.iso.datetime()
const reason = z.string().trim().min(3, 'say why in a few words').max(500)

const sensorFields = {
  serial: z.string().trim().min(1).max(40),
  calibrationDue: z.iso.date().nullable(),
  cleaningDue: z.iso.date().nullable(),
}

export const sensorChange = z.strictObject({ ...sensorFields, reason })
export type SensorChange = z.infer<typeof sensorChange>

/** A value stamped t was taken at t + offsetSeconds, from `validFrom` until the next entry; 0 ends a correction. */
export const clockOffsetOrder = z.strictObject({
  validFrom: time,
  offsetSeconds: z.number().min(-3600).max(3600),
  /** One standard deviation, s. */
  sd: z.number().min(0).max(60),
  reason,
})
export type ClockOffsetOrder = z.infer<typeof clockOffsetOrder>

export const sensorRecord = z.object({
  id: z.number().int(),
  version: z.number().int(),
  ...sensorFields,
  kind: z.enum(['pressure', 'surface']),
  /** In the deployment in force; null: not deployed. */
  letter: z.string().nullable(),
  /** First and last deployment it stood in. */
  firstDeployedAt: time.nullable(),
  clockOffsets: z.array(
    z.object({
      id: z.number().int(),
      validFrom: time,
      isInForce: z.boolean(),
      offsetSeconds: z.number(),
      sd: z.number(),
      confirmedBy: z.string().nullable(),
      reason: z.string(),
    }),
  ),
})
export type SensorRecord = z.infer<typeof sensorRecord>
