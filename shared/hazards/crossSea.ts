/**
 * Cross-sea and along-sea: the significant heights of what runs across and along an axis, in metres. Across = √(Σ H² E[sin²]), along =
 * √(Σ H² E[cos²]) over all systems, E over the directional spectrum: energies are added and the directional spread counts, so a following
 * sea with spread still has a height across. Total height times the sine of one angle would hide the second system and the spread.
 * Source: energy of the component of surface slope or orbital motion across an axis in a directional spectrum, Longuet-Higgins,
 * Cartwright & Smith 1963.
 */
import { input, determined, undetermined } from './figure.ts'
import type { Figure, FigureFrame, FigureInput } from './figure.ts'
import type { Sea, SeaSystem } from './sea.ts'
import { assumedSpread, densityParts, shareAcross } from './spreadMoments.ts'
import type { DensityPart } from './spreadMoments.ts'
import { propagate } from './uncertain.ts'
import type { Uncertain } from './uncertain.ts'

/** One system's part; `key` null is energy that belongs to no system. */
export interface SeaPart {
  key: number | null
  name: string
  /** m */
  height: number
  across: number
  along: number
  /** Share of the energy across and along, 0 to 1. */
  acrossShare: number
  alongShare: number
  /** Spread that was counted: of the directional spectrum, of the system's own fit, or assumed. */
  spreadFrom: 'directional spectrum' | 'spread of the system' | 'assumed spread' | 'direction not known'
}

export interface CrossSea {
  across: Figure
  along: Figure
  /** Highest across first; empty where nothing can be determined. */
  parts: SeaPart[]
}

/** Energy without a system is left out below this share of the whole. */
const leastRest = 0.02
/** ± of a spread, share of it: the estimate gives none. */
const spreadSdShare = 0.2

/**
 * @param axis heading of the axis, rad from east; either end gives the same heights
 * Refused where the sea has no direction: a height without one says nothing about an axis.
 */
export function crossSea(sea: Sea, axis: number): CrossSea {
  const inputs = inputsOf(sea)
  if (sea.systems.length === 0) {
    const refused = (which: 'across' | 'along'): Figure =>
      undetermined(frame(which, sea, inputs), 'no resolvable wave: the direction is not known')
    return { across: refused('across'), along: refused('along'), parts: [] }
  }
  const parts = partsOf(sea, axis)
  return { across: total('across', sea, axis, parts, inputs), along: total('along', sea, axis, parts, inputs), parts }
}

const usable = ({ directional }: Sea): boolean => directional?.converged === true

function frame(which: 'across' | 'along', sea: Sea, inputs: FigureInput[]): FigureFrame {
  const isAssumed = !usable(sea) && sea.systems.some(({ spread }) => spread === null)
  return {
    unit: 'm',
    method: {
      name: `height ${which} the axis, spread counted`,
      formula: `H ${which} = √(Σ H² E[${which === 'across' ? 'sin' : 'cos'}²(θ − axis)])`,
      source: 'directional energy resolved on an axis: Longuet-Higgins, Cartwright & Smith 1963',
      fromMemory: isAssumed,
      assumptions: [
        usable(sea)
          ? `E over the directional spectrum (${sea.directional?.method})`
          : 'E over cos²ˢ spreading with each system’s own spread: no settled directional spectrum',
        ...(isAssumed
          ? ['spread of a system the array cannot tell is assumed (s 25 swell, 10 wind sea, from memory)']
          : []),
        'energy that belongs to no system and has no direction counts half across, half along',
        'the sea as measured at the station',
      ],
    },
    inputs,
    checks: [],
  }
}

function inputsOf({ systems, height }: Sea): FigureInput[] {
  return [
    ...systems.flatMap((system) => [
      input(`${system.name}, height`, system.height.value, 'm', system.height.sd),
      input(`${system.name}, heading`, system.heading.value, 'rad', system.heading.sd, 'from east, anticlockwise'),
      input(
        `${system.name}, spread`,
        system.spread ?? assumedSpread(system.name),
        'rad',
        null,
        system.spread === null ? 'assumed' : null,
      ),
    ]),
    input('all systems, height', height.value, 'm', height.sd),
  ]
}

