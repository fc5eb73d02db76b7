/** What stays in words of a station whose figures were withdrawn: the last good one with its time. */
import { bothSenses } from '../../../shared/directions.ts'
import type { CurrentEstimate } from '../../../shared/schemas/station.ts'
import { momentUtc } from '../../../shared/times.ts'
import { heightPlaces, seconds } from '../../../shared/units.ts'
import { heightWords, speedWords } from '../../figures/shown.ts'
import { systemTitle } from '../../../shared/waveSystemNames.ts'

/** `Last good 14:10 UTC: swell 1.6 m, 12.2 s, 8.2 m/s, from 232° T, toward 052° T.` */
export function lastGoodWords(lastGood: CurrentEstimate | null, nowMs: number, withSpeed = true): string {
  const lead = lastGood?.systems[0]
  if (!lastGood || !lead) return 'No good figure is known from before.'
  const height = heightWords(lead.significantWaveHeight, heightPlaces(lead.significantWaveHeight))
  const name = systemTitle(lead, lastGood.systems).toLowerCase()
  const figures = [
    `${name} ${height}`,
    ...(withSpeed ? [seconds(lead.peakPeriod), speedWords(lead.speed)] : []),
    bothSenses(lead.toward),
  ]
  return `Last good ${momentUtc(Date.parse(lastGood.windowEndsAt), nowMs)} UTC: ${figures.join(', ')}.`
}
