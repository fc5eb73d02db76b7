/** What stays in words of a station whose figures were withdrawn: the last good one with its time. */
import { bothSenses } from '../../../shared/directions.ts'
import type { CurrentEstimate } from '../../../shared/schemas/station.ts'
import { momentUtc } from '../../../shared/times.ts'
import { heightPlaces, seconds } from '../../../shared/units.ts'
import { heightWords, speedWords } from '../../figures/shown.ts'
import { systemTitle } from '../../../shared/waveSystemNames.ts'

/** `Last good 14:10 UTC: swell 1.6 m, 12.2 s, 8.2 m/s, from 232° T, toward 052° T.` */
export function lastGoodWords(lastGood: CurrentEstimate | null, nowMs: number, withSpeed = true): string {
  return lastGood?.systems[0] ? `Last good ${wordsOf(lastGood, nowMs, withSpeed)}` : unknown
}

/** Of a direction that became ambiguous: `Held since 14:10 UTC: swell 1.6 m, from 232° T, toward 052° T.` */
export const heldWords = (lastGood: CurrentEstimate | null, nowMs: number): string =>
  lastGood?.systems[0] ? `Held since ${wordsOf(lastGood, nowMs, true)}` : unknown

const unknown = 'No good figure is known from before.'

function wordsOf(lastGood: CurrentEstimate, nowMs: number, withSpeed: boolean): string {
  const [lead] = lastGood.systems
  const height = heightWords(lead.significantWaveHeight, heightPlaces(lead.significantWaveHeight))
  const name = systemTitle(lead, lastGood.systems).toLowerCase()
  const figures = [
    `${name} ${height}`,
    ...(withSpeed ? [seconds(lead.peakPeriod), speedWords(lead.speed)] : []),
    bothSenses(lead.toward),
  ]
  return `${momentUtc(Date.parse(lastGood.windowEndsAt), nowMs)} UTC: ${figures.join(', ')}.`
}
