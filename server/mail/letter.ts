/** From the frozen content of a message to the e-mail of one person: HTML, plain text and pictures. */
import type { BulletinContent } from '../../shared/schemas/bulletin.ts'
import type { MessageContent, MessageKind } from '../../shared/schemas/message.ts'
import { bulletinTitle } from '../../shared/bulletins/plainText.ts'
import { bothSenses } from '../../shared/directions.ts'
import { clockLocal, clockUtc, dateUtc } from '../../shared/times.ts'
import { bulletinBlock, bulletinGlyph, bulletinGlyphCid, bulletinLines } from './letter/bulletinBlock.ts'
import { colours, priorityColours } from './letter/colours.ts'
import { glyphSvg, historySvg } from './letter/drawings.ts'
import type { History } from './letter/drawings.ts'
import { pngOf } from './letter/picture.ts'
import { renderPage } from './letter/template.ts'
import type { Page, Row } from './letter/template.ts'
import { wordmarkSvg } from './letter/wordmark.ts'

export interface Letter {
  messageId: number
  kind: MessageKind
  personName: string
  /** Names of those who are away and whose deputy this person is. */
  standsInFor: string | null
  subject: string
  text: string
  content: MessageContent | null
  /** Of a bulletin's e-mail: the bulletin as it was when the e-mail was written. */
  bulletin?: BulletinContent | null
  isExercise: boolean
  alertId: number | null
  createdAt: Date
  mayBeCopy: boolean
  isAcknowledged: boolean
  receipt: { token: string; expiresAt: Date } | null
  /** A page of the program that this e-mail opens, for its person alone. */
  link: { path: string; words: string } | null
  next: { reminderAt: Date | null; step: { at: Date; lists: string[] } | null }
}

export interface Surroundings {
  /** Without a slash at its end. */
  publicUrl: string
  portName: string
  timeZone: string
  isDemonstration: boolean
  /** Whom to call in an emergency; empty: nothing stands there. */
  emergencyLine?: string
  /** Before the sender's address; empty: as the configuration has it. */
  senderName?: string
  /** The last hours of the alert's quantity; null: none to be shown. */
  history: (History & { unit: string; decimals: number }) | null
}

export interface Written {
  subject: string
  text: string
  html: string
  pictures: { cid: string; name: string; png: Buffer }[]
}

const exerciseWords = 'EXERCISE EXERCISE EXERCISE. This is a drill: no sea has done this.'
const pageWords = 'Opens a page with one button; opening it records nothing.'
const receiptWords = 'A receipt stops your reminders. It does not acknowledge the alert: the watch does that.'

const kindLine: Partial<Record<MessageKind, string>> = {
  reminder: 'Reminder, no receipt from you yet',
  escalation: 'Nobody has confirmed receipt yet',
  allClear: 'Cleared',
}

const both = (at: Date, zone: string): string =>
  `${clockUtc(at.getTime())} UTC (${clockLocal(at.getTime(), zone)} local)`

const numbered = (alertId: number): string => String(alertId).padStart(4, '0')

function afterwardsOf({ receipt, next, isAcknowledged }: Letter, { timeZone }: Surroundings): string[] {
  if (!receipt) return []
  const { reminderAt, step } = next
  const reminder = reminderAt && `you get the next e-mail at ${both(reminderAt, timeZone)}`
  const others = step && `at ${both(step.at, timeZone)} ${step.lists.join(', ') || 'the next step'} will be told`
  const follows = [reminder, isAcknowledged ? null : others].filter(Boolean).join('; ')
  return [pageWords, receiptWords, ...(follows === '' ? [] : [`Without a receipt ${follows}.`])]
}

