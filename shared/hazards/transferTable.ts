/**
 * A system carried to a place by the site's own table: ratio of heights and turning of the direction by period and direction, between its
 * entries by straight lines. For places behind headlands, bars or moles, where no formula holds. Refused outside the table.
 */
import { degreesTrue, normalise, opposite, radiansFromEast } from '../directions.ts'
import type { CarriedSystem } from './carriedSea.ts'
import { determined, input, undetermined } from './figure.ts'
import type { Figure, FigureFrame, FigureUnit } from './figure.ts'
import { wrap } from './refraction.ts'
import type { SeaSystem } from './sea.ts'
import { propagate, together } from './uncertain.ts'

/** As the settings hold it: degrees true. */
export interface TransferTable {
  /** Who made it, how and when. */
  origin: string
  /** s, rising. */
  periods: readonly number[]
  /** From, rising clockwise; may pass north by going beyond 360. */
  directions: readonly number[]
  /** By period, then direction. */
  heightRatio: readonly (readonly number[])[]
  /** Degrees added to the direction, clockwise. */
  turn: readonly (readonly number[])[]
  /** ± of a carried height, share of it. */
  relativeSd: number
}

/** Place of a value between entries: the lower entry and the share of the way to the next; null outside. */
function between(entries: readonly number[], value: number): { at: number; share: number } | null {
  const last = entries.length - 1
  if (last < 0 || value < entries[0] || value > entries[last]) return null
  if (last === 0) return { at: 0, share: 0 }
  const next = Math.min(
    last,
    Math.max(
      1,
      entries.findIndex((entry) => entry >= value),
    ),
  )
  const at = next - 1
  return { at, share: (value - entries[at]) / (entries[next] - entries[at]) }
}

/** Height ratio and turning (degrees) for a period (s) and a direction from (degrees true); null outside the table. */
export function lookUp(table: TransferTable, period: number, from: number): { ratio: number; turn: number } | null {
  const row = between(table.periods, period)
  const direction = normalise(from)
  const column = between(table.directions, direction) ?? between(table.directions, direction + 360)
  if (!row || !column) return null
  const mix = (values: readonly (readonly number[])[]): number => {
    const along = (line: readonly number[]): number =>
      column.share === 0 ? line[column.at] : line[column.at] + column.share * (line[column.at + 1] - line[column.at])
    const here = along(values[row.at])
    return row.share === 0 ? here : here + row.share * (along(values[row.at + 1]) - here)
  }
  return { ratio: mix(table.heightRatio), turn: mix(table.turn) }
}

export function carryByTable(system: SeaSystem, table: TransferTable): CarriedSystem {
  const { height, period, heading } = system
  const from = opposite(degreesTrue(heading.value))
  const there = lookUp(table, period.value, from)
  const frameOf = (unit: FigureUnit): FigureFrame => ({
    unit,
    method: {
      name: 'transfer table of the site',
      formula: 'H = ratio(T, direction) × H₁; direction turned by the table',
      source: table.origin,
      fromMemory: false,
      assumptions: ['one train of the peak period and heading', 'at the levels of the water the table was made for'],
    },
    inputs: [
      input('height at the station', height.value, 'm', height.sd),
      input('peak period', period.value, 's', period.sd),
      input('direction, from', radiansFromEast(from), 'rad', heading.sd),
      ...(there ? [input('ratio of heights', there.ratio, '1', table.relativeSd * there.ratio, 'from the table')] : []),
    ],
    checks: [],
  })
  if (!there) {
    const reason = `period ${period.value.toFixed(1)} s from ${Math.round(normalise(from))}° T lies outside the transfer table`
    const refused = (unit: FigureUnit): Figure => undetermined(frameOf(unit), reason)
    return { height: refused('m'), heading: refused('rad'), system: null }
  }
  const value = height.value * there.ratio
  const toward = headingAfter(from, there.turn)
  const uncertain = [height, period, heading]
  const moved = ([h, t, way]: number[]) => {
    const entry = lookUp(table, t, opposite(degreesTrue(way)))
    return (
      entry && { height: h * entry.ratio, heading: wrap(headingAfter(opposite(degreesTrue(way)), entry.turn) - toward) }
    )
  }
  const carriedHeight = determined(frameOf('m'), {
    value,
    sd: together(
      propagate(uncertain, (values) => moved(values)?.height ?? null),
      table.relativeSd * value,
    ),
    uncertaintyFrom: 'height, period and direction, one standard deviation each, and the ± of the table',
  })
  const carriedHeading = determined(frameOf('rad'), {
    value: toward,
    sd: propagate(uncertain, (values) => moved(values)?.heading ?? null),
    uncertaintyFrom: 'period and direction, moved one standard deviation each',
  })
  return {
    ...{ height: carriedHeight, heading: carriedHeading },
    system: {
      ...system,
      height: { value, sd: carriedHeight.sd },
      heading: { value: toward, sd: carriedHeading.sd },
    },
  }
}

/** rad from east, of waves from a direction turned clockwise by so many degrees. */
const headingAfter = (from: number, turn: number): number => radiansFromEast(normalise(opposite(from) + turn))
