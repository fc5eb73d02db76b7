/**
 * What an e-mail about an alert says, frozen in the transaction that made the alert. Pure: the same alert gives the
 * same text for ever.
 */
import { bothSenses, opposite } from '../directions.ts'
import type { Condition, Priority } from '../schemas/limit.ts'
import type { MessageContent, MessageKind } from '../schemas/message.ts'
import { clockLocal, clockUtc, dateUtc, momentUtc } from '../times.ts'
import { age, decimals, heightPlaces, metres, seconds } from '../units.ts'
import { clearWords, comparisonWords, conditionWords, priorityWords, titleOf, valueWithSd } from './describe.ts'
import type { PlaceFigure, SeaFigures } from './figures.ts'
import { flagOfQuantity, quantityOf } from './quantities.ts'
import type { Quantity } from './quantities.ts'

export interface MessageFacts {
  kind: MessageKind
  alertId: number
  isExercise: boolean
  isDemonstration: boolean
  portName: string
  timeZone: string
  caution: string
  subjectName: string
  /** Of the limit's version that raised. */
  title: string | null
  condition: Condition
  priority: Priority
  toCheck: string
  /** SI; null: cannot be told. */
  value: number | null
  valueSd: number | null
  /** All times ms since 1970 UTC. */
  windowEndsAt: number
  crossedAt: number
  clearedAt: number | null
  /** The figures behind it; null for data health. */
  sea: SeaFigures | null
  /** Older windows had exceeded it while nobody could be told. */
  isCaughtUp: boolean
  handling: string
}

const flagWords: Record<number, string> = {
  1: 'Good',
  2: 'Not evaluated',
  3: 'Suspect: may be wrong',
  4: 'Failed',
  9: 'Missing',
}

function wavesOf(sea: SeaFigures | null): Pick<MessageContent, 'waves' | 'glyph'> {
  const system = sea?.leading
  if (!sea?.resolved || !system || system.toward === null || system.height === null) return { waves: null, glyph: null }
  const name =
    sea.swell.height === system.height ? 'Swell' : sea.windSea.height === system.height ? 'Wind sea' : 'Waves'
  const height = metres(system.height, heightPlaces(system.height))
  const at = sea.atPlace?.stationName ? `, at ${sea.atPlace.stationName}` : ''
  const waves = `${name} ${bothSenses(system.toward)}, ${height}, ${seconds(system.period)}${at}`
  return { waves, glyph: { toward: system.toward, height: system.height, name } }
}

/** `Thu 12 Nov 2026, 14:20 UTC, 15:20 local`. */
const when = (at: number, timeZone: string): string =>
  `${dateUtc(at)}, ${clockUtc(at)} UTC, ${clockLocal(at, timeZone)} local`

const figureAtPlace = ({ ofPlace }: Quantity, sea: SeaFigures | null): PlaceFigure | null =>
  (ofPlace && sea?.atPlace?.figures[ofPlace]) || null

/** A likely range belongs to the newest figure alone: not to the value that an alert holds while nothing is known. */
function likelyWords({ value }: MessageFacts, quantity: Quantity, figure: PlaceFigure | null): string {
  if (!figure?.likely || figure.value !== value) return ''
  const [from, to] = [figure.likely.from, figure.likely.to].map((end) => decimals(end * quantity.toUnit, quantity.decimals)) // prettier-ignore
  return `, likely ${from} to ${to}`
}

const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1)

function headlineOf({ kind, condition, windowEndsAt, crossedAt }: MessageFacts): string {
  const [first] = condition.comparisons
  if (kind === 'allClear') return `No longer exceeded: ${clearWords(first)}. This does not mean that it is safe.`
  const long = Math.max(0, (windowEndsAt - crossedAt) / 1000)
  const also = condition.comparisons.slice(1).map((one) => `, and ${comparisonWords(one)}`).join('') // prettier-ignore
  return `${capital(comparisonWords(first))}${also}${long < 60 ? '' : ` for ${age(long)}`}`
}

export function messageContentOf(facts: MessageFacts): MessageContent {
  const { condition, windowEndsAt, sea, timeZone, isCaughtUp, crossedAt } = facts
  const quantity = quantityOf(condition.comparisons[0].quantity)
  const figure = figureAtPlace(quantity, sea)
  const value =
    quantity.isCircular && facts.value !== null
      ? bothSenses(opposite(facts.value))
      : valueWithSd(quantity, facts.value, facts.valueSd) + likelyWords(facts, quantity, figure)
  const flag = sea && flagOfQuantity(quantity, sea)
  const quality = [flag === null ? '' : (flagWords[flag] ?? ''), sea?.atPlace?.substituteWords ?? ''].filter(Boolean)
  return {
    isExercise: facts.isExercise,
    isDemonstration: facts.isDemonstration,
    portName: facts.portName,
    priority: facts.priority,
    priorityWords: priorityWords[facts.priority],
    title: titleOf(facts.title, condition, facts.subjectName),
    headline: [headlineOf(facts), facts.kind === 'allClear' ? null : figure?.words].filter(Boolean).join('; '),
    subjectName: facts.subjectName,
    value,
    limit: conditionWords(condition),
    quantity: quantity.key,
    ...wavesOf(sea),
    when: when(windowEndsAt, timeZone),
    windowEndsAt: new Date(windowEndsAt).toISOString(),
    since: isCaughtUp ? `Exceeded since ${momentUtc(crossedAt, windowEndsAt)} UTC; nobody could be told before.` : null,
    quality: quality.join('. '),
    toCheck: facts.toCheck,
    handling: facts.handling,
    caution: facts.caution,
    path: `/alerts/${facts.alertId}`,
  }
}

const kindWords: Partial<Record<MessageKind, string>> = {
  reminder: 'Reminder',
  escalation: 'Not confirmed yet',
  allClear: 'Cleared',
}

/** At most 200 characters: `EXERCISE High: Total height, Outer Ledge 2.61 m ± 0.14`. */
export function subjectLineOf(kind: MessageKind, content: MessageContent): string {
  const marks = [content.isExercise && 'EXERCISE', content.isDemonstration && 'DEMONSTRATION'].filter(Boolean)
  const priority = capital(content.priority)
  const prefix = kindWords[kind] ? `${priority}, ${(kindWords[kind] ?? '').toLowerCase()}` : priority
  return [...marks, `${prefix}: ${content.title} ${content.value}`].join(' ').slice(0, 200)
}

/** The plain text; a link to the page and the link that confirms receipt are added for each person. */
export function messageTextOf(kind: MessageKind, content: MessageContent): string {
  const exercise = 'EXERCISE EXERCISE EXERCISE. This is a drill: no sea has done this.'
  const demonstration = 'Demonstration data, invented coast.'
  const lines: (string | false | null)[] = [
    content.isExercise && exercise,
    content.isDemonstration && demonstration,
    `${content.priorityWords}.${kindWords[kind] ? ` ${kindWords[kind]}.` : ''}`,
    `${content.title}: ${content.value}`,
    content.headline,
    content.since,
    '',
    `Measured: ${content.when}${content.quality === '' ? '' : `. Quality: ${content.quality}`}`,
    content.waves && `Waves: ${content.waves}`,
    `Limit: ${content.limit}`,
    content.toCheck !== '' && `Check: ${content.toCheck}`,
    content.handling !== '' && content.handling,
    '',
    content.caution,
    content.isExercise && exercise,
  ]
  return lines.filter((line): line is string => typeof line === 'string').join('\n')
}
