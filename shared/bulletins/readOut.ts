/**
 * A bulletin as it is read out by radio: one sentence a line, message marker first, every number spoken in digits. Markers, `stand by` and
 * `no information`: IMO Resolution A.918(22), Standard Marine Communication Phrases, A1 (message markers) and A2; the order of the sentences
 * is our own. Both senses of every direction are said, because an ear cannot look it up.
 */
import { placeQuantityOf } from '../places/quantities.ts'
import type { BulletinContent, BulletinFigure, PlaceFigure, StationFigure } from '../schemas/bulletin.ts'
import { heightPlaces } from '../units.ts'
import { spokenBothSenses, spokenBulletinNumber, spokenNumber, spokenTime } from './spoken.ts'
import { spokenProse } from './spokenProse.ts'
import { measuredAt, placeUncertainty, placeValue } from './words.ts'

const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1)
const sentence = (text: string): string => (/[.!?]$/.test(text) ? text : `${text}.`)
const minutes = (seconds: number): string => spokenNumber(Math.round(seconds / 60), 0)

function stationSentences({ name, system, totalHeight, qualityFlag, windowSeconds }: StationFigure): string[] {
  const places = heightPlaces(system.height)
  const said = [
    `${name}. ${capital(system.name.toLowerCase())} ${spokenBothSenses(system.toward)}, plus or minus ${spokenNumber(system.towardSd, 0)} degrees.`,
    `Speed of the crests ${spokenNumber(system.speed, 1)} metres per second.`,
    `Significant height of the ${system.name.toLowerCase()} ${spokenNumber(system.height, places)} metres. Period ${spokenNumber(system.period, 0)} seconds.`,
  ]
  if (totalHeight !== null) {
    said.push(
      `All systems together ${spokenNumber(totalHeight, heightPlaces(totalHeight))} metres, mean of ${minutes(windowSeconds)} minutes.`,
    )
  }
  return [...said, ...doubt(qualityFlag)]
}

function placeSentences(figure: PlaceFigure): string[] {
  const { name, words, substitute, qualityFlag } = figure
  const quantity = placeQuantityOf(figure.quantity).name
  const said = [`${name}. ${quantity} ${spokenProse(`${placeValue(figure)}, ${placeUncertainty(figure)}`)}.`]
  if (words !== null) said.push(sentence(capital(spokenProse(words))))
  if (substitute !== null) said.push(sentence(`Not measured there: ${spokenProse(substitute)}`))
  return [...said, ...doubt(qualityFlag)]
}

/** A figure that is not good is not read out as if it were. */
const doubt = (flag: number): string[] =>
  flag === 1
    ? []
    : flag === 3
      ? ['This figure is suspect and may be wrong.']
      : ['The quality of this figure was not evaluated.']

function figureSentences(figure: BulletinFigure): string[] {
  if (figure.kind === 'missing')
    return [`${figure.name}. No information. ${sentence(capital(spokenProse(figure.reason)))}`]
  return figure.kind === 'station' ? stationSentences(figure) : placeSentences(figure)
}

const dayWords = (ms: number): string => {
  const moment = new Date(ms)
  const month = moment.toLocaleString('en-GB', { month: 'long', timeZone: 'UTC' })
  return `${spokenNumber(moment.getUTCDate(), 0)} ${month}`
}

function termSentences({ validFrom, validUntil, nextIssueAt }: BulletinContent): string[] {
  const said: string[] = []
  if (validFrom !== null && validUntil !== null) {
    const [from, until] = [Date.parse(validFrom), Date.parse(validUntil)]
    said.push(`In force from ${spokenTime(from)}, ${dayWords(from)}, to ${spokenTime(until)}, ${dayWords(until)}.`)
  }
  if (nextIssueAt !== null) said.push(`Next issue by ${spokenTime(Date.parse(nextIssueAt))}.`)
  return said
}

/** The sentences in the order in which they are read. */
export function readOut(content: BulletinContent): string[] {
  const { marker, number, portName, headline, meaning, figures, cautions, cancelled, replaces } = content
  const measured = measuredAt(figures)
  const exercise = content.isExercise ? ['This is an exercise. Exercise. Exercise.'] : []
  const opening = [
    `All ships, all ships, all ships. This is ${portName}, ${portName}, ${portName}.`,
    number === null ? 'Draft, not issued.' : `Bulletin ${spokenBulletinNumber(number)}.`,
    ...(replaces === null ? [] : [`It replaces bulletin ${spokenBulletinNumber(replaces)}.`]),
  ]
  const closing = [
    ...(content.isDemonstration ? ['Demonstration data of an invented coast.'] : []),
    ...exercise,
    'Out.',
  ]
  if (cancelled) {
    return [
      ...exercise,
      ...opening,
      `${marker.toUpperCase()}. The bulletin is cancelled. ${sentence(spokenProse(cancelled.reason))}`,
      ...closing,
    ]
  }
  return [
    ...exercise,
    ...opening,
    `${marker.toUpperCase()}. ${sentence(spokenProse(headline))}`,
    ...termSentences(content),
    ...(meaning.trim() ? [sentence(spokenProse(meaning.trim()))] : []),
    measured === null ? 'No figure could be measured.' : `Measured at ${spokenTime(measured)}. This is not a forecast.`,
    ...figures.flatMap(figureSentences),
    ...cautions.map((caution) => sentence(spokenProse(caution))),
    ...closing,
  ]
}
