/** Words on the crest plan: the bearings at their pointers, the sensors' names where they cover nothing. */
import { opposite, threeDigits } from '../../../../shared/directions.ts'
import type { SystemSign } from '../../../../shared/waveSystemNames.ts'
import type { SquarePlan } from './crestPlanLayout.ts'
import { placeLabels } from './labelPlacement.ts'
import type { Box, LabelPlaced } from './labelPlacement.ts'
import { polar } from './polar.ts'
import type { Point } from './polar.ts'
import { borderPoint } from './squareBorder.ts'

export interface DirectionLabel extends LabelPlaced {
  words: string
  sign: SystemSign
}

export function crestPlanLabels(
  plan: SquarePlan,
  sensors: readonly { name: string; at: Point }[],
  vectors: readonly { toward: number; length: number; sign: SystemSign }[],
): { sensors: LabelPlaced[]; directions: DirectionLabel[] } {
  const { centre, inner } = plan
  const frame: Box = { x: centre - inner + 3, y: centre - inner + 3, width: 2 * inner - 6, height: 2 * inner - 6 }
  const directions = vectors.flatMap((vector, rank) => {
    const toward = `toward ${threeDigits(vector.toward)} T`
    const from = `from ${threeDigits(opposite(vector.toward))} T`
    if (rank > 0) return [atTip(centre, vector, toward)]
    return [
      atBorder(plan, opposite(vector.toward), from, vector.sign),
      atBorder(plan, vector.toward, toward, vector.sign),
    ]
  })
  const crosses = sensors.map(({ at }): Box => ({ x: at[0] - 8, y: at[1] - 8, width: 16, height: 16 }))
  const bar: Box = { x: frame.x, y: frame.y + frame.height - 36, width: plan.grid * plan.scale + 24, height: 36 }
  return {
    directions,
    sensors: placeLabels(
      sensors.map(({ name, at }) => ({ at, width: name.length * 7.4, height: 15, gap: 8 })),
      {
        frame,
        boxes: [...crosses, ...directions.map((label) => label.box), bar],
        segments: vectors.map((vector): [Point, Point] => [
          [centre, centre],
          polar(centre, centre, vector.toward, vector.length),
        ]),
      },
    ),
  }
}

function atBorder(plan: SquarePlan, bearing: number, words: string, sign: SystemSign): DirectionLabel {
  const { centre, inner } = plan
  const [x, y] = borderPoint(centre, inner - 10, bearing)
  const anchor = x < centre - inner * 0.6 ? 'start' : x > centre + inner * 0.6 ? 'end' : 'middle'
  const baseline = Math.min(centre + inner - 8, Math.max(centre - inner + 18, y + (y < centre ? -14 : 26)))
  return { ...boxed(words, x, baseline, anchor), words, sign }
}

function atTip(
  centre: number,
  vector: { toward: number; length: number; sign: SystemSign },
  words: string,
): DirectionLabel {
  const [x, y] = polar(centre, centre, vector.toward, vector.length + 14)
  const baseline = y < centre ? y - 4 : y + 14
  return { ...boxed(words, x, baseline, 'middle'), words, sign: vector.sign }
}

function boxed(words: string, x: number, baseline: number, anchor: LabelPlaced['anchor']): LabelPlaced {
  const width = words.length * 7.1
  const left = anchor === 'start' ? x : anchor === 'end' ? x - width : x - width / 2
  return { box: { x: left, y: baseline - 12, width, height: 16 }, anchor, x, baseline }
}
