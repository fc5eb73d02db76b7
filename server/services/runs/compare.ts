/** A run held against the operational record, window by window. */
import { turnBetween } from '../../../shared/directions.ts'
import type { ComparedWindow, RunComparison } from '../../../shared/schemas/run.ts'
import type { Parts } from '../../config/parts.ts'
import { select } from '../../models/sql.ts'
import { readRun } from './read.ts'

interface Pair {
  windowEndsAt: Date
  runVersion: string
  recordVersion: string | null
  isSame: number
  runResolved: number
  runHeight: number | null
  runToward: number | null
  runSpeed: number | null
  runPeriod: number | null
  recordResolved: number | null
  recordHeight: number | null
  recordToward: number | null
  recordSpeed: number | null
  recordPeriod: number | null
}

/** The record as it stands now: the highest revision of run 0. */
const pairsOfRun = `
  SELECT r.windowEndsAt, r.softwareVersion AS runVersion, o.softwareVersion AS recordVersion,
    r.resultDigest = o.resultDigest AS isSame,
    r.resolved AS runResolved, r.significantWaveHeight AS runHeight, r.towardDegrees AS runToward,
    r.speed AS runSpeed, r.period AS runPeriod,
    o.resolved AS recordResolved, o.significantWaveHeight AS recordHeight, o.towardDegrees AS recordToward,
    o.speed AS recordSpeed, o.period AS recordPeriod
  FROM estimates r LEFT JOIN estimates o
    ON o.stationId = r.stationId AND o.windowEndsAt = r.windowEndsAt AND o.runId = 0
      AND NOT EXISTS (SELECT 1 FROM estimates newer WHERE newer.stationId = o.stationId
        AND newer.windowEndsAt = o.windowEndsAt AND newer.runId = 0 AND newer.revision > o.revision)
  WHERE r.stationId = :stationId AND r.runId = :runId AND r.windowEndsAt > :from AND r.windowEndsAt <= :to
  ORDER BY r.windowEndsAt`

const shownAtMost = 50
type Difference = 'height' | 'heading' | 'speed'
/** What counts as one step of difference where the three are put in one order: m, degrees, m/s. */
const steps: Record<Difference, number> = { height: 0.1, heading: 2, speed: 0.2 }

export async function compareRun(parts: Parts, stationId: number, runId: number): Promise<RunComparison> {
  const run = await readRun(parts, stationId, runId)
  const span = { from: new Date(run.startsAt), to: new Date(run.endsAt) }
  const pairs = await select<Pair>(parts.sequelize, pairsOfRun, { stationId, runId, ...span })
  const compared = pairs.flatMap((pair) => (pair.recordVersion === null ? [] : [windowOf(pair)]))
  const versions = new Set(pairs.flatMap(({ recordVersion }) => recordVersion ?? []))
  for (const { runVersion } of pairs) versions.delete(runVersion)
  const largest = (of: Difference) => greatest(compared, (one) => (one[of] === null ? null : Math.abs(one[of])))
  return {
    runId,
    windows: pairs.length,
    compared: compared.length,
    same: compared.filter(({ isSame }) => isSame).length,
    otherVersions: [...versions].sort(),
    resolvedInRunOnly: compared.filter(({ run: r, operational }) => r.resolved && !operational.resolved).length,
    resolvedInRecordOnly: compared.filter(({ run: r, operational }) => !r.resolved && operational.resolved).length,
    largest: { height: largest('height'), heading: largest('heading'), speed: largest('speed') },
    mean: {
      height: meanOf(compared, 'height'),
      heading: meanOf(compared, 'heading'),
      speed: meanOf(compared, 'speed'),
    },
    most: compared
      .filter(({ isSame }) => !isSame)
      .sort((a, b) => sizeOf(b) - sizeOf(a))
      .slice(0, shownAtMost),
  }
}

function windowOf(pair: Pair): ComparedWindow {
  return {
    windowEndsAt: pair.windowEndsAt.toISOString(),
    operational: {
      resolved: Boolean(pair.recordResolved),
      significantWaveHeight: pair.recordHeight,
      toward: pair.recordToward,
      speed: pair.recordSpeed,
      period: pair.recordPeriod,
    },
    run: {
      resolved: Boolean(pair.runResolved),
      significantWaveHeight: pair.runHeight,
      toward: pair.runToward,
      speed: pair.runSpeed,
      period: pair.runPeriod,
    },
    isSame: Boolean(pair.isSame),
    height: less(pair.runHeight, pair.recordHeight),
    heading:
      pair.runToward === null || pair.recordToward === null ? null : turnBetween(pair.runToward, pair.recordToward),
    speed: less(pair.runSpeed, pair.recordSpeed),
  }
}

const less = (a: number | null, b: number | null): number | null => (a === null || b === null ? null : a - b)

/** In steps; a vector that only one of the two has counts before any difference of figures. */
function sizeOf(one: ComparedWindow): number {
  if (one.run.resolved !== one.operational.resolved) return Infinity
  return Math.max(
    Math.abs(one.height ?? 0) / steps.height,
    Math.abs(one.heading ?? 0) / steps.heading,
    Math.abs(one.speed ?? 0) / steps.speed,
  )
}

function greatest(all: readonly ComparedWindow[], by: (one: ComparedWindow) => number | null): ComparedWindow | null {
  return all.reduce<ComparedWindow | null>((best, one) => {
    const size = by(one)
    return size !== null && (best === null || size > (by(best) ?? -1)) ? one : best
  }, null)
}

function meanOf(all: readonly ComparedWindow[], of: Difference): number | null {
  const values = all.flatMap((one) => one[of] ?? [])
  return values.length === 0 ? null : values.reduce((sum, value) => sum + value, 0) / values.length
}
