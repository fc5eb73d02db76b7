/** What a place is, in a line of words; what its lead figure is, in the words of its kind. Pure. */
import { bothSenses, opposite, threeDigits } from '../../../shared/directions.ts'
import type { LivePlace } from '../../../shared/places/livePlace.ts'
import { placeQuantityOf } from '../../../shared/places/quantities.ts'
import type { PlaceView } from '../../../shared/schemas/place.ts'
import type { OutlookView, SystemAtPlace, TideNow } from '../../../shared/schemas/placeOutlook.ts'
import type { PlaceKind } from '../../../shared/schemas/placeQuantity.ts'
import type { BreakwaterSettings, PlaceSettingsContent } from '../../../shared/schemas/placeSettings.ts'
import { momentUtc } from '../../../shared/times.ts'
import { age, decimals, metres } from '../../../shared/units.ts'

export const kindNames: Record<PlaceKind, string> = {
  entrance: 'Entrance',
  breakwater: 'Breakwater',
  berth: 'Berths',
  beach: 'Beach',
}

/** `1 in 20`; a slope is the tangent of its angle. */
export const slopeWords = (tangent: number): string => `1 in ${decimals(1 / tangent, tangent > 0.2 ? 1 : 0)}`

export const formNames: Record<BreakwaterSettings['form'], string> = {
  smoothSlope: 'smooth slope',
  rubbleSlope: 'rubble slope',
  vertical: 'vertical face',
}

const mouthWords: Record<string, string> = {
  closed: 'closed',
  open: 'open at the mouth',
  between: 'partly open at the mouth',
}

/** Under the name: `channel axis 038° T inbound, 218° T outbound, least width 96 m`. */
export function settingsLine(content: PlaceSettingsContent): string {
  switch (content.kind) {
    case 'entrance':
      return `channel axis ${threeDigits(content.channelAxis)} T inbound, ${threeDigits(opposite(content.channelAxis))} T outbound, least width ${metres(content.width, 0)}`
    case 'breakwater': {
      const slope = content.seawardSlope ? ` ${slopeWords(content.seawardSlope.value)}` : ''
      return `breakwater, ${formNames[content.form]}${slope}, crest ${metres(content.crestLevel.value)} above datum, seaward face toward ${threeDigits(content.seawardNormal)} T`
    }
    case 'berth': {
      const { length, width, bedLevel, mouth } = content.basin
      return `basin ${decimals(length, 0)} m by ${decimals(width, 0)} m, bed ${decimals(bedLevel.value, 1)} m, ${mouthWords[mouth]}`
    }
    case 'beach':
      return `slope ${slopeWords(content.foreshoreSlope.value)}, faces ${threeDigits(content.shoreNormal)} T, ${content.sediment}`
  }
}

/** First the station that belongs here, then its substitutes. */
export const feedNames = ({ settings, stations }: PlaceView): string[] =>
  settings.content.stationOrder.map(
    ({ stationId }) => stations.find(({ id }) => id === stationId)?.name ?? `station ${stationId}`,
  )

const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1)

/** Under the name in the row on Watch, in at most two short lines. */
export function rowWords(place: PlaceView, picture: LivePlace): string {
  const { leadQuantity } = place.settings.content
  const name = placeQuantityOf(leadQuantity).name
  if (picture.kind !== 'live') {
    const { lastGood } = place
    return lastGood ? `${name}, last good figure below` : name
  }
  const { figure } = picture.lead
  if (leadQuantity === 'crossSea') {
    const [course] = picture.outlook.courses
    const on = course ? `, ${course.name.toLowerCase()} ${threeDigits(course.bearing)} T` : ''
    return `${name}${on}${course?.words ? `, ${course.words.replace(/, setting to /, ' to ')}` : ''}`
  }
  if (leadQuantity === 'overtopping')
    return `${name}, method ${figure.validity.inRange ? 'in range' : 'out of its range'}`
  if (leadQuantity === 'longSwell')
    return `${name} 25–250 s${picture.outlook.remarks.length > 0 ? ', from outside' : ''}`
  return `${name}${figure.words ? `, ${figure.words}` : ''}`
}

/** `2 min old, mean of 20 min`. */
export function ageWords(outlook: OutlookView, nowMs: number, isBerth: boolean): string {
  const seconds = (nowMs - Date.parse(outlook.windowEndsAt)) / 1000
  const span = (Date.parse(outlook.windowEndsAt) - Date.parse(outlook.windowStartsAt)) / 60_000
  return `${age(seconds)} old, mean of ${isBerth ? 60 : Math.round(span)} min`
}

/** Why there is no figure: a sentence, with what was last known in words and its time. */
export function withoutWords(
  place: PlaceView,
  picture: Exclude<LivePlace, { kind: 'live' }>,
  nowMs: number,
): { title: string; sentence: string } {
  const { leadQuantity } = place.settings.content
  const { lastGood } = place
  const last = lastGood
    ? `Last good ${momentUtc(Date.parse(lastGood.windowEndsAt), nowMs)} UTC, from ${lastGood.stationName}: ${placeQuantityOf(leadQuantity).name.toLowerCase()} ${lastGoodFigure(place)}.`
    : 'There is no good figure before.'
  if (picture.kind === 'empty') {
    return {
      title: 'No figure yet',
      sentence: `The first comes with the next estimate of ${feedNames(place).join(' or ')}.`,
    }
  }
  if (picture.kind === 'stale') {
    const names = feedNames(place)
    const who = names.length > 1 ? `${names.join(', ')} are stale` : `${names[0]} is stale`
    return { title: 'Not judged', sentence: `${who}: no figure for ${age(picture.ageSeconds)}. ${last}` }
  }
  return { title: 'Not judged', sentence: `${capital(picture.reason).replace(/\.$/, '')}. ${last}` }
}

function lastGoodFigure({ lastGood, settings }: PlaceView): string {
  if (!lastGood) return ''
  const { toUnit, unit, decimals: places } = placeQuantityOf(settings.content.leadQuantity)
  return `${decimals(lastGood.value * toUnit, places)} ${unit}`
}

/** `tide +1.8 m above datum, falling`; a nominal level says that it is one. */
export function tideWords(tide: TideNow): string {
  const level = `${tide.level >= 0 ? '+' : ''}${metres(tide.level)} above datum`
  if (tide.source === 'nominal') return `nominal level ${level}: no tide known`
  return `${tide.source === 'measured' ? 'level' : 'tide'} ${level}${tide.stage ? `, ${tide.stage}` : ''}`
}

/** `Swell, from 241° T, toward 061° T`. */
export const systemWords = ({ name, toward }: Pick<SystemAtPlace, 'name' | 'toward'>): string =>
  toward === null ? `${capital(name)}, direction not known` : `${capital(name)}, ${bothSenses(toward)}`
