/** The approach drawing: the channel's axis points up, systems are direction lines through the vessel. Pure. */
import { bothSenses, opposite, threeDigits, turnBetween } from '../../../../shared/directions.ts'
import type { Coast } from '../../../../shared/schemas/coast.ts'
import type { SystemSign } from '../../../../shared/waveSystemNames.ts'
import { polar, polygon, polyline } from './polar.ts'
import type { Point } from './polar.ts'

export interface ApproachSystem {
  key: number
  name: string
  sign: SystemSign
  /** Degrees true. */
  toward: number
  /** Degrees; null: the array cannot tell it. */
  spread: number | null
}

export interface ApproachLine {
  key: number
  sign: SystemSign
  tail: Point
  tip: Point
  /** Where the shaft ends under its head. */
  base: Point
  headLeft: Point
  headRight: Point
  fan: string | null
  fanEdge: string | null
  words: { from: string; toward: string; off: string }
  labelAt: Point
  labelAnchor: 'start' | 'end'
  fromAt: Point
}

const rowHeight = 42

/** Degrees right of the axis (left below zero), and in words. */
export function offAxis(toward: number, axis: number): { degrees: number; words: string } {
  const degrees = turnBetween(toward, axis)
  const whole = Math.round(Math.abs(degrees))
  if (whole === 0) return { degrees, words: 'along the axis' }
  if (whole === 180) return { degrees, words: 'against the axis' }
  return { degrees, words: `${whole}° ${degrees > 0 ? 'right' : 'left'} of the axis` }
}

export function approachLines(
  systems: readonly ApproachSystem[],
  axis: number,
  { width, height, centre }: { width: number; height: number; centre: Point },
): ApproachLine[] {
  const lines = systems.slice(0, 3).map((system, index): ApproachLine => {
    const length = (index === 0 ? 160 : 140) * Math.min(1, width / 400)
    const { degrees, words } = offAxis(system.toward, axis)
    const tip = polar(...centre, degrees, length)
    const base = polar(...centre, degrees, length - 12)
    const tail = polar(...centre, degrees + 180, length - 10)
    const spread = system.spread
    const [left, right] = [
      polar(...centre, degrees - (spread ?? 0), length),
      polar(...centre, degrees + (spread ?? 0), length),
    ]
    const arc = `A${length} ${length} 0 0 1 ${right.join(' ')}`
    const isRight = degrees >= 0
    return {
      key: system.key,
      sign: system.sign,
      ...{ tail, tip, base, headLeft: polar(...base, degrees - 90, 6.5), headRight: polar(...base, degrees + 90, 6.5) },
      fan: spread === null ? null : `M${centre.join(' ')}L${left.join(' ')}${arc}Z`,
      fanEdge: spread === null ? null : `M${left.join(' ')}${arc}`,
      words: {
        from: `from ${threeDigits(opposite(system.toward))} T`,
        toward: `${system.name} toward ${threeDigits(system.toward)} T`,
        off: `${words}, ${spread === null ? 'spread not known' : `spread ± ${Math.round(spread)}°`}`,
      },
      labelAt: [isRight ? width - 10 : 10, tip[1] - 22],
      labelAnchor: isRight ? 'end' : 'start',
      fromAt: [
        Math.min(width - 62, Math.max(62, tail[0])),
        Math.min(height - 14, Math.max(28, tail[1] + (tail[1] > centre[1] ? 20 : -10))),
      ],
    }
  })
  return apart(lines, height, centre)
}

/** Labels of one side stand under each other, clear of the vessel's row. */
function apart(lines: ApproachLine[], height: number, [, middle]: Point): ApproachLine[] {
  for (const anchor of ['start', 'end'] as const) {
    const side = lines.filter(({ labelAnchor }) => labelAnchor === anchor).sort((a, b) => a.labelAt[1] - b.labelAt[1])
    let before = -Infinity
    for (const line of side) {
      let y = Math.max(line.labelAt[1], before + rowHeight, 44)
      if (y > middle - 70 && y < middle + 52) y = line.tip[1] < middle - 60 ? middle - 76 : middle + 58
      if (y < before + rowHeight) y = before + rowHeight
      before = Math.min(y, height - 26)
      line.labelAt = [line.labelAt[0], before]
    }
  }
  return lines
}

/** Land and moles about the place out of the plan of the coast, turned so that the axis points up. */
export function approachGround(
  coast: Coast,
  place: { longitude: number; latitude: number },
  axis: number,
  centre: Point,
  unitsPerMetre: number,
): { land: string[]; shores: string[]; moles: { path: string; name: string; at: Point }[] } {
  const perDegree = 111_180
  const shrink = Math.cos((place.latitude * Math.PI) / 180)
  const [sin, cos] = [Math.sin((axis * Math.PI) / 180), Math.cos((axis * Math.PI) / 180)]
  const project = ([longitude, latitude]: readonly number[]): Point => {
    const east = (longitude - place.longitude) * perDegree * shrink
    const north = (latitude - place.latitude) * perDegree
    return [
      centre[0] + (east * cos - north * sin) * unitsPerMetre,
      centre[1] - (east * sin + north * cos) * unitsPerMetre,
    ]
  }
  const ground = {
    land: [] as string[],
    shores: [] as string[],
    moles: [] as { path: string; name: string; at: Point }[],
  }
  for (const { properties, geometry } of coast.features) {
    if (geometry.type === 'Polygon')
      for (const ring of geometry.coordinates) ground.land.push(polygon(ring.map(project)))
    if (geometry.type !== 'LineString') continue
    const points = geometry.coordinates.map(project)
    if (properties.kind === 'land') ground.shores.push(polyline(points))
    if (properties.kind === 'mole') {
      const tip = points.reduce((best, one) => (distance(one, centre) < distance(best, centre) ? one : best))
      ground.moles.push({ path: polyline(points), name: properties.name ?? '', at: tip })
    }
  }
  return ground
}
const distance = ([x, y]: Point, [a, b]: Point): number => Math.hypot(x - a, y - b)

export const approachSentence = (systems: readonly ApproachSystem[], axis: number): string =>
  `Approach drawing, channel axis up, inbound ${threeDigits(axis)} T; lines are directions. ${systems
    .map(({ name, toward }) => `${name} ${bothSenses(toward)}, ${offAxis(toward, axis).words}`)
    .join('. ')}.`
