/** The design check of an array: what it can read and what speaks against it. Pure, and quick enough while a sensor is dragged. */
import { opposite, radiansFromEast } from '../directions.ts'
import type { PlacedSensor } from '../schemas/stationSetUpDeployments.ts'
import type { DesignCheck, DesignFinding, DesignQuestion } from '../schemas/stationSetUpDesign.ts'
import { phaseSpeed } from '../waves/dispersion.ts'
import { curveDirections, expectedErrors } from './expectedErrors.ts'
import { baselines, sweepFalsePeaks } from './falsePeaks.ts'
import { geometryFindings } from './geometryFindings.ts'
import type { EarlierDeployment } from './geometryFindings.ts'
import { readingFindings, worstOf } from './readingFindings.ts'
import { clockSkewAllowed, systematicErrors } from './systematicErrors.ts'

/** A heading turned by so much is worth asking about a clock, degrees. */
const skewTurn = 0.5
const degree = Math.PI / 180

export interface DesignedArray {
  sensors: readonly PlacedSensor[]
  /** m, against the station's datum. */
  levelOfBed: number
  /** What was in force before it; null for a first survey. */
  earlier: EarlierDeployment | null
}

/** Errors: RangeError for a depth, gravity or period of the question that is not above zero. */
export function checkDesign({ sensors, levelOfBed, earlier }: DesignedArray, question: DesignQuestion): DesignCheck {
  const { waterDepth, gravity, sea } = question
  const speed = phaseSpeed(sea.peakPeriod, waterDepth, gravity)
  const { longest, shortest } = baselines(sensors)
  const sweep = sensors.length < 2 ? { worst: null, aliasFreePeriod: null } : sweepFalsePeaks(sensors, question)
  const curves = expectedErrors(sensors, question)
  const skew = clockSkewAllowed(sensors, speed, skewTurn * degree)
  const systematicHeading = worstSystematic(sensors, speed)
  const worstFrom = worstOf(curves[0].headingSd, question)?.from ?? null
  const along = worstFrom === null ? null : radiansFromEast(opposite(worstFrom))
  const figures = { sweep, curves, systematicHeading, clockSkewAllowed: skew }
  return {
    question,
    worstFalsePeak: sweep.worst,
    aliasFreePeriod: sweep.aliasFreePeriod,
    halfWavePeriod: shortest > 0 ? periodOfLength(2 * shortest, waterDepth, gravity) : null,
    longestBaseline: longest,
    shortestBaseline: shortest,
    worstFrom,
    apertureAlong: along === null ? null : extent(sensors, along),
    apertureAcross: along === null ? null : extent(sensors, along + Math.PI / 2),
    clockSkewAllowed: skew,
    systematicHeading,
    directions: curveDirections,
    curves,
    findings: [
      ...geometryFindings(sensors, { waterDepth, levelOfBed }, earlier),
      ...readingFindings(sensors, question, figures),
    ],
  }
}

/** What a written reason has to be given for. */
export const unresolvedFindings = (findings: readonly DesignFinding[]): DesignFinding[] =>
  findings.filter(({ quality }) => quality !== 'good')

/** Extent of the array in a direction, radians anticlockwise from east; m. */
export function extent(sensors: readonly { east: number; north: number }[], angle: number): number {
  const along = sensors.map(({ east, north }) => east * Math.cos(angle) + north * Math.sin(angle))
  return Math.max(...along) - Math.min(...along)
}

function worstSystematic(sensors: readonly PlacedSensor[], speed: number): number | null {
  const errors = curveDirections.map((from) => systematicErrors(sensors, radiansFromEast(from), speed))
  const known = errors.flatMap((error) => (error ? [Math.sqrt(error.direction) / degree] : []))
  return known.length === 0 ? null : Math.max(...known)
}

/** Period of a wave of the length (m), s: ω² = g k tanh(k h) the other way round. */
function periodOfLength(length: number, depth: number, gravity: number): number {
  const k = (2 * Math.PI) / length
  return (2 * Math.PI) / Math.sqrt(gravity * k * Math.tanh(k * depth))
}
