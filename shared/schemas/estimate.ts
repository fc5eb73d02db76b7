/**
 * What the estimator answers for one window of one array: the contract between `shared/waves`, the server's
 * tables, the wire and the drawings. SI units; directions in degrees true; "cannot be determined" is null with
 * a reason, never NaN.
 */
import { z } from 'zod'

/** QARTOD primary flags: 1 good, 2 not evaluated, 3 suspect or of high interest, 4 fail, 9 missing. */
export const qualityFlag = z.union([z.literal(1), z.literal(2), z.literal(3), z.literal(4), z.literal(9)])
export type QualityFlag = z.infer<typeof qualityFlag>

/**
 * Why no vector is given. `standing-sea`: waves run against each other with locked phases, as before a wall. `surf-zone`: waves break
 * over the array. `clock`: the station's clock is too far off for a live estimate. `not-computed`: the
 * computation of this window failed twice, so nothing is known of it.
 */
export const unresolvedReason = z.enum([
  'too-few-sensors',
  'collinear-array',
  'too-little-data',
  'no-resolvable-wave',
  'ambiguous',
  'geometry-doubtful',
  'standing-sea',
  'surf-zone',
  'clock',
  'not-computed',
])
export type UnresolvedReason = z.infer<typeof unresolvedReason>

export const sensorFinding = z.enum([
  'gap',
  'range',
  'spike',
  'flat-line',
  'rate',
  'clock',
  'position',
  'height',
  'level',
  'missing',
])
export type SensorFinding = z.infer<typeof sensorFinding>

/** One separate train of waves. Standard deviations are one sigma. `from` = `toward` + 180. */
export const waveSystem = z.object({
  /** Identity kept between windows by the tracker; 1 for the leading system of a fresh record. */
  key: z.number().int(),
  name: z.enum(['swell', 'wind sea']),
  significantWaveHeight: z.number(),
  significantWaveHeightSd: z.number().nullable(),
  peakPeriod: z.number(),
  from: z.number(),
  toward: z.number(),
  headingSd: z.number(),
  /** As the lags say, with the bias that directional spread gives still in it, m/s. */
  measuredSpeed: z.number(),
  /** Of the crests as measured by the array, freed of that bias, m/s. */
  speed: z.number(),
  speedSd: z.number(),
  /** Linear theory at the system's own period and the present depth, m/s. */
  linearSpeed: z.number(),
  /** speed / linearSpeed. */
  speedRatio: z.number(),
  /** sqrt(2(1-m1)) in degrees; null when the array cannot tell. */
  directionalSpread: z.number().nullable(),
  slownessEast: z.number(),
  slownessNorth: z.number(),
  /** Covariance of the slowness vector, s²/m². */
  slownessCovariance: z.object({ eastEast: z.number(), eastNorth: z.number(), northNorth: z.number() }),
  /** Frequencies that belong to the system, Hz. */
  band: z.object({ from: z.number(), to: z.number() }),
})
export type WaveSystem = z.infer<typeof waveSystem>

/** One QARTOD test (or one of the array's own) with what it found. */
export const qualityTest = z.object({
  test: z.string(),
  flag: qualityFlag,
  value: z.number().nullable(),
  limit: z.number().nullable(),
  detail: z.string(),
})
export type QualityTest = z.infer<typeof qualityTest>

export const sensorVerdict = z.object({
  id: z.string(),
  used: z.boolean(),
  qualityFlag,
  findings: z.array(sensorFinding),
  /** Share of usable samples in the window, 0 to 1. */
  completeness: z.number(),
  /** The sensor's own significant wave height, pressure corrected, m. */
  significantWaveHeight: z.number().nullable(),
  /** Estimated clock offset in seconds, when the `clock` finding stands. */
  clockOffset: z.number().nullable(),
  clockOffsetSd: z.number().nullable(),
  /** Estimated displacement along the waves' way in metres, when the `position` finding stands. */
  positionOffset: z.number().nullable().default(null),
  positionOffsetSd: z.number().nullable().default(null),
  /** Depth of still water, m, that the sensor's own mean level says; for the drift of one against the others. */
  waterDepth: z.number().nullable().default(null),
})
export type SensorVerdict = z.infer<typeof sensorVerdict>

/** Apparent speed along one pair: a trace speed, never a component of the vector. `lag` positive when `between[1]` is reached later. */
export const traceSpeed = z.object({
  between: z.tuple([z.string(), z.string()]),
  distance: z.number(),
  lag: z.number(),
  lagSd: z.number().nullable(),
  /** |distance / lag|; null where the lag is zero. */
  speed: z.number().nullable(),
  coherence: z.number(),
  /** lag less the lag that the fitted vector gives, s; null without a vector. */
  residual: z.number().nullable(),
})
export type TraceSpeed = z.infer<typeof traceSpeed>

