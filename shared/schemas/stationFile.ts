/**
 * A station as a file: what is set up at the server, for a simulator, for analysing a recording, for the office's papers.
 * GET /api/stations/:stationId/stationFile gives it. SI units, metres from the station's position, degrees true.
 */
import { z } from 'zod'

export const stationFile = z.object({
  code: z.string().min(1).max(16),
  shortName: z.string().min(1).max(24),
  name: z.string().min(1).max(80),
  latitude: z.number().min(-90).max(90),
  longitude: z.number().min(-180).max(180),
  /** Still water depth below datum. */
  waterDepth: z.number().positive(),
  sampleRate: z.number().positive().max(64),
  staleAfterSeconds: z.number().int().positive(),
  /** Bearings from which no wave can come, clockwise from first to second. */
  landSectors: z.array(z.tuple([z.number(), z.number()])),
  sensors: z
    .array(
      z.object({
        /** Its id on the wire. */
        id: z.string().min(1).max(16),
        serial: z.string(),
        kind: z.enum(['pressure', 'surface']),
        east: z.number(),
        north: z.number(),
        heightAboveBed: z.number().min(0),
        positionSd: z.number().positive().optional(),
      }),
    )
    .min(1)
    .max(32),
})
export type StationFile = z.infer<typeof stationFile>
