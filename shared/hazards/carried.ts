/**
 * A system carried from the station to a place over straight parallel contours: height and heading there with ±, and both at every
 * sounding on the way. Only where no headland, bar or breakwater lies between: else a transfer table of the site.
 */
import { check, determined, input, undetermined } from './figure.ts'
import type { Figure, FigureFrame, FigureMethod, FigureUnit, RangeCheck } from './figure.ts'
import type { PathDepth } from './depths.ts'
import { headingOf, incidenceAngle, isRefused, refract, wrap } from './refraction.ts'
import type { SeaSystem } from './sea.ts'
import { propagate } from './uncertain.ts'
import type { Uncertain } from './uncertain.ts'

export const contoursMethod: FigureMethod = {
  name: 'refraction and shoaling over straight parallel contours',
  formula: 'sin α / c = const; H = H₁ √(Cg₁/Cg₂) √(cos α₁/cos α₂)',
  source: 'Snell’s law, linear theory: CEM EM 1110-2-1100 (2002) II-3-12 to 14',
  fromMemory: false,
  assumptions: [
    'contours straight and parallel to the shore, slopes mild',
    'no headland, bar or breakwater between, no current, no bottom friction',
    'each system as one train of its peak period and heading',
  ],
}

/** Beyond this angle small bends of the contours decide, not Snell's law, rad. Our own bound. */
const widestIncidence = (75 * Math.PI) / 180
/** Significant height over depth from which linear theory is doubtful because the sea breaks (Thornton & Guza 1982, from memory). */
export const saturation = 0.6

export interface CarriedPoint extends PathDepth {
  /** rad from east; null with the reason where the waves do not get there. */
  heading: number | null
  height: number | null
  reason: string | null
}

export interface Carried {
  height: Figure
  /** rad from east */
  heading: Figure
  /** At every sounding. */
  points: CarriedPoint[]
  /** The system as it is there; null where it does not get there. */
  system: SeaSystem | null
}

export interface Contours {
  /** Shore normal pointing out to sea, rad from east. */
  seaward: number
  /** Depth of still water at the station and at the place, m. */
  depthAtStation: Uncertain
  depthAtPlace: Uncertain
  /** Soundings on the way, for the drawing and the figures by depth. */
  path?: readonly PathDepth[]
}

export function carryOverContours(system: SeaSystem, contours: Contours): Carried {
  const { seaward, depthAtStation, depthAtPlace, path = [] } = contours
  const { height, period, heading } = system
  const angle = incidenceAngle(heading.value, seaward)
  const there = refract(angle, period.value, depthAtStation.value, depthAtPlace.value)
  const points = path.map((point) => pointOn(system, angle, contours, point))
  const inputs = [
    input('height at the station', height.value, 'm', height.sd),
    input('peak period', period.value, 's', period.sd),
    input('angle to the onshore normal at the station', angle, 'rad', heading.sd),
    input('depth at the station', depthAtStation.value, 'm', depthAtStation.sd),
    input('depth at the place', depthAtPlace.value, 'm', depthAtPlace.sd),
  ]
  const frame = (unit: FigureUnit): FigureFrame => ({
    ...{ unit, method: contoursMethod, inputs },
    checks: [
      check('angle to the onshore normal', Math.abs(angle), 'rad', 0, widestIncidence),
      ...(isRefused(there)
        ? []
        : [
            check(
              ...(['height over depth at the place', (height.value * there.heightRatio) / depthAtPlace.value] as const),
              ...(['1', 0, saturation] as const),
            ),
          ]),
      ...checkOfTheWay(points),
    ],
  })
  if (isRefused(there)) {
    const refused = (unit: FigureUnit): Figure => undetermined(frame(unit), there.refused)
    return { height: refused('m'), heading: refused('rad'), points, system: null }
  }
  const inputsMoved = [height, period, heading, depthAtStation, depthAtPlace]
  const compute = (of: 'height' | 'heading') => (values: number[]) => {
    const [h, t, toward, from, to] = values
    const moved = refract(incidenceAngle(toward, seaward), t, from, to)
    if (isRefused(moved)) return null
    return of === 'height' ? h * moved.heightRatio : wrap(moved.angle - there.angle)
  }
  const uncertaintyFrom =
    'height, period, heading and both depths, moved one standard deviation each; no scatter of the method added'
  const carriedHeight = determined(frame('m'), {
    ...{ value: height.value * there.heightRatio, sd: propagate(inputsMoved, compute('height')), uncertaintyFrom },
  })
  const carriedHeading = determined(frame('rad'), {
    ...{ value: headingOf(there.angle, seaward), sd: propagate(inputsMoved, compute('heading')), uncertaintyFrom },
  })
  return {
    ...{ height: carriedHeight, heading: carriedHeading, points },
    system: {
      ...system,
      height: { value: carriedHeight.value, sd: carriedHeight.sd },
      heading: { value: carriedHeading.value, sd: carriedHeading.sd },
      spread: system.spread === null ? null : system.spread * there.turning,
    },
  }
}

/** A bar on the way breaks what is carried over it. */
function checkOfTheWay(points: CarriedPoint[]): RangeCheck[] {
  const shares = points.flatMap(({ height, depth }) => (height === null ? [] : [height / depth]))
  return shares.length === 0
    ? []
    : [check('height over depth on the way, highest', Math.max(...shares), '1', 0, saturation)]
}

function pointOn(
  system: SeaSystem,
  angle: number,
  { seaward, depthAtStation }: Contours,
  point: PathDepth,
): CarriedPoint {
  const there = refract(angle, system.period.value, depthAtStation.value, point.depth)
  if (isRefused(there)) return { ...point, heading: null, height: null, reason: there.refused }
  return {
    ...{ ...point, reason: null },
    heading: headingOf(there.angle, seaward),
    height: system.height.value * there.heightRatio,
  }
}