function partsOf(sea: Sea, axis: number): SeaPart[] {
  const found = usable(sea) && sea.directional ? densityParts(sea.directional, sea.systems, axis) : null
  const energies = found ? ofDensity(sea, found) : ofSystems(sea, axis)
  const allAcross = energies.reduce((sum, one) => sum + one.across, 0)
  const allAlong = energies.reduce((sum, one) => sum + one.energy - one.across, 0)
  return energies
    .map(({ key, name, energy, across, spreadFrom }) => ({
      ...{ key, name, spreadFrom },
      height: Math.sqrt(energy),
      across: Math.sqrt(across),
      along: Math.sqrt(energy - across),
      acrossShare: allAcross > 0 ? across / allAcross : 0,
      alongShare: allAlong > 0 ? (energy - across) / allAlong : 0,
    }))
    .sort((a, b) => b.across - a.across)
}

/** Energies as squared significant heights, m². */
interface PartEnergy extends Pick<SeaPart, 'key' | 'name' | 'spreadFrom'> {
  energy: number
  across: number
}

/** The density is scaled to the height of all systems, so that what lies above its last frequency is not lost. */
function ofDensity({ height, systems }: Sea, parts: DensityPart[]): PartEnergy[] {
  const whole = height.value ** 2
  return parts.flatMap(({ owner, energy, across }): PartEnergy[] => {
    if (!(energy > 0)) return []
    const { key, name } = owner === null ? { key: null, name: 'no system' } : systems[owner]
    return [{ key, name, energy: energy * whole, across: across * whole, spreadFrom: 'directional spectrum' }]
  })
}

function ofSystems(sea: Sea, axis: number): PartEnergy[] {
  const energies = sea.systems.map(({ key, name, height, heading, spread }): PartEnergy => {
    const share = shareAcross(heading.value, spread ?? assumedSpread(name), axis)
    const spreadFrom = spread === null ? 'assumed spread' : 'spread of the system'
    return { key, name, energy: height.value ** 2, across: height.value ** 2 * share, spreadFrom }
  })
  const rest = restHeight(sea) ** 2
  if (rest === 0) return energies
  return [
    ...energies,
    { key: null, name: 'no system', energy: rest, across: rest / 2, spreadFrom: 'direction not known' },
  ]
}

/** Height of the energy that no system has, m; 0 below a small share. */
function restHeight({ height, systems }: Sea): number {
  const rest = height.value ** 2 - systems.reduce((sum, system) => sum + system.height.value ** 2, 0)
  return rest > leastRest * height.value ** 2 ? Math.sqrt(rest) : 0
}

function total(which: 'across' | 'along', sea: Sea, axis: number, parts: SeaPart[], inputs: FigureInput[]): Figure {
  const value = Math.sqrt(parts.reduce((sum, part) => sum + part[which] ** 2, 0))
  const rest = restHeight(sea)
  const uncertain = sea.systems.flatMap((system): Uncertain[] => [system.height, system.heading, spreadOf(system)])
  const sd = propagate(uncertain, (values) => {
    let energy = (rest * rest) / 2
    for (let index = 0; index < sea.systems.length; index++) {
      const [height, heading, spread] = values.slice(3 * index, 3 * index + 3)
      const share = shareAcross(heading, Math.max(0, spread), axis)
      energy += height * height * (which === 'across' ? share : 1 - share)
    }
    return Math.sqrt(energy)
  })
  return determined(frame(which, sea, inputs), {
    value,
    sd,
    uncertaintyFrom:
      'height, heading and spread of each system, moved one standard deviation each; spread ± 20 %, where assumed ± 50 %',
  })
}

const spreadOf = ({ spread, name }: SeaSystem): Uncertain =>
  spread === null
    ? { value: assumedSpread(name), sd: assumedSpread(name) / 2 }
    : { value: spread, sd: spreadSdShare * spread }
