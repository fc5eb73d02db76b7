/**
 * The whole sea at a place: every system carried there, energies added again. What has no system is carried as it is. The directional
 * spectrum stays behind: at the place each system's own spread, narrowed or widened with the turning, stands for it.
 */
import type { Figure } from './figure.ts'
import type { Sea, SeaSystem } from './sea.ts'
import { propagate } from './uncertain.ts'
import type { Uncertain } from './uncertain.ts'

/** What carrying one system answers, over contours or by a table. */
export interface CarriedSystem {
  system: SeaSystem | null
  height: Figure
  heading: Figure
}

export interface CarriedSea {
  /** Null where no system gets there and there was none without direction either. */
  sea: Sea
  carried: { key: number; name: string; height: Figure; heading: Figure }[]
  /** Systems that do not get there, with the reason. */
  lost: { key: number; name: string; reason: string }[]
  /** Every system that got there did so within the method's range. */
  inRange: boolean
}

/** @param depth of still water at the place, m */
export function carrySea(sea: Sea, depth: number, carry: (system: SeaSystem) => CarriedSystem): CarriedSea {
  const answers = sea.systems.map((system) => ({ key: system.key, name: system.name, ...carry(system) }))
  const systems = answers.flatMap(({ system }) => (system ? [system] : []))
  systems.sort((a, b) => b.height.value - a.height.value)
  const reached = answers.filter(({ system }) => system !== null)
  return {
    sea: {
      ...sea,
      ...{ systems, depth, directional: null },
      height: heightTogether(sea, systems),
      peakPeriod: systems.at(0)?.period ?? null,
    },
    carried: reached.map(({ key, name, height, heading }) => ({ key, name, height, heading })),
    lost: answers.flatMap(({ key, name, system, height }) =>
      system === null ? [{ key, name, reason: height.reason ?? 'not known' }] : [],
    ),
    inRange: reached.every(({ height }) => height.validity.inRange),
  }
}

function heightTogether({ height, systems: before }: Sea, systems: SeaSystem[]): Uncertain {
  const rest = Math.max(0, height.value ** 2 - before.reduce((sum, one) => sum + one.height.value ** 2, 0))
  const sum = (values: number[]): number => Math.sqrt(values.reduce((all, one) => all + one * one, rest))
  const heights = systems.map((one) => one.height)
  return {
    value: sum(heights.map(({ value }) => value)),
    sd: systems.length === 0 ? height.sd : propagate(heights, sum),
  }
}
