/**
 * Run-up on a beach: the level above still water that 2 % of the up-rushes exceed, set-up and swash included. Sand: Stockdon, Holman,
 * Howd & Sallenger 2006 (Coastal Eng. 53, 573-588, eqs 18 and 19). Gravel: Poate, McCall & Masselink 2016.
 */
import { check, determined, input, undetermined } from './figure.ts'
import type { Figure, FigureFrame, FigureMethod, RangeCheck } from './figure.ts'
import { deepWaterLength } from './shoaling.ts'
import { surfSimilarity } from './surfSimilarity.ts'
import { propagate, together } from './uncertain.ts'
import type { Uncertain } from './uncertain.ts'

/** Below this surf similarity a beach is dissipative and its slope has no part. */
const dissipativeBelow = 0.3

export interface RunUpParts {
  /** m: still water to the mean level at the shore, to the 2 % level. */
  setUp: number
  runUp: number
  /** Heights of the swash by incident waves and by long waves, m. */
  incidentSwash: number
  longSwash: number
  similarity: number
  isDissipative: boolean
}

/**
 * R₂ = 1.1 {0.35 β √(H₀L₀) + ½ √[H₀L₀ (0.563 β² + 0.004)]}; 0.043 √(H₀L₀) where ξ₀ < 0.3. H₀ in deep water (m), L₀ of the peak period
 * (s), β the slope of the foreshore. Errors: RangeError where one of them is not above zero.
 */
export function stockdonRunUp(deepHeight: number, period: number, slope: number): RunUpParts {
  if (!(deepHeight > 0) || !(period > 0) || !(slope > 0))
    throw new RangeError(`run-up needs height, period and slope above zero: ${deepHeight}, ${period}, ${slope}`)
  const product = deepHeight * deepWaterLength(period)
  const root = Math.sqrt(product)
  const similarity = surfSimilarity(slope, deepHeight, period)
  const isDissipative = similarity < dissipativeBelow
  const setUp = 0.35 * slope * root
  const intermediate = 1.1 * (setUp + 0.5 * Math.sqrt(product * (0.563 * slope * slope + 0.004)))
  return {
    setUp,
    runUp: isDissipative ? 0.043 * root : intermediate,
    incidentSwash: 0.75 * slope * root,
    longSwash: 0.06 * root,
    similarity,
    isDissipative,
  }
}

/** R₂ = 0.33 β^½ T H on gravel: H near the shore before breaking (m), T the mean zero-crossing period (s). */
export const gravelRunUp = (height: number, meanPeriod: number, slope: number): number =>
  0.33 * Math.sqrt(slope) * meanPeriod * height

/** Scatter of the published observations about the formula, m: run-up and set-up, from memory. */
const runUpScatter = 0.38
const setUpScatter = 0.21
/** Of gravel, share of the run-up; the paper's own is not at hand, taken wide. */
const gravelScatterShare = 0.3

export interface SandBeach {
  kind: 'sand'
  /** Significant height in deep water, m, and peak period, s. */
  deepHeight: Uncertain
  period: Uncertain
  /** tan β of the foreshore. */
  slope: Uncertain
}

export interface GravelBeach {
  kind: 'gravel'
  /** Significant height before breaking, m, and mean zero-crossing period, s. */
  height: Uncertain
  meanPeriod: Uncertain
  slope: Uncertain
}

export interface RunUp {
  /** R2 %, m above still water. */
  runUp: Figure
  /** m above still water; not given for gravel. */
  setUp: Figure
  /** Null where it is not determined or the beach is gravel. */
  parts: RunUpParts | null
}

export function runUp(beach: SandBeach | GravelBeach): RunUp {
  return beach.kind === 'sand' ? onSand(beach) : onGravel(beach)
}

const sandMethod = (name: string, formula: string): FigureMethod => ({
  name,
  formula,
  source: 'Stockdon, Holman, Howd & Sallenger 2006, eqs 10, 18, 19; its range of beaches and its scatter from memory',
  fromMemory: true,
  assumptions: [
    'a natural sandy beach, open, waves close to square on',
    'foreshore as surveyed; it changes with every storm',
    'deep-water height by shoaling back, refraction left out',
  ],
})

