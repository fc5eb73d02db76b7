/** A bulletin as plain text: what the e-mail carries beside its HTML, and what can be copied into a message. Pure, so it stays as issued. */
import type { BulletinContent } from '../schemas/bulletin.ts'
import { clockUtc, dateUtc } from '../times.ts'
import { metres, heightPlaces, plusMinus } from '../units.ts'
import { figureWords, measuredWords, nextIssueWords, qualityWords, termWords } from './words.ts'

const exercise = 'EXERCISE EXERCISE EXERCISE'

/** `Bulletin 2026-316, Marrowick harbour watch`. A draft has no number yet. */
export const bulletinTitle = ({ number, portName }: Pick<BulletinContent, 'number' | 'portName'>): string =>
  number === null ? `Draft of a bulletin, ${portName}` : `Bulletin ${number}, ${portName}`

/** Where it stands in its chain: `Replaces 2026-315.`, or that it holds no longer and why. */
export function chainWords(content: Pick<BulletinContent, 'replaces' | 'cancelled'>): string | null {
  const { replaces, cancelled } = content
  if (cancelled) {
    const at = Date.parse(cancelled.at)
    return `Cancelled ${clockUtc(at)} UTC, ${dateUtc(at)}: ${cancelled.reason}`
  }
  return replaces === null ? null : `Replaces ${replaces}.`
}

/** Lines of the figures: name, figure, quality; then all systems of a station. */
function figureLines(content: BulletinContent): string[] {
  return content.figures.flatMap((figure) => {
    const line = `${figure.name}: ${figureWords(figure)}`
    if (figure.kind === 'missing') return [`${line}.`]
    const lines = [`${line}. ${qualityWords[figure.qualityFlag]}.`]
    if (figure.kind === 'station' && figure.totalHeight !== null) {
      const places = heightPlaces(figure.totalHeight)
      const total = `${metres(figure.totalHeight, places)} ${plusMinus(figure.totalHeightSd, places)}`
      lines.push(`  all systems ${total}, mean of ${Math.round(figure.windowSeconds / 60)} min`)
    }
    return lines
  })
}

export function bulletinPlainText(content: BulletinContent): string {
  const heading = content.headline.trim() || 'No headline'
  const blocks: (string | null)[] = [
    content.isExercise ? exercise : null,
    `${bulletinTitle(content)}${content.audience ? `. For ${content.audience}` : ''}`,
    `${content.marker === 'warning' ? 'WARNING' : 'INFORMATION'}: ${heading}`,
    [chainWords(content), termWords(content), nextIssueWords(content)].filter((line) => line !== null).join('\n'),
    content.meaning.trim() || null,
    [measuredWords(content), ...figureLines(content)].join('\n'),
    content.cautions.join(' '),
    content.isDemonstration ? 'Demonstration data, invented coast. Not for navigation.' : 'Not for navigation.',
    content.isExercise ? exercise : null,
  ]
  return `${blocks.filter((block) => block !== null).join('\n\n')}\n`
}
