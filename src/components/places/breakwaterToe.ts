/** Free crest, depth and sea at the toe, as the overtopping figure has them; without one, crest and depth by the level alone. Pure. */
import type { FigureInput } from '../../../shared/hazards/figure.ts'
import { opposite, threeDigits } from '../../../shared/directions.ts'
import type { OutlookView } from '../../../shared/schemas/placeOutlook.ts'
import type { BreakwaterSettings } from '../../../shared/schemas/placeSettings.ts'
import { decimals, metres } from '../../../shared/units.ts'
import { heightSd, heightWords } from '../../figures/shown.ts'

export interface Toe {
  freeCrest: number
  depth: number
  /** Null: not known. */
  height: number | null
  heightSd: number | null
}

const inputsOf = (outlook: OutlookView | null): FigureInput[] =>
  outlook?.figures.find(({ quantity }) => quantity === 'overtopping')?.figure.inputs ?? []
const numberOf = (inputs: readonly FigureInput[], name: string): FigureInput | undefined =>
  inputs.find((input) => input.name === name && typeof input.value === 'number' && input.value > 0)

export function toeOf(settings: BreakwaterSettings, outlook: OutlookView | null): Toe {
  const level = outlook?.tide?.level ?? settings.nominalLevel.value
  const height = numberOf(inputsOf(outlook), 'height at the toe')
  return {
    freeCrest: settings.crestLevel.value - level,
    depth: Math.max(0.1, level - settings.toeBedLevel.value),
    height: typeof height?.value === 'number' ? height.value : null,
    heightSd: height?.sd ?? null,
  }
}

/** Between formula and range on the page: what the sea is at the toe, the free crest, the roughness. */
export function toeRows(settings: BreakwaterSettings, outlook: OutlookView): { name: string; words: string }[] {
  const toe = toeOf(settings, outlook)
  const inputs = inputsOf(outlook)
  const period = numberOf(inputs, 'energy period')
  const angle = inputs.find(({ name }) => name === 'angle to the normal of the wall')
  const lead = outlook.sea?.systems.find(({ towardHere }) => towardHere !== null)
  const toward = lead?.towardHere ?? null
  const parts = [
    toe.height === null ? 'not known' : `${heightWords(toe.height, 1)} ${heightSd(toe.heightSd, 1)}`,
    typeof period?.value === 'number' ? `energy period ${decimals(period.value, 1)} s` : '',
    typeof angle?.value === 'number' ? `${Math.round((Math.abs(angle.value) * 180) / Math.PI)}° oblique` : '',
    toward === null ? '' : `from ${threeDigits(opposite(toward))} T, toward ${threeDigits(toward)} T`,
  ]
  const level = outlook.tide?.level ?? settings.nominalLevel.value
  const isVertical = settings.form === 'vertical'
  return [
    { name: 'Sea at the toe', words: parts.filter(Boolean).join(', ') },
    {
      name: 'Free crest',
      words: `${metres(toe.freeCrest)} = ${metres(settings.crestLevel.value)} less level ${metres(level)}`,
    },
    ...(isVertical
      ? []
      : [{ name: 'Roughness', words: `${decimals(settings.roughness.value, 2)}, ${settings.roughness.source}` }]),
  ]
}
