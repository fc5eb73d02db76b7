/**
 * The largest single overtopping volume in a span: V_max = a (ln N_ow)^{1/b} of a Weibull distribution whose mean is q T_m/P_ov
 * (EurOtop 2018, ch. 5.5; van der Meer & Janssen 1994; shape b by Hughes et al. 2012 as fitted in the manual). Written down from memory.
 */
import { standardGravity } from '../waves/dispersion.ts'
import { check, determined, input, undetermined } from './figure.ts'
import type { Figure, FigureFrame } from './figure.ts'
import type { Breakwater, UncertainSeaAtToe } from './breakwater.ts'
import { gamma } from './gammaFunction.ts'
import { obliquityFactor, slopeSimilarity } from './overtoppingFormulas.ts'

/** T_m from T_m−1,0: 1/1.1 of it, as the peak period is 1.1 of T_m−1,0 and about 1.2 of T_m. */
const meanPeriodShare = 1.1 / 1.2
/** Either way: scatter of single volumes about the formula. */
const volumeFactor = 2

/**
 * Share of waves that go over: P_ov = exp[−(√(−ln 0.02) R_c/R_u2%)²] on slopes, R_u2% = 1.65 γ ξ H up to 1.0 γ (4 − 1.5/√ξ) H
 * (5.1, 5.2); at walls exp[−1.21 (R_c/H)²] (7.30).
 */
export function overtoppingShare(
  sea: { height: number; energyPeriod: number; obliquity: number },
  breakwater: Breakwater,
): number {
  const { height } = sea
  const crest = Math.max(0, breakwater.freeCrest.value)
  if (breakwater.kind === 'vertical') return Math.exp(-1.21 * (crest / height) ** 2)
  const similarity = slopeSimilarity(breakwater.slope.value, sea)
  const reduction = breakwater.roughness.value * obliquityFactor(sea.obliquity, breakwater.kind)
  const upper = reduction * (4 - 1.5 / Math.sqrt(similarity))
  const runUp = height * Math.min(1.65 * reduction * similarity, Math.max(upper, 0.1))
  return Math.exp(Math.log(0.02) * (crest / runUp) ** 2)
}

/** Weibull shape b = 0.73 + 55 (q/(g H T))^0.8 on slopes; 0.85 at walls, between those of calm and of impulsive conditions. */
export const volumeShape = (
  kind: Breakwater['kind'],
  discharge: number,
  height: number,
  energyPeriod: number,
): number => (kind === 'vertical' ? 0.85 : 0.73 + 55 * (discharge / (standardGravity * height * energyPeriod)) ** 0.8)

export function largestVolume(
  discharge: Figure | null,
  sea: UncertainSeaAtToe,
  breakwater: Breakwater,
  seconds: number,
): Figure {
  const frame: FigureFrame = {
    unit: 'm³/m',
    method: {
      name: 'largest single volume, likely',
      formula: 'V = a (ln N_ow)^(1/b), a = q T_m / (P_ov Γ(1 + 1/b))',
      source: 'EurOtop manual 2018, ch. 5.5; van der Meer & Janssen 1994; Hughes et al. 2012; all from memory',
      fromMemory: true,
      assumptions: [
        'single volumes scatter by a factor of two at least',
        'in the time given, if the sea stays as it is',
      ],
    },
    inputs: [
      input('span', seconds, 's', 0),
      ...(discharge?.value == null ? [] : [input('mean discharge', discharge.value, 'm³/s/m', null)]),
    ],
    checks: discharge?.validity.checks ?? [],
  }
  if (!discharge || discharge.value === null) return undetermined(frame, 'the mean overtopping is not known')
  const { height, energyPeriod, obliquity } = sea
  const period = energyPeriod.value * meanPeriodShare
  const share = overtoppingShare(
    { height: height.value, energyPeriod: energyPeriod.value, obliquity: obliquity.value },
    breakwater,
  )
  const count = (share * seconds) / period
  const checks = [...frame.checks, check('waves that go over in the span', count, '1', 5, null)]
  if (count <= 1) return undetermined({ ...frame, checks }, 'less than one wave in the span is expected to go over')
  const volumeOf = (q: number): number => {
    const shape = volumeShape(breakwater.kind, q, height.value, energyPeriod.value)
    const scale = (q * period) / (share * gamma(1 + 1 / shape))
    return scale * Math.log(count) ** (1 / shape)
  }
  const value = volumeOf(discharge.value)
  const { likely } = discharge
  return determined(
    { ...frame, checks },
    {
      value,
      likely: likely && { from: volumeOf(likely.from) / volumeFactor, to: volumeOf(likely.to) * volumeFactor },
      uncertaintyFrom: 'the likely band of the mean discharge and a factor of 2 for single volumes',
    },
  )
}
