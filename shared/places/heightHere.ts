/** The significant height of all systems at the place, as a figure of its own. */
import { determined, input } from '../hazards/figure.ts'
import type { Figure } from '../hazards/figure.ts'
import type { SeaHere } from './seaHere.ts'

export function heightHere({ atStation, here, lost, inRange }: SeaHere): Figure {
  const isCarried = here !== atStation
  const frame = {
    unit: 'm' as const,
    method: {
      name: isCarried ? 'systems carried to the place, energies added' : 'as measured at the station',
      formula: isCarried ? 'H = √(Σ H²)' : 'H_m0 = 4 √m₀',
      source: isCarried
        ? 'sum of variances of separate systems, Longuet-Higgins 1952; each carried by its own method'
        : 'spectral significant height, Longuet-Higgins 1952',
      fromMemory: false,
      assumptions: [
        isCarried ? 'no headland, bar or breakwater between' : 'taken over unchanged from the station to the place',
        ...lost.map(({ reason }) => `a system is left out: ${reason}`),
      ],
    },
    inputs: [
      input('all systems at the station', atStation.height.value, 'm', atStation.height.sd),
      ...here.systems.map(({ name, height }) => input(`${name} here`, height.value, 'm', height.sd)),
    ],
    checks: [],
  }
  const figure = determined(frame, {
    value: here.height.value,
    sd: here.height.sd,
    uncertaintyFrom: isCarried ? 'heights of the systems, each with its carrying' : 'sampling error of the estimate',
  })
  return inRange ? figure : { ...figure, validity: { ...figure.validity, inRange: false } }
}
