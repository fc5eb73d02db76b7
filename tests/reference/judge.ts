/**
 * Holds an estimate against the known truth of a reference case. The cases are recordings made by an independent generator (linear
 * theory, many directions at every frequency); `crlb` is the Cramér-Rao standard deviation that physics allows for that record.
 */
import { z } from 'zod'
import { turnBetween } from '../../shared/directions.ts'
import type { EstimateResult } from '../../shared/schemas/estimate.ts'

const system = z.object({
  Hm0: z.number(),
  Tp: z.number(),
  spread: z.number(),
  meanToDirection: z.number(),
  peakPhaseSpeed: z.number(),
  crlb: z.object({ headingStd: z.number(), speedStd: z.number() }).optional(),
})
type TrueSystem = z.infer<typeof system>

export const caseTruth = z.object({
  expect: z.string(),
  systems: z.array(system),
  sampleHm0NoiseFree: z.array(z.number()),
  tideLevelStartEnd: z.array(z.number()).optional(),
  faults: z.array(z.object({ kind: z.string(), sensor: z.string().optional() })).default([]),
})
export type CaseTruth = z.infer<typeof caseTruth>

export const caseStation = z.object({
  name: z.string(),
  waterDepth: z.number(),
  sensors: z.array(z.object({ id: z.string() })),
})
export type CaseStation = z.infer<typeof caseStation>

export interface Judgement {
  /** What is out of its limits; empty when the case is within them. */
  faults: string[]
  figures: string[]
  /** Heading error over bound, heading error in degrees, speed error in %, of each random system. */
  errors: { overBound: number; heading: number; speedPercent: number }[]
}

const headingLimit = (bound: number): number => Math.max(1, 3 * bound)
const speedLimit = (boundPercent: number): number => Math.max(2.5, 3 * boundPercent)
const spreadLimit = (spread: number): number => Math.max(3.5, 0.2 * spread)
const heightLimitPercent = 6
const periodLimitPercent = 6

const percent = (estimate: number, truth: number): number => 100 * (estimate / truth - 1)
const signed = (value: number): string => (value >= 0 ? '+' : '') + value.toFixed(2)

/** Linear theory by Newton's method, apart from the program's own. */
function phaseSpeed(period: number, depth: number): number {
  const omega = (2 * Math.PI) / period
  const y = (omega * omega * depth) / 9.81
  let x = y / Math.sqrt(Math.tanh(y))
  for (let i = 0; i < 8; i++) x -= (x * Math.tanh(x) - y) / (Math.tanh(x) + x / Math.cosh(x) ** 2)
  return (omega * depth) / x
}

/** Reasons that count as the refusal expected. */
function allowedReasons(expected: string): string[] {
  if (expected.includes('one line')) return ['collinear-array']
  if (/two|few/.test(expected)) return ['too-few-sensors']
  return ['no-resolvable-wave', 'too-little-data']
}

type Estimated = EstimateResult['systems'][number]

/** Which estimate belongs to which true system: the pairing with the least distance in period and heading. */
function pairUp(systems: readonly TrueSystem[], estimates: readonly Estimated[]): (Estimated | undefined)[] {
  const distance = (t: TrueSystem, e: Estimated) =>
    Math.abs(Math.log(e.peakPeriod / t.Tp)) / 0.06 + Math.abs(turnBetween(e.toward, t.meanToDirection)) / 20
  let best: { cost: number; chosen: (Estimated | undefined)[] } = { cost: Infinity, chosen: [] }
  const go = (i: number, cost: number, chosen: (Estimated | undefined)[]) => {
    if (i === systems.length) {
      if (cost < best.cost) best = { cost, chosen }
      return
    }
    for (const e of estimates) if (!chosen.includes(e)) go(i + 1, cost + distance(systems[i], e), [...chosen, e])
    go(i + 1, cost + 1000, [...chosen, undefined])
  }
  go(0, 0, [])
  return best.chosen
}

export function judge(truth: CaseTruth, answer: EstimateResult, station: CaseStation): Judgement {
  return truth.expect.startsWith('refuse') ? judgeRefusal(truth, answer) : judgeVectors(truth, answer, station)
}

function judgeRefusal(truth: CaseTruth, answer: EstimateResult): Judgement {
  const faults: string[] = []
  if (answer.resolved) faults.push(`resolved a wave where none can be (${truth.expect})`)
  if (!allowedReasons(truth.expect).includes(String(answer.reason))) faults.push(`reason ${answer.reason}`)
  if (answer.systems.length > 0) faults.push('a heading or speed in spite of the refusal')
  if (![2, 3, 4, 9].includes(answer.qualityFlag)) faults.push(`quality flag ${answer.qualityFlag} with a refusal`)
  return { faults, figures: [`refused: ${answer.reason}`], errors: [] }
}

