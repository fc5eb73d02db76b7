/**
 * Where and how high the sea breaks on a beach: the significant height is carried shoreward over straight parallel contours until it
 * reaches the limit of each published rule. The figure is the middle of the rules, their spread is part of its ±.
 */
import { breakerRules, komarGaughanHeight, weggelIndex } from './breakerRules.ts'
import type { BreakerRule } from './breakerRules.ts'
import { check, determined, input, undetermined } from './figure.ts'
import type { Figure, FigureFrame, FigureUnit } from './figure.ts'
import { isRefused, refract } from './refraction.ts'
import { deepWaterHeight, deepWaterLength } from './shoaling.ts'
import { propagateAll, spreadOf, together } from './uncertain.ts'
import type { Uncertain } from './uncertain.ts'

export interface ShorewardSea {
  /** Significant height of what runs toward the shore, where it was measured, m. */
  height: Uncertain
  /** Peak period, s. */
  period: Uncertain
  /** Angle of travel against the onshore normal there, rad. */
  incidence: Uncertain
  /** Depth of still water there, m. */
  depth: Uncertain
}

export interface RuleAnswer {
  key: BreakerRule['key'] | 'komarGaughan'
  name: string
  source: string
  madeFor: BreakerRule['madeFor']
  fromMemory: boolean
  /** m; null where the rule says that the sea breaks before it is measured. */
  height: number | null
  depth: number | null
  /** rad */
  incidence: number | null
  /** The slope lies within the rule's own. */
  inRange: boolean
}

export interface Breakers {
  /** Significant height at breaking, m. */
  height: Figure
  /** Depth of still water there, m. */
  depth: Figure
  /** Angle against the onshore normal there, rad. */
  incidence: Figure
  rules: RuleAnswer[]
}

interface BreakingPoint {
  height: number
  depth: number
  incidence: number
}

type Known = [height: number, period: number, incidence: number, depth: number, slope: number]

/** The search ends when height and limit differ by less than this share. */
const closeEnough = 1e-9
const mostSteps = 60

/** Where the shoaling and refracting height meets the rule's limit; null where it is over it already, or does not run to the shore. */
export function breakingPoint(rule: Pick<BreakerRule, 'limit'>, known: Known): BreakingPoint | null {
  const [height, period, incidence, from, slope] = known
  const at = (depth: number): BreakingPoint | null => {
    const there = refract(incidence, period, from, depth)
    return isRefused(there) ? null : { height: height * there.heightRatio, depth, incidence: there.angle }
  }
  /** ln of the height over the limit: above zero where the sea has broken. */
  const excess = (depth: number): number => {
    const there = at(depth)
    return there ? Math.log(there.height / rule.limit(depth, period, slope)) : NaN
  }
  if (!(height > 0) || !(from > 0) || !(excess(from) < 0)) return null
  return at(crossing(excess, Math.min(0.01, from / 100), from))
}

/** Where a falling function passes zero, by false position with Illinois' halving (Dowell & Jarratt 1971). */
function crossing(of: (depth: number) => number, shallow: number, deep: number): number {
  let [low, high] = [shallow, deep]
  let [atLow, atHigh] = [of(low), of(high)]
  let held: 'low' | 'high' | null = null
  let middle = high
  for (let step = 0; step < mostSteps; step++) {
    middle = (low * atHigh - high * atLow) / (atHigh - atLow)
    const here = of(middle)
    if (Math.abs(here) < closeEnough) return middle
    if (here > 0) {
      ;[low, atLow] = [middle, here]
      if (held === 'high') atHigh /= 2
      held = 'high'
    } else {
      ;[high, atHigh] = [middle, here]
      if (held === 'low') atLow /= 2
      held = 'low'
    }
  }
  return middle
}

/** Komar & Gaughan's height with the depth of Weggel's index, as CEM II-4-1 does it. */
function byDeepHeight(known: Known): BreakingPoint | null {
  const [height, period, incidence, from, slope] = known
  const near = breakingPoint(breakerRules[0], known)
  if (!near) return null
  const turned = Math.sqrt(Math.cos(incidence) / Math.cos(near.incidence))
  const breaking = komarGaughanHeight(deepWaterHeight(height, period, from) * turned, period)
  const depth = breaking / weggelIndex(breaking, period, slope)
  if (!(depth > 0) || depth >= from) return null
  const there = refract(incidence, period, from, depth)
  return isRefused(there) ? null : { height: breaking, depth, incidence: there.angle }
}

type Way = Omit<RuleAnswer, 'height' | 'depth' | 'incidence' | 'inRange'> & {
  slopes: BreakerRule['slopes']
  find(known: Known): BreakingPoint | null
}