function footOf(letter: Letter, { timeZone, emergencyLine }: Surroundings): string[] {
  const { personName, standsInFor, messageId, alertId, createdAt, receipt, mayBeCopy } = letter
  const alert = alertId === null ? '' : `Alert ${numbered(alertId)}, `
  return [
    ...(emergencyLine ? [emergencyLine.replace(/[.!]?$/, '.')] : []),
    standsInFor === null
      ? `You receive this as ${personName}.`
      : `You receive this as ${personName}, deputy of ${standsInFor}, who cannot be reached now.`,
    `${alert}${alert === '' ? 'E' : 'e'}-mail ${messageId}, written ${dateUtc(createdAt.getTime())}, ${both(createdAt, timeZone)}.`,
    ...(receipt
      ? [
          `Your link is signed for you and ends ${dateUtc(receipt.expiresAt.getTime())}, ${both(receipt.expiresAt, timeZone)}.`,
        ]
      : []),
    ...(mayBeCopy ? ['It may reach you twice: the mail server gave no answer the first time.'] : []),
  ]
}

const firstTime = ({ points }: History): number => points[0].at
const lastTime = ({ points }: History): number => points[points.length - 1].at

function chartWords({ history }: Surroundings): string {
  if (!history) return ''
  const { points, raise, unit, decimals, isCircular } = history
  const written = (value: number): string =>
    `${value.toFixed(decimals)}${unit === '' || unit === '°' ? unit : ` ${unit}`}`
  const values = points.map(({ value }) => value)
  const range = isCircular
    ? 'from north through the circle'
    : `least ${written(Math.min(...values))}, most ${written(Math.max(...values))}`
  const limit = raise === null ? '' : `; the limit of ${written(raise)} dashed`
  return `${clockUtc(firstTime(history))} to ${clockUtc(lastTime(history))} UTC: ${range}${limit}.`
}

function rowsOf(content: MessageContent): Row[] {
  const rows: Row[] = [
    { name: 'Place', text: content.subjectName },
    { name: 'Limit', text: content.limit },
    { name: 'Check', text: content.toCheck },
    { name: 'Watch', text: content.handling },
  ]
  return rows.filter(({ text }) => text !== '')
}

const nothing = {
  ...{ glyph: null, waves: null, measured: null, chart: null, rows: [], others: [], page: null, bulletin: null },
}

/** A bulletin wears no alert's colour: its places' priorities are told by the watch, not by the bulletin. */
function bulletinPageOf({ subject }: Letter, bulletin: BulletinContent) {
  const kind = bulletin.marker === 'warning' ? 'WARNING' : 'INFORMATION'
  const audience = bulletin.audience ? `, for ${bulletin.audience}` : ''
  return {
    ...nothing,
    ...{ ink: colours.ink, wash: colours.paper, paragraphs: [], caution: bulletin.cautions.join(' ') },
    priorityLine: `${kind}${audience}. ${bulletinTitle(bulletin)}`,
    heading: bulletin.cancelled ? `Cancelled: ${bulletin.headline}` : bulletin.headline || 'No headline',
    headline: [
      ...(subject.startsWith('PROOF') ? ['PROOF, not issued. It went to you alone.'] : []),
      ...bulletinLines(bulletin),
    ],
    bulletin: bulletin.cancelled ? null : bulletinBlock(bulletin),
  }
}