function judgeVectors(truth: CaseTruth, answer: EstimateResult, station: CaseStation): Judgement {
  if (!answer.resolved) return { faults: [`not resolved: ${answer.reason}`], figures: [], errors: [] }
  const faults: string[] = []
  const figures: string[] = []
  const errors: Judgement['errors'] = []
  const expect = (ok: boolean, text: string) => {
    if (!ok) faults.push(text)
  }
  const [levelStart, levelEnd] = truth.tideLevelStartEnd ?? [0, 0]
  const depth = station.waterDepth + (levelStart + levelEnd) / 2
  const chosen = pairUp(truth.systems, answer.systems)
  const height = answer.significantWaveHeight ?? 0
  expect([1, 2, 3].includes(answer.qualityFlag), `quality flag ${answer.qualityFlag} with a vector`)
  const heights = answer.systems.map((s) => s.significantWaveHeight)
  expect(
    heights.every((h, i) => i === 0 || h <= heights[i - 1]),
    'systems not highest first',
  )
  for (const extra of answer.systems.filter((s) => !chosen.includes(s)))
    expect(
      (extra.significantWaveHeight / height) ** 2 < 0.1,
      `a system that is not there: ${extra.peakPeriod.toFixed(1)} s`,
    )
  expect(answer.sensors.length === station.sensors.length, 'not every sensor is reported')
  const traces = answer.traceSpeeds
  const traced = traces.every((t) => t.speed === null || Math.abs((t.speed * Math.abs(t.lag)) / t.distance - 1) < 0.01)
  expect(traces.length > 0 && traced, 'trace speeds missing, or not distance by lag')
  truth.systems.forEach((t, index) => {
    const found = chosen[index]
    if (!found) {
      faults.push(`no estimate for the system of ${t.Tp} s`)
      return
    }
    const bound = t.crlb?.headingStd ?? 0
    const speedBound = (100 * (t.crlb?.speedStd ?? 0)) / t.peakPhaseSpeed
    const heading = turnBetween(found.toward, t.meanToDirection)
    // Speed is held against theory at the estimate's own period, so that the sampling error of the period is not counted twice.
    const expectedSpeed = (t.peakPhaseSpeed * phaseSpeed(found.peakPeriod, depth)) / phaseSpeed(t.Tp, depth)
    const speed = percent(found.speed, expectedSpeed)
    const period = percent(found.peakPeriod, t.Tp)
    expect(Math.abs(turnBetween(found.from, found.toward)) > 179.9, 'from and toward are not opposite')
    expect(Math.abs(heading) <= headingLimit(bound), `heading off by ${signed(heading)}°`)
    expect(Math.abs(speed) <= speedLimit(speedBound), `speed off by ${signed(speed)} %`)
    expect(
      found.headingSd > 0 &&
        Math.abs(heading) <= Math.max(0.5, 4 * found.headingSd) &&
        found.headingSd <= Math.max(0.5, 6 * bound),
      `heading ± ${found.headingSd.toFixed(2)}° beside an error of ${signed(heading)}° (bound ${bound.toFixed(2)}°)`,
    )
    expect(
      found.speedSd > 0 && Math.abs(speed) <= Math.max(1, (400 * found.speedSd) / found.speed),
      `speed ± ${found.speedSd.toFixed(3)} m/s beside an error of ${signed(speed)} %`,
    )
    expect(Math.abs(period) <= periodLimitPercent, `peak period off by ${signed(period)} %`)
    if (t.spread > 0)
      expect(
        Math.abs((found.directionalSpread ?? Infinity) - t.spread) <= spreadLimit(t.spread),
        `spread ${found.directionalSpread?.toFixed(1)}° against ${t.spread}°`,
      )
    if (truth.systems.length > 1)
      expect(
        Math.abs(percent(found.significantWaveHeight, t.Hm0)) <= 15,
        `height ${found.significantWaveHeight.toFixed(2)} m against ${t.Hm0} m`,
      )
    if (bound > 0.05)
      errors.push({ overBound: Math.abs(heading) / bound, heading: Math.abs(heading), speedPercent: Math.abs(speed) })
    figures.push(
      `heading ${signed(heading)}° (bound ${bound.toFixed(2)}) speed ${signed(speed)} % (${speedBound.toFixed(2)}) Tp ${signed(period)} %`,
    )
  })
  const sample = truth.sampleHm0NoiseFree.reduce((sum, h) => sum + h, 0) / truth.sampleHm0NoiseFree.length
  const heightError = percent(height, sample)
  expect(Math.abs(heightError) <= heightLimitPercent, `height off by ${signed(heightError)} %`)
  figures.push(`H ${signed(heightError)} %`)
  judgeSensors(truth, answer, expect)
  return { faults, figures, errors }
}

const findingsOfFault: Record<string, string[]> = {
  clockOffset: ['clock', 'position'],
  misSurveyed: ['clock', 'position'],
  flatline: ['flat-line'],
}

function judgeSensors(truth: CaseTruth, answer: EstimateResult, expect: (ok: boolean, text: string) => void): void {
  const verdict = (id: string | undefined) => answer.sensors.find((sensor) => sensor.id === id)
  const named = truth.faults.filter((fault) => fault.kind in findingsOfFault)
  for (const fault of named) {
    const found = verdict(fault.sensor)?.findings.some((finding) => findingsOfFault[fault.kind].includes(finding))
    expect(found === true, `${fault.kind} of sensor ${fault.sensor} not found`)
    expect(verdict(fault.sensor)?.used === false, `sensor ${fault.sensor} (${fault.kind}) was used`)
  }
  const guilty = named.map((fault) => fault.sensor)
  const accused = answer.sensors.filter((s) => s.findings.includes('clock') || s.findings.includes('position'))
  expect(
    answer.sensors.every((s) => s.used || guilty.includes(s.id)),
    'a healthy sensor was left out',
  )
  expect(
    accused.every((s) => guilty.includes(s.id)),
    'a healthy sensor was accused',
  )
}
