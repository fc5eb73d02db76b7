/**
 * Longshore current in the middle of the surf on a straight beach, by two published forms: V = 1.17 √(g H_b,rms) sin α_b cos α_b
 * (Komar 1979; CEM III-2) and the modified Longuet-Higgins V = 20.7 m √(g H_b) sin 2α_b of the Shore Protection Manual (1984, eq. 4-51).
 * Their spread is part of the ±. Constants from memory.
 */
import { standardGravity } from '../waves/dispersion.ts'
import { check, determined, input, undetermined } from './figure.ts'
import type { Figure, FigureFrame } from './figure.ts'
import { headingOf, wrap } from './refraction.ts'
import { propagate, together } from './uncertain.ts'
import type { Uncertain } from './uncertain.ts'

/** H_rms / H_1/3 of Rayleigh's heights. */
const rootMeanSquareShare = Math.SQRT1_2

/** m/s, of the root-mean-square breaker height (m) and the angle at breaking (rad); signed like the angle. */
export const komarCurrent = (rmsHeight: number, angle: number, gravity = standardGravity): number =>
  1.17 * Math.sqrt(gravity * rmsHeight) * Math.sin(angle) * Math.cos(angle)

/** m/s, of the breaker height (m), the angle at breaking (rad) and the beach slope. */
export const longuetHigginsCurrent = (
  height: number,
  angle: number,
  slope: number,
  gravity = standardGravity,
): number => 20.7 * slope * Math.sqrt(gravity * height) * Math.sin(2 * angle)

export interface LongshoreCurrent {
  /** m/s, the amount. */
  speed: Figure
  /** Heading it sets along the shore, rad from east; null where its side is not told within two standard deviations of the angle. */
  setsToward: number | null
}

/**
 * @param breakerHeight significant height at breaking, m
 * @param incidence angle of travel against the onshore normal at breaking, rad, positive anticlockwise
 * @param seaward shore normal pointing out to sea, rad from east
 */
export function longshoreCurrent(
  breakerHeight: Uncertain | null,
  incidence: Uncertain | null,
  slope: Uncertain,
  seaward: number,
): LongshoreCurrent {
  const frame: FigureFrame = {
    unit: 'm/s',
    method: {
      name: 'longshore current in mid-surf, middle of two forms',
      formula: 'V = 1.17 √(g H_rms) sin α cos α; V = 20.7 m √(g H_b) sin 2α',
      source: 'Komar 1979; Longuet-Higgins 1970 as in SPM 1984 eq. 4-51; constants from memory',
      fromMemory: true,
      assumptions: ['a straight, even beach', 'no tide, wind, rip or structure in it: those can be stronger'],
    },
    inputs: [
      ...(breakerHeight ? [input('significant breaker height', breakerHeight.value, 'm', breakerHeight.sd)] : []),
      ...(incidence ? [input('angle to the onshore normal at breaking', incidence.value, 'rad', incidence.sd)] : []),
      input('slope at the break', slope.value, '1', slope.sd),
    ],
    checks: [
      check('slope at the break', slope.value, '1', 0.005, 0.1),
      ...(incidence ? [check('angle to the onshore normal', Math.abs(incidence.value), 'rad', 0, Math.PI / 4)] : []),
    ],
  }
  if (!breakerHeight || !incidence) {
    return { speed: undetermined(frame, 'the breakers are not known'), setsToward: null }
  }
  const forms = ([height, angle, tanBeta]: number[]): number[] => [
    Math.abs(komarCurrent(rootMeanSquareShare * Math.max(0, height), angle)),
    Math.abs(longuetHigginsCurrent(Math.max(0, height), angle, tanBeta)),
  ]
  const middle = (values: number[]): number => {
    const [a, b] = forms(values)
    return (a + b) / 2
  }
  const known = [breakerHeight.value, incidence.value, slope.value]
  const [a, b] = forms(known)
  const carried = propagate([breakerHeight, incidence, slope], middle)
  const isTold = Math.abs(incidence.value) > 2 * (incidence.sd ?? Math.PI)
  // Waves that travel anticlockwise of the onshore normal push the water the same way along the shore.
  const along = headingOf(Math.sign(incidence.value) * (Math.PI / 2), seaward)
  return {
    speed: determined(frame, {
      value: middle(known),
      sd: together(carried, Math.abs(a - b) / 2),
      uncertaintyFrom:
        'breaker height, angle and slope, one standard deviation each, and half the spread of the two forms',
    }),
    setsToward: isTold ? wrap(along) : null,
  }
}
