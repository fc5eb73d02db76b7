/**
 * The sea of a station brought to a place: a substitute's ± widened first, then every system carried as the settings say. Headings in
 * radians from east inside, degrees true in the systems' rows.
 */
import { carryOverContours } from '../hazards/carried.ts'
import { carrySea } from '../hazards/carriedSea.ts'
import type { CarriedSystem } from '../hazards/carriedSea.ts'
import type { PathDepth } from '../hazards/depths.ts'
import type { Sea, SeaSystem } from '../hazards/sea.ts'
import { carryByTable } from '../hazards/transferTable.ts'
import type { Uncertain } from '../hazards/uncertain.ts'
import { degreesTrue, opposite, radiansFromEast, threeDigits } from '../directions.ts'
import type { SystemAtPlace } from '../schemas/placeOutlook.ts'
import type { PlaceFeed, PlaceSettingsContent, Transfer } from '../schemas/placeSettings.ts'

const degree = Math.PI / 180

export interface SeaHere {
  /** As measured, with a substitute's ±. */
  atStation: Sea
  /** At the place. */
  here: Sea
  lost: { key: number; reason: string }[]
  /** The carrying is within its method's range and its sector. */
  inRange: boolean
  remarks: string[]
}

/** Adds independent errors: a share of each height and so many degrees to each heading. A height whose ± is not known keeps that. */
export function widened(sea: Sea, { relativeSd, headingSd }: PlaceSettingsContent['substitute']): Sea {
  const height = ({ value, sd }: Uncertain): Uncertain => ({
    value,
    sd: sd === null ? null : Math.hypot(sd, relativeSd * value),
  })
  const heading = ({ value, sd }: Uncertain): Uncertain => ({
    value,
    sd: sd === null ? null : Math.hypot(sd, headingSd * degree),
  })
  return {
    ...sea,
    height: height(sea.height),
    systems: sea.systems.map((system) => ({
      ...system,
      height: height(system.height),
      heading: heading(system.heading),
    })),
  }
}

/** Where an estimate gives no ± of a system's height, the total's relative one stands for it: of the same record. */
export function withHeightErrors(sea: Sea): Sea {
  const { value, sd } = sea.height
  const relative = sd === null || !(value > 0) ? null : sd / value
  const known = ({ height, ...system }: SeaSystem): SeaSystem => ({
    ...system,
    height: { value: height.value, sd: height.sd ?? (relative === null ? null : relative * height.value) },
  })
  return { ...sea, systems: sea.systems.map(known) }
}

const fromOf = (system: SeaSystem): number => opposite(degreesTrue(system.heading.value))

function sectorRemark({ validSector }: PlaceFeed, sea: Sea): string | null {
  const leading = sea.systems.at(0)
  if (!validSector || !leading) return null
  const width = (validSector.to - validSector.from + 360) % 360
  const from = fromOf(leading)
  if ((from - validSector.from + 360) % 360 <= width) return null
  return `Waves from ${threeDigits(from)} T lie outside ${threeDigits(validSector.from)} T to ${threeDigits(validSector.to)} T, for which the carrying is meant.`
}

interface Depths {
  /** Null: the place has no one depth to carry to, as a beach, whose breakers are carried shoreward by themselves. */
  here: Uncertain | null
  levelSd: number | null
  path?: readonly PathDepth[]
}

/** Null: the sea is taken over unchanged. */
function carrierOf(transfer: Transfer, sea: Sea, depths: Depths): ((system: SeaSystem) => CarriedSystem) | null {
  if (transfer.kind === 'table') return (system) => carryByTable(system, transfer)
  const depthAtPlace = depths.here
  if (transfer.kind === 'asMeasured' || depthAtPlace === null) return null
  const seaward = radiansFromEast(transfer.shoreNormal)
  const depthAtStation = { value: sea.depth, sd: depths.levelSd }
  return (system) => carryOverContours(system, { seaward, depthAtStation, depthAtPlace, path: depths.path })
}

export function seaHere(feed: PlaceFeed, sea: Sea, depths: Depths): SeaHere {
  const { transfer } = feed
  const outside = sectorRemark(feed, sea)
  const carry = carrierOf(transfer, sea, depths)
  if (carry === null) {
    const remarks = outside === null ? [] : [outside]
    return { atStation: sea, here: sea, lost: [], inRange: outside === null, remarks }
  }
  const { sea: here, lost, inRange } = carrySea(sea, depths.here?.value ?? sea.depth, carry)
  const remarks = lost.map(({ name, reason }) => `The ${name} does not reach the place: ${reason}.`)
  if (outside !== null) remarks.unshift(outside)
  return { atStation: sea, here, lost, inRange: inRange && outside === null, remarks }
}

/** Rows for the page, highest first; of each system what it is at the station and here. */
export function systemRows({ atStation, here, lost }: SeaHere): SystemAtPlace[] {
  return atStation.systems.map((system) => {
    const carried = here.systems.find(({ key }) => key === system.key)
    return {
      key: system.key,
      name: system.name,
      height: system.height.value,
      heightSd: system.height.sd,
      period: system.period.value,
      toward: degreesTrue(system.heading.value),
      towardSd: system.heading.sd === null ? null : system.heading.sd / degree,
      spread: system.spread === null ? null : system.spread / degree,
      heightHere: carried?.height.value ?? null,
      towardHere: carried ? degreesTrue(carried.heading.value) : null,
      notCarried: lost.find(({ key }) => key === system.key)?.reason ?? null,
      ...{ across: null, along: null, acrossShare: null, alongShare: null, spreadFrom: null },
    }
  })
}
