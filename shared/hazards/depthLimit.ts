/**
 * Heights that depth allows: the significant height saturates near 0.6 of the depth, a single wave breaks at the latest near 0.78 of it
 * (McCowan 1894) or at Miche's limit; in shallow water the largest waves are lower than Rayleigh's from H_tr = (0.35 + 5.8 tan α) h on
 * (Battjes & Groenendijk 2000).
 */
import { breakerRules } from './breakerRules.ts'
import { saturation } from './carried.ts'
import { check, determined, input, undetermined } from './figure.ts'
import type { Figure, FigureFrame } from './figure.ts'
import { propagate, together } from './uncertain.ts'
import type { Uncertain } from './uncertain.ts'

export interface DepthLimit {
  /** Highest significant height, m. */
  significant: Figure
  /** Highest single wave, m. */
  single: Figure
  /** Height from which single waves are lower than Rayleigh's, m. */
  transition: Figure
}

/** Observed ratios scatter from 0.5 to 0.7 (from memory): one standard deviation of the 0.6. */
const saturationSd = 0.05

/** @param slope tan α of the bottom there */
export function depthLimit(depth: Uncertain, period: Uncertain, slope: Uncertain): DepthLimit {
  const inputs = [
    input('depth', depth.value, 'm', depth.sd),
    input('peak period', period.value, 's', period.sd),
    input('slope of the bottom', slope.value, '1', slope.sd),
  ]
  const frameOf = (name: string, formula: string, source: string, fromMemory: boolean): FigureFrame => ({
    ...{ unit: 'm', inputs, checks: [check('slope of the bottom', slope.value, '1', 0, 0.1)] },
    method: { name, formula, source, fromMemory, assumptions: ['the depth is that of still water now'] },
  })
  const frames = {
    significant: frameOf('significant height limited by depth', '0.6 h', 'Thornton & Guza 1982, from memory', true),
    single: frameOf(
      'single wave limited by depth',
      'middle of 0.78 h, 0.142 L tanh kh and Weggel’s index',
      'McCowan 1894; Miche 1944; Weggel 1972 (CEM II-4-5 to 7)',
      false,
    ),
    transition: frameOf(
      'end of Rayleigh’s heights',
      '(0.35 + 5.8 tan α) h',
      'Battjes & Groenendijk 2000, from memory',
      true,
    ),
  }
  if (!(depth.value > 0) || !(period.value > 0)) {
    const reason = depth.value > 0 ? 'no period' : 'dry at this depth'
    return {
      significant: undetermined(frames.significant, reason),
      single: undetermined(frames.single, reason),
      transition: undetermined(frames.transition, reason),
    }
  }
  const limits = ([h, t, b]: number[]): number[] =>
    breakerRules.filter(({ madeFor }) => madeFor === 'regular waves').map((rule) => rule.limit(h, t, b))
  const middle = (values: number[]): number | null => {
    if (!(values[0] > 0) || !(values[1] > 0)) return null
    const found = limits(values)
    return (Math.min(...found) + Math.max(...found)) / 2
  }
  const known = limits([depth.value, period.value, slope.value])
  const low = Math.min(...known)
  const high = Math.max(...known)
  return {
    significant: determined(frames.significant, {
      value: saturation * depth.value,
      sd: together(saturationSd * depth.value, depth.sd === null ? null : saturation * depth.sd),
      uncertaintyFrom: 'depth, and 0.05 for the observed ratios',
    }),
    single: determined(frames.single, {
      value: (low + high) / 2,
      sd: together((high - low) / 2, propagate([depth, period, slope], middle)),
      uncertaintyFrom: 'depth, period and slope, and half the spread of the three rules',
    }),
    transition: determined(frames.transition, {
      value: (0.35 + 5.8 * slope.value) * depth.value,
      sd: propagate([depth, slope], ([h, b]) => (0.35 + 5.8 * b) * h),
      uncertaintyFrom: 'depth and slope; no scatter of the method added',
    }),
  }
}
