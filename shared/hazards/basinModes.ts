/**
 * Own periods of a basin by Merian (1828): closed at both ends T_n = 2 l / (n √(g h)), open at the mouth T_n = 4 l / ((2n − 1) √(g h)).
 */
import { standardGravity } from '../waves/dispersion.ts'
import { check, determined, input, undetermined } from './figure.ts'
import type { Figure, FigureFrame } from './figure.ts'
import { propagate } from './uncertain.ts'
import type { Uncertain } from './uncertain.ts'

export type BasinKind = 'closed' | 'open'

/** s, of the n-th mode (from 1). Length and depth in m. Errors: RangeError where they are not above zero. */
export function merianPeriod(
  kind: BasinKind,
  mode: number,
  length: number,
  depth: number,
  gravity = standardGravity,
): number {
  if (!(length > 0) || !(depth > 0))
    throw new RangeError(`a basin needs length and depth above zero: ${length}, ${depth}`)
  const speed = Math.sqrt(gravity * depth)
  return kind === 'closed' ? (2 * length) / (mode * speed) : (4 * length) / ((2 * mode - 1) * speed)
}

export interface BasinMode {
  kind: BasinKind
  /** From 1. */
  mode: number
  /** s */
  period: Figure
}

export interface Basin {
  /** Both where the mouth is neither a wall nor wide open: the truth lies between. */
  kinds: BasinKind[]
  /** Along which it swings, m. */
  length: Uncertain
  /** Of still water now, m. */
  depth: Uncertain
}

/** Longest first. */
export function basinModes(basin: Basin, modes = 3): BasinMode[] {
  const { kinds, length, depth } = basin
  const found = kinds.flatMap((kind) =>
    Array.from({ length: modes }, (_, n): BasinMode => ({ kind, mode: n + 1, period: periodOf(basin, kind, n + 1) })),
  )
  return length.value > 0 && depth.value > 0
    ? found.sort((a, b) => (b.period.value ?? 0) - (a.period.value ?? 0))
    : found
}

function periodOf({ length, depth }: Basin, kind: BasinKind, mode: number): Figure {
  const frame: FigureFrame = {
    unit: 's',
    method: {
      name: kind === 'closed' ? 'own period, closed basin' : 'own period, basin open at its mouth',
      formula: kind === 'closed' ? 'T = 2 l / (n √(g h))' : 'T = 4 l / ((2n − 1) √(g h))',
      source: 'Merian 1828',
      fromMemory: false,
      assumptions: ['a rectangle of even depth; narrows, dredged pockets and the water outside the mouth change it'],
    },
    inputs: [
      input('length', length.value, 'm', length.sd),
      input('depth', depth.value, 'm', depth.sd),
      input('mode', mode, '1', 0),
    ],
    checks: depth.value > 0 ? [check('length over depth', length.value / depth.value, '1', 20, null)] : [],
  }
  if (!(length.value > 0) || !(depth.value > 0))
    return undetermined(frame, depth.value > 0 ? 'no length' : 'the basin is dry')
  return determined(frame, {
    value: merianPeriod(kind, mode, length.value, depth.value),
    sd: propagate([length, depth], ([l, h]) => (l > 0 && h > 0 ? merianPeriod(kind, mode, l, h) : null)),
    uncertaintyFrom: 'length and depth, moved one standard deviation each; no scatter of the method added',
  })
}