const ways: Way[] = [
  ...breakerRules.map((rule): Way => ({ ...rule, find: (known) => breakingPoint(rule, known) })),
  {
    ...{ key: 'komarGaughan', name: 'Komar & Gaughan with Weggel’s index', source: 'Komar & Gaughan 1972; CEM II-4-8' },
    ...{ madeFor: 'regular waves', fromMemory: false, slopes: { from: 0, to: 0.1 }, find: byDeepHeight },
  },
]

/** Middle of the largest and the smallest of the rules. */
const middleOf = (values: number[]): number => (Math.min(...values) + Math.max(...values)) / 2

/** @param slope tan β of the bottom where the sea breaks */
export function breakers(sea: ShorewardSea, slope: Uncertain): Breakers {
  const inputs = [sea.height, sea.period, sea.incidence, sea.depth, slope]
  const known: Known = [sea.height.value, sea.period.value, sea.incidence.value, sea.depth.value, slope.value]
  const rules = ways.map(({ find, slopes, ...about }): RuleAnswer => {
    const found = find(known)
    return {
      ...{
        key: about.key,
        name: about.name,
        source: about.source,
        madeFor: about.madeFor,
        fromMemory: about.fromMemory,
      },
      ...{ height: found?.height ?? null, depth: found?.depth ?? null, incidence: found?.incidence ?? null },
      inRange: slope.value >= slopes.from && slope.value <= slopes.to,
    }
  })
  const sds = propagateAll(inputs, (moved) => {
    const [height, period, incidence, depth, tanBeta] = moved
    const answers = ways.flatMap(({ find }) => find([height, period, incidence, depth, tanBeta]) ?? [])
    return told.map(({ which }) => (answers.length === 0 ? null : middleOf(answers.map((answer) => answer[which]))))
  })
  const [height, depth, incidence] = told.map(({ which, unit }, index): Figure => {
    const values = rules.flatMap((rule) => rule[which] ?? [])
    if (values.length === 0) return undetermined(frame(unit, sea, slope), refusal(sea))
    const { from, to } = spreadOf(values)
    return determined(frame(unit, sea, slope), {
      value: middleOf(values),
      sd: together(sds[index], (to - from) / 2),
      uncertaintyFrom:
        'height, period, direction, depth and slope, one standard deviation each, and half the spread of the rules',
    })
  })
  return { height, depth, incidence, rules }
}

/** What is told of the breakers, in this order. */
const told: { which: keyof BreakingPoint; unit: FigureUnit }[] = [
  { which: 'height', unit: 'm' },
  { which: 'depth', unit: 'm' },
  { which: 'incidence', unit: 'rad' },
]

function refusal({ height, incidence, depth }: ShorewardSea): string {
  if (!(height.value > 0)) return 'no waves run toward the shore'
  if (Math.abs(incidence.value) >= Math.PI / 2) return 'the waves run along or away from the shore'
  return depth.value > 0 ? 'the sea breaks already where it is measured' : 'no water where the waves are measured'
}

function frame(unit: FigureUnit, sea: ShorewardSea, slope: Uncertain): FigureFrame {
  const deep = sea.depth.value > 0 ? deepWaterHeight(sea.height.value, sea.period.value, sea.depth.value) : 0
  return {
    unit,
    method: {
      name: 'significant breaker, middle of six published rules',
      formula: 'H carried over straight parallel contours until it meets the limit of each rule',
      source:
        'McCowan 1894; Miche 1944; Weggel 1972 and Komar & Gaughan 1972 (CEM II-4-5 to 8); Goda 1974, revised 2010; Thornton & Guza 1982 (from memory)',
      fromMemory: true,
      assumptions: [
        'contours straight and parallel, no bar, no current, no wind on the breaker',
        'rules of regular waves are applied to the significant height; single waves break higher and further out',
        'of the constants, the 0.6 of the depth is from memory',
      ],
    },
    inputs: [
      input('height toward the shore', sea.height.value, 'm', sea.height.sd),
      input('peak period', sea.period.value, 's', sea.period.sd),
      input('angle to the onshore normal', sea.incidence.value, 'rad', sea.incidence.sd),
      input('depth where measured', sea.depth.value, 'm', sea.depth.sd),
      input('slope at the break', slope.value, '1', slope.sd),
    ],
    checks: [
      check('slope at the break', slope.value, '1', 0, 0.1),
      // CEM II-4: Weggel's index holds up to this steepness in deep water; the bound is from memory.
      check('deep-water steepness', deep / deepWaterLength(sea.period.value), '1', 0, 0.06),
      check('angle to the onshore normal', Math.abs(sea.incidence.value), 'rad', 0, (75 * Math.PI) / 180),
    ],
  }
}
