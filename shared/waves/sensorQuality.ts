/**
 * QARTOD tests on the raw samples of one sensor (U.S. IOOS manuals for water level 2021 and in-situ waves 2019): gap,
 * gross range, spike, flat line, rate of change. Failed samples become missing; the caller's series stays as it was.
 */
import type { QualityFlag, QualityTest, SensorFinding } from '../schemas/estimate.ts'
import type { EstimateSettings } from './window.ts'
import { robustSpread, median } from './robust.ts'
import { defaultQualityLimits } from './qualityLimits.ts'
import { isOutside, signalTests } from './signalTests.ts'
import { dropSpikes } from './spikes.ts'

export interface CheckedSeries {
  /** The samples with failed ones missing (NaN). */
  clean: Float64Array
  findings: SensorFinding[]
  tests: QualityTest[]
  flag: QualityFlag
  /** Share of samples that are left, 0 to 1. */
  completeness: number
}

/**
 * Runs the tests. `scale` is the metres of water that one unit stands for (1 for metres, about 1 for dbar).
 * A share of usable samples below `leastCompleteness` is a fail (4), no sample at all is missing (9).
 */
export function checkSeries(
  id: string,
  raw: Float64Array,
  sampleRate: number,
  waterDepth: number,
  settings: EstimateSettings,
): CheckedSeries {
  const clean = raw.slice()
  for (let i = 0; i < clean.length; i++) if (!Number.isFinite(clean[i])) clean[i] = NaN
  const findings: SensorFinding[] = []
  const tests: QualityTest[] = []
  const note = (
    test: string,
    finding: SensorFinding,
    flag: QualityFlag,
    value: number,
    limit: number,
    detail: string,
  ) => {
    tests.push({ test, flag, value, limit, detail: `${id}: ${detail}` })
    if (flag !== 1) findings.push(finding)
  }
  const present = count(clean)
  if (present === 0) {
    note('gap', 'missing', 9, 0, settings.leastCompleteness, 'no sample in the window')
    return { clean, findings, tests, flag: 9, completeness: 0 }
  }
  const gap = longestGap(clean) / sampleRate
  note(
    'gap',
    'gap',
    gap > settings.longestBridgedGap ? 3 : 1,
    gap,
    settings.longestBridgedGap,
    `longest gap ${gap.toFixed(1)} s`,
  )
  const limits = settings.quality ?? defaultQualityLimits
  for (let i = 0; i < clean.length; i++) if (isOutside(clean[i], limits.instrumentSpan)) clean[i] = NaN
  const reach = settings.rangeShareOfDepth * waterDepth
  const outside = dropOutside(clean, reach)
  note(
    'range',
    'range',
    outside > 0 ? 3 : 1,
    outside,
    0,
    `${outside} samples farther than ${reach.toFixed(1)} m from the middle`,
  )
  const run = dropFlatRuns(clean, settings.flatFailSamples)
  const flatFlag = run >= settings.flatFailSamples ? 4 : run >= settings.flatSuspectSamples ? 3 : 1
  note('flat line', 'flat-line', flatFlag, run, settings.flatFailSamples, `longest run of equal samples ${run}`)
  const spikes = dropSpikes(clean, sampleRate, settings.spikeSigmas)
  note(
    'spike',
    'spike',
    spikes > 0 ? 3 : 1,
    spikes,
    0,
    `${spikes} samples more than ${settings.spikeSigmas} sd off what their neighbours say`,
  )
  const fastest = fastestChange(clean)
  note(
    'rate',
    'rate',
    fastest > rateSigmas ? 3 : 1,
    fastest,
    rateSigmas,
    `fastest change ${fastest.toFixed(1)} sd of the changes`,
  )
  for (const { finding, ...test } of signalTests(id, raw, clean, sampleRate, limits)) {
    tests.push(test)
    if (test.flag === 3 || test.flag === 4) findings.push(finding)
  }
  const completeness = count(clean) / raw.length
  const enough = completeness >= settings.leastCompleteness
  const many = completeness >= limits.suspectCompleteness
  tests.push({
    test: 'percent good',
    flag: !enough ? 4 : many ? 1 : 3,
    value: completeness,
    limit: enough ? limits.suspectCompleteness : settings.leastCompleteness,
    detail: `${id}: ${(100 * completeness).toFixed(1)} % usable`,
  })
  const hasSignal = tests.every(({ test, flag: found }) => test !== 'attenuated signal' || found !== 4)
  const flag: QualityFlag = completeness === 0 ? 9 : !enough || !hasSignal ? 4 : findings.length > 0 || !many ? 3 : 1
  return { clean, findings: [...new Set(findings)], tests, flag, completeness }
}

/** Changes from one sample to the next beyond so many robust standard deviations are of high interest; they are kept. */
const rateSigmas = 10

function count(series: Float64Array): number {
  let present = 0
  for (let i = 0; i < series.length; i++) if (series[i] === series[i]) present++
  return present
}

function longestGap(series: Float64Array): number {
  let longest = 0
  let run = 0
  for (let i = 0; i < series.length; i++) {
    run = series[i] === series[i] ? 0 : run + 1
    if (run > longest) longest = run
  }
  return longest
}

function dropOutside(series: Float64Array, reach: number): number {
  const middle = median(series)
  let dropped = 0
  for (let i = 0; i < series.length; i++) {
    if (!(Math.abs(series[i] - middle) > reach)) continue
    series[i] = NaN
    dropped++
  }
  return dropped
}

/** Longest run of equal samples; runs of `fail` and more become missing. */
function dropFlatRuns(series: Float64Array, fail: number): number {
  let longest = 0
  let start = 0
  for (let i = 1; i <= series.length; i++) {
    if (i < series.length && Math.abs(series[i] - series[start]) < 1e-9) continue
    if (series[start] === series[start]) {
      const run = i - start
      longest = Math.max(longest, run)
      if (run >= fail) series.fill(NaN, start, i)
    }
    start = i
  }
  return longest
}

function fastestChange(series: Float64Array): number {
  const changes = new Float64Array(series.length - 1)
  for (let i = 1; i < series.length; i++) changes[i - 1] = series[i] - series[i - 1]
  const spread = robustSpread(changes)
  if (!(spread > 0)) return 0
  let fastest = 0
  for (let i = 0; i < changes.length; i++) if (Math.abs(changes[i]) > fastest) fastest = Math.abs(changes[i])
  return fastest / spread
}
