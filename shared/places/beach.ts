/** What the sea does at a beach: breakers and their type, run-up and set-up, longshore current, reasons for a rip caution. */
import { breakers } from '../hazards/breakers.ts'
import type { Figure } from '../hazards/figure.ts'
import { longshoreCurrent } from '../hazards/longshoreCurrent.ts'
import { incidenceAngle } from '../hazards/refraction.ts'
import { runUp } from '../hazards/runUp.ts'
import { deepWaterHeight } from '../hazards/shoaling.ts'
import { shorewardSea } from '../hazards/shoreward.ts'
import type { Shoreward } from '../hazards/shoreward.ts'
import { surfType } from '../hazards/surfSimilarity.ts'
import { propagate } from '../hazards/uncertain.ts'
import type { Uncertain } from '../hazards/uncertain.ts'
import { bothSenses, degreesTrue, radiansFromEast, threeDigits } from '../directions.ts'
import type { TideNow } from '../schemas/placeOutlook.ts'
import type { BeachSettings } from '../schemas/placeSettings.ts'
import { nothingElse } from './entrance.ts'
import type { KindOutlook } from './entrance.ts'
import { graded } from './flags.ts'
import type { Grounds } from './flags.ts'
import { ripOf } from './rip.ts'
import { systemRows } from './seaHere.ts'
import type { SeaHere } from './seaHere.ts'

const nothing: Uncertain = { value: 0, sd: 0 }
const uncertain = (figure: Figure): Uncertain | null =>
  figure.value === null ? null : { value: figure.value, sd: figure.sd }

/** Carried back to deep water by shoaling alone, with what height, period and depth do to it. */
function deepHeightOf({ height, period, depth }: Shoreward): Uncertain {
  const deep = ([h, t, d]: number[]): number | null => (t > 0 && d > 0 ? deepWaterHeight(h, t, d) : null)
  return {
    value: deep([height.value, period.value, depth.value]) ?? 0,
    sd: propagate([height, period, depth], deep),
  }
}

export interface BeachSurroundings {
  tide: TideNow
  /** End of the window, ms since 1970 UTC. */
  at: number
  stationName: string
}

export function beachOutlook(
  settings: BeachSettings,
  carried: SeaHere,
  around: BeachSurroundings,
  grounds: Grounds,
): KindOutlook {
  // ± of the water's level is that of the depth at the station too.
  const levelSd = around.tide.sd
  const seaward = radiansFromEast(settings.shoreNormal)
  const sea = carried.here
  const shoreward = shorewardSea(sea, seaward, levelSd)
  const toward = shoreward ?? {
    height: nothing,
    period: nothing,
    incidence: nothing,
    depth: { value: sea.depth, sd: levelSd },
  }
  const broken = breakers(toward, settings.nearshoreSlope)
  const deep = shoreward ? deepHeightOf(shoreward) : nothing
  const type = surfType(settings.nearshoreSlope, deep, toward.period, broken.height.value)
  const height = broken.height.value === null ? broken.height : { ...broken.height, words: type.similarity.words }
  const up = runUp(
    settings.sediment === 'sand'
      ? { kind: 'sand', deepHeight: deep, period: toward.period, slope: settings.foreshoreSlope }
      : {
          kind: 'gravel',
          height: uncertain(broken.height) ?? nothing,
          meanPeriod: sea.meanPeriod ?? nothing,
          slope: settings.foreshoreSlope,
        },
  )
  const current = longshoreCurrent(
    uncertain(broken.height),
    uncertain(broken.incidence),
    settings.nearshoreSlope,
    seaward,
  )
  const speed =
    current.setsToward === null || current.speed.value === null
      ? current.speed
      : { ...current.speed, words: `setting toward ${threeDigits(degreesTrue(current.setsToward))} T` }
  const remarks = sea.systems
    .filter(({ heading }) => Math.abs(incidenceAngle(heading.value, seaward)) >= Math.PI / 2)
    .map(({ name, heading }) => `The ${name} ${bothSenses(degreesTrue(heading.value))} does not run toward this shore.`)
  return {
    ...nothingElse,
    figures: [
      graded('breakerHeight', height, grounds),
      graded('runUp', up.runUp, grounds),
      graded('setUp', up.setUp, grounds),
      graded('longshoreCurrent', speed, grounds),
    ],
    rip: ripOf(
      settings,
      {
        height: shoreward?.height ?? sea.height,
        incidence: uncertain(broken.incidence),
        spread: shoreward?.leading.spread ?? null,
      },
      around,
    ),
    remarks,
    systems: systemRows(carried),
  }
}
