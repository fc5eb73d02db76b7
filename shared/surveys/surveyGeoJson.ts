/** Points of a GeoJSON file (RFC 7946: longitude before latitude, WGS 84). */
import { z } from 'zod'
import type { SensorPosition } from '../schemas/stationSetUpDeployments.ts'
import type { SurveyFault } from '../schemas/stationSetUpSurvey.ts'

export interface SurveyFeature {
  /** Counted from 1. */
  number: number
  properties: Record<string, string>
  position: SensorPosition
}

const collection = z.object({ type: z.literal('FeatureCollection'), features: z.array(z.unknown()) })
const point = z.object({
  type: z.literal('Feature'),
  geometry: z.object({ type: z.literal('Point'), coordinates: z.array(z.number()).min(2) }),
  properties: z.record(z.string(), z.unknown()).nullable(),
})

export function featuresOf(text: string): { features: SurveyFeature[]; faults: SurveyFault[] } {
  const whole = (reason: string) => ({ features: [], faults: [{ line: null, column: null, reason }] })
  let content: unknown
  try {
    content = JSON.parse(text)
  } catch {
    return whole('the file begins like JSON and is none; export it again as GeoJSON')
  }
  const parsed = collection.safeParse(content)
  if (!parsed.success) return whole('the file is no GeoJSON FeatureCollection')
  if (parsed.data.features.length === 0) return whole('the file holds no features')
  const features: SurveyFeature[] = []
  const faults: SurveyFault[] = []
  parsed.data.features.forEach((feature, index) => {
    const number = index + 1
    const read = point.safeParse(feature)
    const reason = read.success ? wrongPosition(read.data.geometry.coordinates) : 'the feature is no point with properties' // prettier-ignore
    if (!read.success || reason !== null) return void faults.push({ line: number, column: null, reason: reason ?? '' })
    const [longitude, latitude] = read.data.geometry.coordinates
    features.push({
      number,
      properties: textOf(read.data.properties ?? {}),
      position: { by: 'geographic', latitude, longitude },
    })
  })
  return { features, faults }
}

function wrongPosition([longitude, latitude]: number[]): string | null {
  if (Math.abs(latitude) > 90) return `latitude ${latitude} is beyond a pole; GeoJSON puts longitude first`
  return Math.abs(longitude) > 180 ? `longitude ${longitude} is not from -180 to 180` : null
}

const textOf = (properties: Record<string, unknown>): Record<string, string> =>
  Object.fromEntries(
    Object.entries(properties).flatMap(([name, value]) =>
      typeof value === 'string' || typeof value === 'number' ? [[name, String(value)]] : [],
    ),
  )
