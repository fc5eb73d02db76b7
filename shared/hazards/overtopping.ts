/**
 * Overtopping of a breakwater as a screening: the mean discharge over one transect with its likely band, never better than a factor of
 * two or three. For people the largest single volume counts, and at a vertical face any predicted overtopping means no access.
 */
import { determined, undetermined } from './figure.ts'
import type { Figure } from './figure.ts'
import { largestVolume } from './largestVolume.ts'
import { overtoppingFrame } from './overtoppingFrame.ts'
import { slopeDischarge, wallDischarge } from './overtoppingFormulas.ts'
import type { SeaAtToe } from './overtoppingFormulas.ts'
import type { Breakwater, UncertainSeaAtToe } from './breakwater.ts'
import { propagate, together } from './uncertain.ts'

export interface Overtopping {
  /** Mean discharge, m³/s per metre. */
  discharge: Figure
  /** Largest single volume in the time given, m³ per metre. */
  volume: Figure
  /** Words for access: given for vertical faces as soon as any overtopping is predicted. */
  access: string | null
}

/** "No overtopping predicted" below this, m³/s per metre: a tenth of the smallest discharge the manual speaks of, 0.01 l/s per m. */
export const leastDischarge = 1e-6
/** ln of the method's own factor either way: 3 above 0.1 l/s per m, growing to 10 at 0.001 (order of magnitude from the manual). */
const scatterAt = (discharge: number): number => {
  const small = Math.min(1, Math.max(0, (-4 - Math.log10(discharge)) / 2))
  return Math.log(3) + small * (Math.log(10) - Math.log(3))
}

export const noAccess = 'no access for any predicted overtopping at vertical faces'

type Known = [
  height: number,
  energyPeriod: number,
  obliquity: number,
  slope: number,
  roughness: number,
  crest: number,
  depth: number,
]

function dischargeOf(
  kind: Breakwater['kind'],
  [height, energyPeriod, obliquity, slope, roughness, crest, depth]: Known,
): number | null {
  if (!(height > 0) || !(energyPeriod > 0) || !(depth > 0) || !(roughness > 0)) return null
  const sea: SeaAtToe = { height, energyPeriod, obliquity }
  if (kind === 'vertical') return wallDischarge(sea, Math.max(0, crest), depth)
  return slope > 0 ? slopeDischarge(sea, Math.max(0, crest), slope, Math.min(1, roughness), kind) : null
}

/** @param seconds span for which the largest volume is asked */
export function overtopping(sea: UncertainSeaAtToe, breakwater: Breakwater, seconds = 1200): Overtopping {
  const { kind, slope, roughness, freeCrest, toeDepth } = breakwater
  const uncertain = [sea.height, sea.energyPeriod, sea.obliquity, slope, roughness, freeCrest, toeDepth]
  const known = (values: number[]): Known => [
    values[0],
    values[1],
    values[2],
    values[3],
    values[4],
    values[5],
    values[6],
  ]
  const frame = overtoppingFrame(sea, breakwater)
  const refused = refusal(sea, breakwater)
  const value = refused ? null : dischargeOf(kind, known(uncertain.map((one) => one.value)))
  if (refused || value === null) {
    const reason = refused ?? 'the formula has no answer for these inputs'
    return {
      discharge: undetermined(frame, reason),
      volume: largestVolume(null, sea, breakwater, seconds),
      access: null,
    }
  }
  const floor = 1e-12
  const carried = propagate(uncertain, (values) => {
    const moved = dischargeOf(kind, known(values))
    return moved === null ? null : Math.log(Math.max(floor, moved))
  })
  const scatter = together(carried, scatterAt(Math.max(floor, value)))
  const factor = scatter === null ? null : Math.exp(scatter)
  const discharge = determined(frame, {
    value,
    words: value < leastDischarge ? 'no overtopping predicted' : undefined,
    likely: factor === null ? null : { from: value / factor, to: value * factor },
    uncertaintyFrom:
      'height, period, direction, slope, roughness, crest and depth, one standard deviation each, and a factor of 3 (of 10 for very small discharges) for the formula',
  })
  const reached = factor === null ? value : value * factor
  return {
    discharge,
    volume: largestVolume(discharge, sea, breakwater, seconds),
    access: kind === 'vertical' && reached >= leastDischarge ? noAccess : null,
  }
}

function refusal(
  { height, energyPeriod, obliquity }: UncertainSeaAtToe,
  { kind, freeCrest, toeDepth, slope }: Breakwater,
): string | null {
  if (!(toeDepth.value > 0)) return 'the toe is dry'
  if (Math.abs(obliquity.value) >= Math.PI / 2) return 'the waves run along or away from the wall'
  if (!(height.value > 0) || !(energyPeriod.value > 0)) return 'no waves run toward the wall'
  if (kind !== 'vertical' && !(slope.value > 0)) return 'the slope of the face is not known'
  return freeCrest.value >= 0 ? null : 'the crest is under still water: it overflows'
}