function onSand({ deepHeight, period, slope }: SandBeach): RunUp {
  const inputs = [
    input('deep-water height', deepHeight.value, 'm', deepHeight.sd),
    input('peak period', period.value, 's', period.sd),
    input('slope of the foreshore', slope.value, '1', slope.sd),
  ]
  const checks: RangeCheck[] = [
    check('slope of the foreshore', slope.value, '1', 0.01, 0.11),
    check('deep-water height', deepHeight.value, 'm', 0.4, 4.1),
    check('peak period', period.value, 's', 3.7, 17),
  ]
  const upper: FigureFrame = {
    ...{ unit: 'm', inputs, checks },
    method: sandMethod(
      'run-up on sand, 2 % exceeded',
      'R₂ = 1.1 {0.35 β √(H₀L₀) + ½ √[H₀L₀ (0.563 β² + 0.004)]}; 0.043 √(H₀L₀) for ξ₀ < 0.3',
    ),
  }
  const lower: FigureFrame = { ...upper, method: sandMethod('set-up at the shore', '0.35 β √(H₀L₀)') }
  const missing = whatIsMissing(deepHeight, period, slope)
  if (missing) return { runUp: undetermined(upper, missing), setUp: undetermined(lower, missing), parts: null }
  const parts = stockdonRunUp(deepHeight.value, period.value, slope.value)
  const sdOf = (which: 'runUp' | 'setUp', scatter: number): number | null =>
    together(
      scatter,
      propagate([deepHeight, period, slope], ([h, t, b]) =>
        h > 0 && t > 0 && b > 0 ? stockdonRunUp(h, t, b)[which] : null,
      ),
    )
  const uncertaintyFrom = (scatter: number): string =>
    `height, period and slope, one standard deviation each, and the formula’s own scatter of ${scatter} m`
  return {
    runUp: determined(upper, {
      value: parts.runUp,
      sd: sdOf('runUp', runUpScatter),
      uncertaintyFrom: uncertaintyFrom(runUpScatter),
      ...(parts.isDissipative ? { words: 'dissipative beach: the slope has no part' } : {}),
    }),
    setUp: determined(lower, {
      ...{ value: parts.setUp, sd: sdOf('setUp', setUpScatter), uncertaintyFrom: uncertaintyFrom(setUpScatter) },
    }),
    parts,
  }
}

function onGravel({ height, meanPeriod, slope }: GravelBeach): RunUp {
  const frame: FigureFrame = {
    unit: 'm',
    method: {
      name: 'run-up on gravel, 2 % exceeded',
      formula: 'R₂ = 0.33 β^½ T H',
      source: 'Poate, McCall & Masselink 2016; which period and which beaches from memory',
      fromMemory: true,
      assumptions: ['T is the mean zero-crossing period', 'H before breaking', 'pure gravel, no sand beneath'],
    },
    inputs: [
      input('height before breaking', height.value, 'm', height.sd),
      input('mean period', meanPeriod.value, 's', meanPeriod.sd),
      input('slope of the beach face', slope.value, '1', slope.sd),
    ],
    checks: [
      check('slope of the beach face', slope.value, '1', 0.05, 0.4),
      check('height before breaking', height.value, 'm', 0.5, 8),
    ],
  }
  const noSetUp = undetermined({ ...frame, inputs: [], checks: [] }, 'the gravel formula gives no set-up of its own')
  const missing = whatIsMissing(height, meanPeriod, slope)
  if (missing) return { runUp: undetermined(frame, missing), setUp: noSetUp, parts: null }
  const value = gravelRunUp(height.value, meanPeriod.value, slope.value)
  const carried = propagate([height, meanPeriod, slope], ([h, t, b]) => gravelRunUp(h, t, Math.max(0, b)))
  const answer = {
    value,
    sd: together(carried, gravelScatterShare * value),
    uncertaintyFrom: 'height, period and slope, one standard deviation each, and 30 % taken for the formula',
  }
  return { runUp: determined(frame, answer), setUp: noSetUp, parts: null }
}

function whatIsMissing(height: Uncertain, period: Uncertain, slope: Uncertain): string | null {
  if (!(slope.value > 0)) return 'the slope of the beach face is not known'
  if (!(height.value > 0)) return 'no waves run toward the shore'
  return period.value > 0 ? null : 'no period'
}
