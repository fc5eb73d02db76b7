/** The figures of a bulletin as its e-mail lays them out; the words are those of its page and its print. */
import { figureKey } from '../../../shared/bulletins/figureKey.ts'
import { chainWords } from '../../../shared/bulletins/plainText.ts'
import {
  figureWords,
  measuredWords,
  nextIssueWords,
  placeUncertainty,
  placeValue,
  qualityWords,
  termWords,
} from '../../../shared/bulletins/words.ts'
import { opposite, threeDigits } from '../../../shared/directions.ts'
import { placeQuantityOf } from '../../../shared/places/quantities.ts'
import type { BulletinContent, BulletinFigure, StationFigure } from '../../../shared/schemas/bulletin.ts'
import { heightPlaces, metres, metresPerSecond, plusMinus, seconds } from '../../../shared/units.ts'
import type { Glyph } from './drawings.ts'

export interface BulletinBlock {
  measured: string
  lead: {
    name: string
    cid: string
    alt: string
    from: string
    toward: string
    towardSd: string
    figures: { name: string; value: string; sd: string }[]
  } | null
  meaning: string[]
  rows: { name: string; words: string; value: string; sd: string }[]
}

export const bulletinGlyphCid = 'bulletin@offing'

const leadOf = ({ figures }: BulletinContent): StationFigure | null =>
  figures.find((figure) => figure.kind === 'station') ?? null

export function bulletinGlyph(content: BulletinContent): Glyph | null {
  const lead = leadOf(content)
  return lead && { toward: lead.system.toward, height: lead.system.height }
}

function leadBlock(figure: StationFigure): NonNullable<BulletinBlock['lead']> {
  const { system, totalHeight, totalHeightSd, name, qualityFlag, windowSeconds } = figure
  const places = heightPlaces(system.height)
  const total = heightPlaces(totalHeight)
  const minutes = Math.round(windowSeconds / 60)
  return {
    name: `${name}, ${system.name.toLowerCase()}, ${qualityWords[qualityFlag].toLowerCase()}, mean of ${minutes} min`,
    cid: bulletinGlyphCid,
    alt: `${name}: ${figureWords(figure)}`,
    from: `${threeDigits(opposite(system.toward))} T`,
    toward: `${threeDigits(system.toward)} T`,
    towardSd: `${plusMinus(system.towardSd, 0)}°`,
    figures: [
      { name: 'Speed', value: metresPerSecond(system.speed), sd: plusMinus(system.speedSd, 1) },
      { name: `${system.name} height`, value: metres(system.height, places), sd: plusMinus(system.heightSd, places) },
      { name: 'Period', value: seconds(system.period), sd: '' },
      ...(totalHeight === null
        ? []
        : [{ name: 'All systems', value: metres(totalHeight, total), sd: plusMinus(totalHeightSd, total) }]),
    ],
  }
}

function rowOf(figure: BulletinFigure): BulletinBlock['rows'][number] {
  const { name } = figure
  if (figure.kind === 'missing') return { name, words: figureWords(figure), value: 'no figure', sd: '' }
  const quality = qualityWords[figure.qualityFlag]
  if (figure.kind === 'station') return { name, words: `${figureWords(figure)}. ${quality}`, value: '', sd: '' }
  const said = [placeQuantityOf(figure.quantity).name.toLowerCase(), figure.words, figure.substitute]
  return {
    name,
    words: `${said.filter(Boolean).join(', ')}. ${quality}`,
    value: placeValue(figure),
    sd: placeUncertainty(figure),
  }
}

export function bulletinBlock(content: BulletinContent): BulletinBlock {
  const lead = leadOf(content)
  const others = content.figures.filter((figure) => lead === null || figureKey(figure) !== figureKey(lead))
  return {
    measured: measuredWords(content),
    lead: lead && leadBlock(lead),
    meaning: content.meaning.split('\n').filter((line) => line.trim() !== ''),
    rows: others.map(rowOf),
  }
}

/** What stands under its headline. */
export const bulletinLines = (content: BulletinContent): string[] =>
  [chainWords(content), termWords(content), nextIssueWords(content)].filter((line) => line !== null)
