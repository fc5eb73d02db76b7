/**
 * How long waves need from the station to a place along a sounded path: the energy of a group t = ∫ dx / C_g, a single crest t = ∫ dx / c
 * (linear theory; Munk et al. 1963 for groups). It is the time on the way and no warning: the figure it belongs to is a mean of a window
 * that ended some time ago.
 */
import { groupSpeed, phaseSpeed } from '../waves/dispersion.ts'
import { depthAt } from './depths.ts'
import type { PathDepth } from './depths.ts'
import { check, determined, input, undetermined } from './figure.ts'
import type { Figure, FigureFrame } from './figure.ts'
import { propagate } from './uncertain.ts'
import type { Uncertain } from './uncertain.ts'

/** Steps of the midpoint rule between two soundings: 40 leave less than 0.01 % on even slopes. */
const stepsBetween = 40

/** s, along the whole path. Depths in m above zero, period in s. */
export function travelTime(path: readonly PathDepth[], period: number, of: 'groups' | 'crests'): number {
  const speed = of === 'groups' ? groupSpeed : phaseSpeed
  let time = 0
  for (let n = 1; n < path.length; n++) {
    const from = path[n - 1].distance
    const step = (path[n].distance - from) / stepsBetween
    for (let i = 0; i < stepsBetween; i++) time += step / speed(period, depthAt(path, from + (i + 0.5) * step))
  }
  return time
}

export interface Arrival {
  /** s */
  groups: Figure
  crests: Figure
  /** m */
  distance: number
  /** Time for groups less the middle of the window's age, s: below zero what the figure tells has arrived before it was known. Null without a time. */
  notice: number | null
}

export interface ArrivalQuestion {
  /** From the station to the place; null where it is cut by a dry sounding. */
  path: readonly PathDepth[] | null
  period: Uncertain
  /** ± of the level of the water, m: it moves all depths together. */
  levelSd: number | null
  /** ± of the length of the path, share of it. */
  distanceSdShare: number
  /** Length of the window behind the figure and its age, s. */
  windowSeconds: number
  ageSeconds: number
}

export function arrival(question: ArrivalQuestion): Arrival {
  const { path, period, levelSd, distanceSdShare, windowSeconds, ageSeconds } = question
  const distance = path && path.length > 1 ? path[path.length - 1].distance - path[0].distance : 0
  const frameOf = (of: 'groups' | 'crests'): FigureFrame => ({
    unit: 's',
    method: {
      name: of === 'groups' ? 'time of wave groups along the path' : 'time of a crest along the path',
      formula: of === 'groups' ? 't = ∫ dx / Cg' : 't = ∫ dx / c',
      source: 'linear theory; group speed as the speed of energy (Munk et al. 1963)',
      fromMemory: false,
      assumptions: [
        'along the path as sounded; refracted waves take a slightly longer way',
        'no current',
        'no warning time: the figure is a mean over its window',
      ],
    },
    inputs: [
      input('peak period', period.value, 's', period.sd),
      input('length of the path', distance, 'm', distanceSdShare * distance),
      ...(path ?? []).map((point, n) =>
        input(`depth at sounding ${n + 1}`, point.depth, 'm', levelSd, `${Math.round(point.distance)} m along`),
      ),
    ],
    checks: [],
  })
  const refused = refusal(path, period)
  if (refused || !path) {
    const reason = refused ?? 'no path'
    return {
      groups: undetermined(frameOf('groups'), reason),
      crests: undetermined(frameOf('crests'), reason),
      distance,
      notice: null,
    }
  }
  const figure = (of: 'groups' | 'crests') => {
    const frame = frameOf(of)
    const height = path.reduce((least, { depth }) => Math.min(least, depth), Infinity)
    return determined(
      { ...frame, checks: [check('least depth on the path', height, 'm', 0.5, null)] },
      {
        value: travelTime(path, period.value, of),
        sd: propagate([period, { value: 0, sd: levelSd }, { value: 1, sd: distanceSdShare }], ([t, rise, stretch]) => {
          const moved = path.map((point) => ({ ...point, depth: point.depth + rise }))
          return t > 0 && moved.every(({ depth }) => depth > 0) ? stretch * travelTime(moved, t, of) : null
        }),
        uncertaintyFrom: 'period, level of the water and length of the path, moved one standard deviation each',
      },
    )
  }
  const groups = figure('groups')
  return { groups, crests: figure('crests'), distance, notice: groups.value - ageSeconds - windowSeconds / 2 }
}

function refusal(path: readonly PathDepth[] | null, period: Uncertain): string | null {
  if (!path) return 'the path is dry at this level'
  if (path.length < 2) return 'the path has fewer than two soundings'
  if (path.some(({ depth }) => !(depth > 0))) return 'the path is dry at this level'
  return period.value > 0 ? null : 'no period'
}
