/** The drawings of an e-mail as SVG without text: what they say stands beside them and in their alternative texts. */
import { colours } from './colours.ts'

export interface Glyph {
  /** Degrees true, toward. */
  toward: number
  /** Metres. */
  height: number
}

const solidAboveMetres = 3

/** Arrow of travel with a crest behind it for each metre begun; above 3 m one solid block. */
export function glyphSvg({ toward, height }: Glyph): string {
  const crests =
    height > solidAboveMetres
      ? `<path d="M-6.8 4.2Q0 2.4 6.8 4.2V11Q0 9.4 -6.8 11Z" fill="${colours.wave}" stroke-width="1"/>`
      : Array.from({ length: Math.max(1, Math.ceil(height - 0.001)) }, (_, n) => {
          const y = 4.6 + n * 3.1
          return `<path d="M-6.4 ${y}Q0 ${y - 1.5} 6.4 ${y}" stroke-width="1.6"/>`
        }).join('')
  return (
    `<svg xmlns="http://www.w3.org/2000/svg" width="72" height="72" viewBox="0 0 72 72">` +
    `<g transform="translate(36 36) scale(3) rotate(${toward})" fill="none" stroke="${colours.wave}" stroke-width="1.9">` +
    `<path d="M0 2V-5"/><path d="M0 -11L-4 -4.2H4Z" fill="${colours.wave}" stroke-width="1"/>${crests}</g></svg>`
  )
}

export interface History {
  /** Rising in time; value in the unit that is shown. */
  points: { at: number; value: number }[]
  raise: number | null
  isCircular: boolean
}

const width = 544
const height = 96
const margin = 4
/** Longer without a value: the line breaks. */
const gapMs = 10 * 60_000

export interface Scale {
  from: number
  to: number
  lowest: number
  highest: number
}

/** Null: too few values for a drawing. Nothing stands below zero, and a bearing has its whole circle. */
export function scaleOf({ points, raise, isCircular }: History): Scale | null {
  if (points.length < 2) return null
  const values = [...points.map(({ value }) => value), ...(raise === null ? [] : [raise])]
  const highest = isCircular ? 360 : Math.max(...values) * 1.08
  const lowest = isCircular ? 0 : Math.min(0, ...values)
  const [from, to] = [points[0].at, points[points.length - 1].at]
  return highest > lowest && to > from ? { from, to, lowest, highest } : null
}

/** The last hours of the quantity, the value that raises dashed across it. */
export function historySvg(history: History): string | null {
  const scale = scaleOf(history)
  if (!scale) return null
  const x = (at: number) => margin + ((at - scale.from) / (scale.to - scale.from)) * (width - 2 * margin)
  const y = (value: number) =>
    height - margin - ((value - scale.lowest) / (scale.highest - scale.lowest)) * (height - 2 * margin)
  let path = ''
  let before: History['points'][number] | null = null
  for (const point of history.points) {
    const isBreak =
      !before || point.at - before.at > gapMs || (history.isCircular && Math.abs(point.value - before.value) > 180)
    path += `${isBreak ? 'M' : 'L'}${x(point.at).toFixed(1)} ${y(point.value).toFixed(1)}`
    before = point
  }
  const last = history.points[history.points.length - 1]
  const limit =
    history.raise === null
      ? ''
      : `<path d="M0 ${y(history.raise).toFixed(1)}H${width}" stroke="${colours.ink}" stroke-width="1.5" stroke-dasharray="6 4"/>`
  return (
    `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${height}" viewBox="0 0 ${width} ${height}">` +
    `<rect width="${width}" height="${height}" fill="${colours.paper}"/>` +
    `<path d="M0 ${height - 0.5}H${width}" stroke="${colours.rule}"/>${limit}` +
    `<path d="${path}" fill="none" stroke="${colours.wave}" stroke-width="2" stroke-linejoin="round"/>` +
    `<circle cx="${x(last.at).toFixed(1)}" cy="${y(last.value).toFixed(1)}" r="3.5" fill="${colours.wave}"/></svg>`
  )
}
