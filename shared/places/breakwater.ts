/** What the sea does at a breakwater: mean overtopping as a screening with its likely band, and the largest single volume. */
import { depthNow } from '../hazards/depths.ts'
import { overtopping } from '../hazards/overtopping.ts'
import { depthLimit } from '../hazards/depthLimit.ts'
import { shorewardSea } from '../hazards/shoreward.ts'
import type { Uncertain } from '../hazards/uncertain.ts'
import { radiansFromEast } from '../directions.ts'
import type { BreakwaterSettings } from '../schemas/placeSettings.ts'
import { metres } from '../units.ts'
import { nothingElse } from './entrance.ts'
import type { KindOutlook } from './entrance.ts'
import { graded } from './flags.ts'
import type { Grounds } from './flags.ts'
import { heightHere } from './heightHere.ts'
import { systemRows } from './seaHere.ts'
import type { SeaHere } from './seaHere.ts'

/** The bed before a toe is taken as level: the saturated height has no part of its slope. */
const flatBed: Uncertain = { value: 0.01, sd: 0 }

const kinds = { smoothSlope: 'smooth', rubbleSlope: 'rubble', vertical: 'vertical' } as const

/** T_m−1,0 is about the peak period over 1.1 in a single-peaked sea (EurOtop 2018, 5.1.3; from memory). */
const energyPeriodShare = 1 / 1.1

export function breakwaterOutlook(
  settings: BreakwaterSettings,
  carried: SeaHere,
  level: Uncertain,
  grounds: Grounds,
): KindOutlook {
  const seaward = radiansFromEast(settings.seawardNormal)
  const toeDepth = depthNow(level, settings.toeBedLevel)
  const systems = systemRows(carried)
  const toe = shorewardSea(carried.here, seaward, toeDepth?.sd ?? null)
  const crest: Uncertain = {
    value: settings.crestLevel.value - level.value,
    sd: level.sd === null || settings.crestLevel.sd === null ? null : Math.hypot(level.sd, settings.crestLevel.sd),
  }
  const remarks: string[] = []
  const most = toeDepth && toe ? depthLimit(toeDepth, toe.period, flatBed).significant : null
  const limited = most?.value != null && toe ? Math.min(toe.height.value, most.value) : null
  if (toeDepth && toe && limited !== null && limited < toe.height.value) {
    remarks.push(
      `Height at the toe limited by depth to ${metres(limited)}: ${most?.method.formula} of ${metres(toeDepth.value)} (${most?.method.source}).`,
    )
  }
  const nothing: Uncertain = { value: 0, sd: 0 }
  const answer = overtopping(
    {
      height: toe && limited !== null ? { value: limited, sd: toe.height.sd } : nothing,
      energyPeriod: carried.here.energyPeriod ?? (toe ? scaled(toe.period, energyPeriodShare) : nothing),
      obliquity: toe ? { value: Math.abs(toe.incidence.value), sd: toe.incidence.sd } : nothing,
    },
    {
      kind: kinds[settings.form],
      slope: settings.seawardSlope ?? nothing,
      roughness: settings.roughness,
      freeCrest: crest,
      toeDepth: toeDepth ?? nothing,
    },
  )
  if (answer.access !== null) remarks.push(capital(`${answer.access}.`))
  return {
    ...nothingElse,
    figures: [
      graded('overtopping', answer.discharge, grounds),
      graded('largestVolume', answer.volume, grounds),
      graded('placeHeight', heightHere(carried), grounds),
    ],
    remarks,
    systems,
  }
}

const scaled = ({ value, sd }: Uncertain, by: number): Uncertain => ({
  value: value * by,
  sd: sd === null ? null : sd * by,
})
const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1)
