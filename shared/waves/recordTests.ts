/**
 * QARTOD tests of an estimate against those before it (waves manual, tests 15, 16 and 20): mean and deviation of the last days, the very
 * same height again and again, a jump. They depend on what was estimated before, so they are no part of the result's fingerprint.
 */
import { turnBetween } from '../directions.ts'
import type { EstimateResult, QualityFlag, QualityTest } from '../schemas/estimate.ts'
import type { QualityLimits } from './qualityLimits.ts'

/** What is remembered of an estimate; `at` in ms since 1970 UTC. */
export interface PastFigures {
  at: number
  significantWaveHeight: number | null
  peakPeriod: number | null
  toward: number | null
}

/** A jump is looked for against the window that ended so long ago, ms: windows of twenty minutes share nothing then. */
export const jumpMs = 30 * 60_000
/** Fewer past windows say nothing of the usual. */
const leastPast = 24
const sameHeight = 1e-6

/** `past` in any order; only windows before `at` count. */
export function judgeAgainstPast(
  result: EstimateResult,
  past: readonly PastFigures[],
  at: number,
  limits: QualityLimits,
): EstimateResult {
  if (result.significantWaveHeight === null) return result
  const before = past.filter((one) => one.at < at)
  // A sea far from the usual of the last days is of high interest, and in a gale it is true: it is told and doubts nothing.
  const doubting = [repeats(result, before, limits), change(result, before, at, limits)]
  const tests = [usual(result, before, limits), ...doubting]
  const worst = doubting.reduce<QualityFlag>((flag, test) => graver(flag, test.flag), result.qualityFlag)
  return { ...result, tests: [...result.tests, ...tests], qualityFlag: worst }
}

/** Fail before suspect before good; what was refused or not evaluated stays what it is. */
function graver(flag: QualityFlag, other: QualityFlag): QualityFlag {
  if (flag === 2 || flag === 9 || flag === 4) return flag
  return other === 4 ? 4 : other === 3 ? 3 : flag
}

function usual(
  { significantWaveHeight }: EstimateResult,
  past: readonly PastFigures[],
  limits: QualityLimits,
): QualityTest {
  const test = 'mean and deviation'
  const heights = past.flatMap((one) => one.significantWaveHeight ?? [])
  const limit = limits.recordDeviations
  if (heights.length < leastPast || significantWaveHeight === null)
    return {
      test,
      flag: 2,
      value: null,
      limit,
      detail: `only ${heights.length} earlier windows to tell the usual from`,
    }
  const mean = heights.reduce((sum, height) => sum + height, 0) / heights.length
  const variance = heights.reduce((sum, height) => sum + (height - mean) ** 2, 0) / (heights.length - 1)
  // Heights of a calm hardly scatter: a tenth of the mean is allowed always.
  const spread = Math.max(Math.sqrt(variance), 0.1 * mean)
  const off = Math.abs(significantWaveHeight - mean) / spread
  const detail = `height ${off.toFixed(1)} sd off the mean ${mean.toFixed(2)} m of ${heights.length} earlier windows`
  return { test, flag: off > limit ? 3 : 1, value: off, limit, detail }
}

function repeats(
  { significantWaveHeight }: EstimateResult,
  past: readonly PastFigures[],
  limits: QualityLimits,
): QualityTest {
  const newestFirst = [...past].sort((a, b) => b.at - a.at)
  let run = 1
  for (const one of newestFirst) {
    if (one.significantWaveHeight === null || significantWaveHeight === null) break
    if (Math.abs(one.significantWaveHeight - significantWaveHeight) > sameHeight) break
    run++
  }
  return {
    test: 'repeated figures',
    flag: run >= limits.failRepeats ? 4 : run >= limits.suspectRepeats ? 3 : 1,
    value: run,
    limit: limits.suspectRepeats,
    detail: run > 1 ? `the very same height in ${run} windows in a row` : 'the height is not that of the window before',
  }
}

function change(result: EstimateResult, past: readonly PastFigures[], at: number, limits: QualityLimits): QualityTest {
  const test = 'rate of change'
  const before = past.find((one) => one.at === at - jumpMs)
  const height = result.significantWaveHeight
  if (!before || before.significantWaveHeight === null || height === null)
    return { test, flag: 2, value: null, limit: limits.heightChange, detail: 'no window of half an hour before' }
  const limit = limits.heightChange + limits.heightChangeShare * before.significantWaveHeight
  const rise = height - before.significantWaveHeight
  const [lead] = result.systems
  const turn = lead && before.toward !== null ? Math.abs(turnBetween(lead.toward, before.toward)) : null
  const longer =
    result.peakPeriod !== null && before.peakPeriod !== null ? Math.abs(result.peakPeriod - before.peakPeriod) : null
  const jumps = [
    ...(Math.abs(rise) > limit ? [`height by ${rise.toFixed(2)} m`] : []),
    ...(longer !== null && longer > limits.periodChange ? [`peak period by ${longer.toFixed(1)} s`] : []),
    ...(turn !== null && turn > limits.headingChange ? [`heading by ${turn.toFixed(0)}°`] : []),
  ]
  return {
    test,
    flag: jumps.length > 0 ? 3 : 1,
    value: Math.abs(rise),
    limit,
    detail: jumps.length > 0 ? `within half an hour ${jumps.join(', ')}` : 'no jump within half an hour',
  }
}
