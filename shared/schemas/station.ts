/** Stations, their arrays, and what is live of them. SI units; directions in degrees true; times ISO 8601 UTC. */
import { z } from 'zod'
import { estimateResult, qualityFlag, unresolvedReason, waveSystem } from './estimate.ts'

const time = z.iso.datetime()

export const deploymentSensor = z.object({
  letter: z.string(),
  serial: z.string(),
  kind: z.enum(['pressure', 'surface']),
  east: z.number(),
  north: z.number(),
  heightAboveBed: z.number(),
  positionSd: z.number(),
})
export type DeploymentSensor = z.infer<typeof deploymentSensor>

export const deploymentView = z.object({
  id: z.number().int(),
  validFrom: time,
  /** Still water depth below datum, m. */
  waterDepth: z.number(),
  sensors: z.array(deploymentSensor),
})
export type DeploymentView = z.infer<typeof deploymentView>

/** The telemetry link of a station, as the server sees it. */
export const linkView = z.object({
  state: z.enum(['connected', 'silent', 'never']),
  /** End of the newest durable reading. */
  lastReadingAt: time.nullable(),
  /** Station's clock less the server's, s; null when not known. */
  clockOffsetSeconds: z.number().nullable(),
  /** Share of the last 20 minutes that is there, 0 to 1: a window needs 0.8. */
  recordShare: z.number(),
})
export type LinkView = z.infer<typeof linkView>

const estimateOrigin = z.enum(['live', 'late', 'import', 'recompute', 'demonstration'])

/** The newest revision of the newest window of a station, without the bulky detail. */
export const currentEstimate = z.object({
  stationId: z.number().int(),
  windowStartsAt: time,
  windowEndsAt: time,
  revision: z.number().int(),
  computedAt: time,
  origin: estimateOrigin,
  resolved: z.boolean(),
  reason: unresolvedReason.nullable(),
  qualityFlag,
  completeness: z.number(),
  significantWaveHeight: z.number().nullable(),
  significantWaveHeightSd: z.number().nullable(),
  peakPeriod: z.number().nullable(),
  meanPeriod: z.number().nullable(),
  waterDepth: z.number(),
  surgeHeight: z.number().nullable(),
  sensorsUsed: z.number().int(),
  sensorsDeployed: z.number().int(),
  /** Highest first. The vector shown is the first one's. */
  systems: z.array(waveSystem),
})
export type CurrentEstimate = z.infer<typeof currentEstimate>

export const stationView = z.object({
  id: z.number().int(),
  code: z.string(),
  shortName: z.string(),
  name: z.string(),
  latitude: z.number(),
  longitude: z.number(),
  state: z.enum(['active', 'maintenance', 'retired']),
  isLead: z.boolean(),
  staleAfterSeconds: z.number().int(),
  sampleRate: z.number(),
  windowSeconds: z.number().int(),
  hopSeconds: z.number().int(),
  landSectors: z.array(z.tuple([z.number(), z.number()])),
  deployment: deploymentView.nullable(),
  link: linkView,
  /** Newest estimate, stale or not: the reader judges by windowEndsAt and staleAfterSeconds. */
  estimate: currentEstimate.nullable(),
  /** Newest estimate with a trusted vector (quality 1 or 3, resolved), for "last good". */
  lastGood: currentEstimate.nullable(),
})
export type StationView = z.infer<typeof stationView>

/** Everything about one estimate and how it was made. */
export const estimateView = currentEstimate.extend({
  deploymentId: z.number().int(),
  settingsId: z.number().int(),
  softwareVersion: z.string(),
  inputCommitId: z.number().int().nullable(),
  resultDigest: z.string(),
  /** Null where the detail has passed its retention, or for a demonstration estimate without readings. */
  detail: estimateResult.nullable(),
  /** Said wherever the estimate is shown: "invented for the demonstration, no readings behind it". */
  note: z.string().nullable(),
})
export type EstimateView = z.infer<typeof estimateView>

/** One point of the bearing ribbon and of the strips. */
export const seriesPoint = z.object({
  at: time,
  qualityFlag,
  resolved: z.boolean(),
  toward: z.number().nullable(),
  significantWaveHeight: z.number().nullable(),
  /** Of the leading system. */
  height: z.number().nullable(),
  period: z.number().nullable(),
  speed: z.number().nullable(),
  spread: z.number().nullable(),
})
export type SeriesPoint = z.infer<typeof seriesPoint>

export const seriesView = z.object({
  stationId: z.number().int(),
  from: time,
  to: time,
  stepSeconds: z.number().int(),
  /** Rising in time; a missing window has no point, so gaps show. */
  points: z.array(seriesPoint),
})
export type SeriesView = z.infer<typeof seriesView>

/** Newest readings of all sensors for the record section: metres of surface or of equivalent head, mean removed. */
export const tracesChunk = z.object({
  stationId: z.number().int(),
  startsAt: time,
  interval: z.number(),
  sensors: z.array(z.string()),
  /** values[i][n]; null = missing. Raw units: m or dbar. */
  values: z.array(z.array(z.number().nullable())),
})
export type TracesChunk = z.infer<typeof tracesChunk>

export const stationKeyView = z.object({
  id: z.number().int(),
  prefix: z.string(),
  createdAt: time,
  validUntil: time.nullable(),
  revokedAt: time.nullable(),
  lastUsedAt: time.nullable(),
})
/** What is asked for when a key is issued; null: it holds until it is revoked. */
export const stationKeyOrder = z.strictObject({ validUntil: time.nullable() })
/** `key` is shown once and kept by nobody but the station. */
export const issuedStationKey = stationKeyView.extend({ key: z.string() })

export const healthHour = z.object({
  hour: time,
  letter: z.string(),
  expected: z.number().int(),
  received: z.number().int(),
  late: z.number().int(),
  repeated: z.number().int(),
  conflicting: z.number().int(),
  clockOffset: z.number().nullable(),
  latencyP95: z.number().nullable(),
})
