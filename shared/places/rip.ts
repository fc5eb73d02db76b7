/** The listed reasons for a rip caution in people's words: each with its value and from when on it counts. Never a grade. */
import { ripReasons } from '../hazards/ripReasons.ts'
import type { RipQuestion, RipReason } from '../hazards/ripReasons.ts'
import type { OutlookContent, TideNow } from '../schemas/placeOutlook.ts'
import type { BeachSettings } from '../schemas/placeSettings.ts'
import { age, decimals, metres } from '../units.ts'

const degree = Math.PI / 180
const hour = 3600
const inDegrees = (radians: number, places = 0): string => `${decimals(Math.abs(radians) / degree, places)}°`

function valueWords({ key, value, reason, state, threshold }: RipReason, stationName: string): string {
  if (value === null) return reason ?? 'not known'
  if (key === 'height') return `${metres(value)} at ${stationName}`
  // Where whole degrees would write the value and the bound alike, a tenth tells them apart.
  const places = inDegrees(value) === inDegrees(threshold) ? 1 : 0
  if (key === 'incidence') return `${inDegrees(value, places)} off square at the break`
  if (key === 'spread') return `${inDegrees(value, places)}, ${state === 'present' ? 'narrow' : 'wide'}`
  const near = Math.abs(value)
  return near < 60 ? 'at low water' : `${age(near)} ${value > 0 ? 'before' : 'after'} low water`
}

function countsWords({ key, threshold }: RipReason): string {
  if (key === 'height') return `counts from ${metres(threshold)}`
  if (key === 'incidence') return `counts within ${inDegrees(threshold)}`
  if (key === 'spread') return `counts up to ${inDegrees(threshold)}`
  return `counts within ${age(threshold)} of low water`
}

/** `at`: ms since 1970 UTC. */
export function ripOf(
  settings: BeachSettings,
  question: Omit<RipQuestion, 'toLowWater'>,
  { tide, at, stationName }: { tide: TideNow; at: number; stationName: string },
): NonNullable<OutlookContent['rip']> {
  const { height, incidence, spread, lowWaterHours } = settings.ripReasons
  const toLowWater = tide.lowWater ? (Date.parse(tide.lowWater.at) - at) / 1000 : null
  const thresholds = { height, incidence: incidence * degree, spread: spread * degree, lowWater: lowWaterHours * hour }
  const reasons = ripReasons({ ...question, toLowWater }, thresholds)
  return {
    present: reasons.filter(({ state }) => state === 'present').length,
    known: reasons.filter(({ state }) => state !== 'not known').length,
    reasons: reasons.map((reason) => ({
      name: reason.key,
      isPresent: reason.state === 'not known' ? null : reason.state === 'present',
      value: valueWords(reason, stationName),
      counts: countsWords(reason),
      ...{ source: reason.source, fromMemory: reason.fromMemory },
    })),
  }
}
