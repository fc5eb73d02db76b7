/** The plan of the coast as a GeoJSON feature collection (WGS 84, longitude latitude): coast, contours, moles, places, channel axis. */
import { z } from 'zod'

const position = z.tuple([z.number(), z.number()])
export const coastFeature = z.object({
  type: z.literal('Feature'),
  properties: z.object({
    kind: z.enum(['land', 'contour', 'mole', 'beach', 'place', 'axis', 'name']),
    name: z.string().optional(),
    /** Depth below datum of a contour, m. */
    depth: z.number().optional(),
    /** Degrees true, inbound, of a channel axis. */
    bearing: z.number().optional(),
    /** Where a place's label stands, at the end of its leader. */
    labelAt: position.optional(),
  }),
  geometry: z.discriminatedUnion('type', [
    z.object({ type: z.literal('Point'), coordinates: position }),
    z.object({ type: z.literal('LineString'), coordinates: z.array(position) }),
    z.object({ type: z.literal('Polygon'), coordinates: z.array(z.array(position)) }),
  ]),
})
export const coast = z.object({
  type: z.literal('FeatureCollection'),
  /** Source and year of coast and depths, said in the drawing's heading. */
  source: z.string(),
  features: z.array(coastFeature),
})
export type Coast = z.infer<typeof coast>

export const publicSettings = z.object({
  portName: z.string(),
  timeZone: z.string(),
  leadStationId: z.number().int().nullable(),
  /** Short cautions by figure, from the settings; never empty. */
  cautions: z.object({ figures: z.string(), array: z.string(), traceSpeeds: z.string() }),
  coast: coast.nullable(),
})
export type PublicSettings = z.infer<typeof publicSettings>