function pageOf(letter: Letter, around: Surroundings): Page {
  const { content, kind, receipt, isAcknowledged } = letter
  const { publicUrl, portName, isDemonstration } = around
  const demonstration = isDemonstration ? '. Demonstration data, invented coast' : ''
  const common = {
    subject: subjectOf(letter),
    head: `${portName}${demonstration}`,
    exercise: letter.isExercise ? exerciseWords : null,
    receipt: receipt
      ? {
          url: `${publicUrl}/receipt/${receipt.token}`,
          words: letter.alertId === null ? 'Confirm receipt' : `Confirm receipt of ${numbered(letter.alertId)}`,
        }
      : letter.link && { url: `${publicUrl}${letter.link.path}`, words: letter.link.words },
    afterwards: afterwardsOf(letter, around),
    foot: footOf(letter, around),
  }
  if (letter.bulletin) return { ...common, ...bulletinPageOf(letter, letter.bulletin) }
  if (!content) {
    const paragraphs = letter.text.split('\n').filter((line) => line !== '')
    return {
      ...common,
      ...{ ink: colours.ink, wash: colours.paper, priorityLine: null, heading: letter.subject, headline: [] },
      ...{ ...nothing, caution: null },
      paragraphs,
    }
  }
  const { ink, wash } = priorityColours[content.priority]
  const [word = '', ...rank] = content.priorityWords.split(',')
  const handled = isAcknowledged ? 'Acknowledged by the watch' : 'Not yet acknowledged by the watch'
  const isSeveral = kind === 'flood'
  return {
    ...common,
    ink,
    wash,
    priorityLine: [
      `${word.toUpperCase()},${rank.join(',')}`,
      ...(kindLine[kind] ? [kindLine[kind]] : []),
      ...(kind === 'allClear' || isSeveral ? [] : [handled]),
    ].join('. '),
    heading: isSeveral ? letter.subject : `${content.title}: ${content.value}`,
    headline: [
      ...(isSeveral ? [`First: ${content.title} ${content.value}.`] : []),
      content.headline,
      ...(content.since === null ? [] : [content.since]),
    ],
    glyph: content.glyph && {
      cid: 'glyph@offing',
      alt: `Waves ${bothSenses(content.glyph.toward)}, ${content.glyph.height.toFixed(1)} m`,
      height: `${content.glyph.height.toFixed(1)} m`,
    },
    waves: content.waves,
    measured: `${content.when}${content.quality === '' ? '' : `. Quality: ${content.quality}`}`,
    chart: around.history && {
      cid: 'history@offing',
      alt: `${content.title}, ${chartWords(around)}`,
      caption: chartWords(around),
    },
    rows: rowsOf(content),
    bulletin: null,
    others: (content.others ?? []).map(({ line, path }) => ({ line, url: `${publicUrl}${path}` })),
    paragraphs: [],
    page: { url: `${publicUrl}${isSeveral ? '/alerts' : content.path}`, words: 'Open it in Offing' },
    caution: content.caution,
  }
}

/** A drill says so in the subject, whoever wrote it. */
const subjectOf = ({ subject, isExercise }: Letter): string =>
  isExercise && !subject.startsWith('EXERCISE') ? `EXERCISE ${subject}` : subject

function textOf(letter: Letter, page: Page): string {
  const lines = [
    letter.text,
    '',
    ...(page.chart ? [`The last hours, ${page.chart.caption}`] : []),
    ...(page.receipt ? [`${page.receipt.words}: ${page.receipt.url}`] : []),
    ...(page.page ? [`${page.page.words}: ${page.page.url}`] : []),
    ...page.afterwards,
    '',
    ...page.foot,
  ]
  const isMarked = !letter.isExercise || letter.text.includes('EXERCISE')
  return [...(isMarked ? [] : [exerciseWords, '']), ...lines].join('\n')
}

export async function writeLetter(letter: Letter, around: Surroundings): Promise<Written> {
  const chartSvg = letter.content && around.history && historySvg(around.history)
  const page = pageOf(letter, chartSvg ? around : { ...around, history: null })
  const bulletinDrawing = page.bulletin && letter.bulletin ? bulletinGlyph(letter.bulletin) : null
  const drawings = [
    { cid: 'mark@offing', name: 'offing.png', svg: wordmarkSvg },
    ...(page.glyph && letter.content?.glyph
      ? [{ cid: page.glyph.cid, name: 'waves.png', svg: glyphSvg(letter.content.glyph) }]
      : []),
    ...(bulletinDrawing ? [{ cid: bulletinGlyphCid, name: 'waves.png', svg: glyphSvg(bulletinDrawing) }] : []),
    ...(page.chart && chartSvg ? [{ cid: page.chart.cid, name: 'history.png', svg: chartSvg }] : []),
  ]
  // One that cannot be made is left out: its alternative text says the same.
  const made = await Promise.allSettled(
    drawings.map(async ({ cid, name, svg }) => ({ cid, name, png: await pngOf(svg) })),
  )
  const pictures = made.flatMap((one) => (one.status === 'fulfilled' ? [one.value] : []))
  return { subject: page.subject, text: textOf(letter, page), html: renderPage(page), pictures }
}