export const subArrayFit = z.object({
  sensors: z.array(z.string()),
  toward: z.number(),
  speed: z.number(),
  agrees: z.boolean(),
})

/** Wave by wave, up-crossing to up-crossing, on the surface within the band of the spectrum. */
export const waveByWave = z.object({
  /** H_1/3, mean height of the highest third, mean over the sensors, m. */
  significantHeight: z.number(),
  /** The highest single wave, m, and the sensor it passed. */
  greatestHeight: z.number(),
  greatestAt: z.string(),
  /** T_z, mean time between up-crossings, s. */
  meanPeriod: z.number(),
  /** Waves counted, mean over the sensors: fewer than 100 say little of H_1/3. */
  waves: z.number(),
  /** The surface was reconstructed from pressure by linear theory. */
  isReconstructed: z.boolean(),
})
export type WaveByWave = z.infer<typeof waveByWave>

/** Two trains of one period against each other with locked phases. */
export const opposedTrains = z.object({
  /** Travel of the stronger train, and of the weaker, degrees true. */
  toward: z.number(),
  opposedToward: z.number(),
  /** s */
  period: z.number(),
  /** Amplitude of the weaker over that of the stronger, 0 to 1. */
  amplitudeRatio: z.number(),
  /** 1: every wave comes back with the same lag; unrelated seas lie near 0. */
  phaseLock: z.number(),
})
export type OpposedTrains = z.infer<typeof opposedTrains>

/** Another method's directional density, in hundredths of its own highest, row by frequency, toward 0°, 10°, 20° … */
export const besideMethod = z.object({
  method: z.string(),
  /** m²/Hz/deg that 100 stands for. */
  highest: z.number(),
  hundredths: z.array(z.array(z.number().int())),
})

export const estimateResult = z.object({
  resolved: z.boolean(),
  reason: unresolvedReason.nullable(),
  qualityFlag,
  significantWaveHeight: z.number().nullable(),
  significantWaveHeightSd: z.number().nullable(),
  peakPeriod: z.number().nullable(),
  meanPeriod: z.number().nullable(),
  energyPeriod: z.number().nullable(),
  /** W/m. */
  energyFlux: z.number().nullable(),
  /** Surge (infragravity) height 4 sqrt(m0) over 0.004 to 0.04 Hz, m; null when no hour of readings stands behind it. */
  surgeHeight: z.number().nullable(),
  /** Of the same hour: Hz, rising and even, and m²/Hz. */
  surgeSpectrum: z
    .object({ frequency: z.array(z.number()), density: z.array(z.number()), degreesOfFreedom: z.number() })
    .nullable()
    .default(null),
  /** Still water depth used, m, and where it came from. */
  waterDepth: z.number(),
  waterDepthSource: z.enum(['level', 'tide', 'nominal']),
  /** Share of usable samples over all sensors, 0 to 1. */
  completeness: z.number(),
  /** Highest first; empty with a refusal. */
  systems: z.array(waveSystem),
  sensors: z.array(sensorVerdict),
  traceSpeeds: z.array(traceSpeed),
  tests: z.array(qualityTest),
  subArrays: z.array(subArrayFit),
  /** Root mean square of the lag residuals, s. */
  lagResidualRms: z.number().nullable(),
  /** The best other cycle (spatial alias) and how its fit compares with the chosen one (0 to 1). */
  runnerUp: z.object({ toward: z.number(), speed: z.number(), ratio: z.number() }).nullable(),
  spectrum: z
    .object({
      /** Hz, rising. */
      frequency: z.array(z.number()),
      /** Surface variance density, m²/Hz. */
      density: z.array(z.number()),
      degreesOfFreedom: z.number(),
      /** Above this no energy is claimed, Hz. */
      cutoff: z.number(),
      /** What a tail S ∝ f^exponent above the cut-off would make of H_m0, m; no height given here holds it. */
      tail: z.object({ exponent: z.number(), significantWaveHeight: z.number() }).nullable().default(null),
    })
    .nullable(),
  /** Directional density on `directions` (toward, degrees true) by `frequency`, m²/Hz/deg; null where the array gives none. */
  directionalSpectrum: z
    .object({
      method: z.string(),
      converged: z.boolean(),
      frequency: z.array(z.number()),
      directions: z.array(z.number()),
      density: z.array(z.array(z.number())),
      /** Conventional beam and Capon's method at the same frequencies. */
      beside: z.array(besideMethod).default([]),
    })
    .nullable(),
  waveByWave: waveByWave.nullable().default(null),
  opposedTrains: opposedTrains.nullable().default(null),
})
export type EstimateResult = z.infer<typeof estimateResult>
