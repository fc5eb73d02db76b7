/** How a bulletin's figures stand in a line, on the page, in the e-mail and in the print alike. */
import { bothSenses } from '../directions.ts'
import { placeQuantityOf } from '../places/quantities.ts'
import type { BulletinContent, BulletinFigure, PlaceFigure, StationFigure } from '../schemas/bulletin.ts'
import { clockLocal, clockUtc, dateUtc } from '../times.ts'
import { decimals, heightPlaces, metres, metresPerSecond, plusMinus, seconds } from '../units.ts'

export const qualityWords: Record<number, string> = {
  1: 'Good',
  2: 'Not evaluated',
  3: 'Suspect',
  4: 'Failed',
  9: 'Missing',
}

/** `1.11 m`, `1.2 l/s per m`. */
export function placeValue({ quantity, value }: Pick<PlaceFigure, 'quantity' | 'value'>): string {
  const { unit, toUnit, decimals: places } = placeQuantityOf(quantity)
  return `${decimals(value * toUnit, placesOf(value * toUnit, places, unit))} ${unit}`
}

/** `± 0.09`, `likely 0.4 to 3.6`; empty where nothing is known of it. */
export function placeUncertainty({ quantity, value, sd, likely }: PlaceFigure): string {
  const { unit, toUnit, decimals: most } = placeQuantityOf(quantity)
  if (likely) {
    const [from, to] = [likely.from, likely.to].map((end) => decimals(end * toUnit, placesOf(end * toUnit, most, unit)))
    return `likely ${from} to ${to}`
  }
  return plusMinus(sd === null ? null : sd * toUnit, placesOf(value * toUnit, most, unit))
}

/** A discharge has two significant digits; other figures the decimals of their quantity. */
function placesOf(value: number, usual: number, unit: string): number {
  if (!unit.startsWith('l/s')) return usual
  if (value === 0) return 1
  return Math.min(4, Math.max(0, 1 - Math.floor(Math.log10(Math.abs(value)))))
}

/** `swell from 247° T, toward 067° T, ± 3°, 11.4 m/s ± 0.3, 2.1 m ± 0.1, 12.4 s`. */
export function stationWords({ system }: StationFigure): string {
  const places = heightPlaces(system.height)
  return [
    `${system.name.toLowerCase()} ${bothSenses(system.toward)}, ${plusMinus(system.towardSd, 0)}°`,
    `${metresPerSecond(system.speed)} ${plusMinus(system.speedSd, 1)}`,
    `${metres(system.height, places)} ${plusMinus(system.heightSd, places)}`,
    seconds(system.period),
  ].join(', ')
}

/** `Cross-sea 1.11 m ± 0.09, inbound 038° T, from the port quarter, setting to starboard, from Fairway`. */
export function placeWords(figure: PlaceFigure): string {
  const said = `${placeQuantityOf(figure.quantity).name.toLowerCase()} ${placeValue(figure)}`
  const likely = placeUncertainty(figure)
  return [likely.startsWith('±') ? `${said} ${likely}` : `${said}, ${likely}`, figure.words, figure.substitute]
    .filter((part) => part !== null && part !== '')
    .join(', ')
}

/** One line of any figure. */
export function figureWords(figure: BulletinFigure): string {
  if (figure.kind === 'missing') return `${figure.reason}: not included`
  return figure.kind === 'station' ? stationWords(figure) : placeWords(figure)
}

/** The newest end of a window among the figures, ms since 1970 UTC; null without figures. */
export function measuredAt(figures: readonly BulletinFigure[]): number | null {
  const ends = figures.flatMap((one) => (one.kind === 'missing' ? [] : [Date.parse(one.windowEndsAt)]))
  return ends.length === 0 ? null : Math.max(...ends)
}

/** `Measured 14:30 UTC, Thu 12 Nov 2026, 15:30 local. Not a forecast`. It stands above the figures, at their weight. */
export function measuredWords({ figures, timeZone }: Pick<BulletinContent, 'figures' | 'timeZone'>): string {
  const at = measuredAt(figures)
  if (at === null) return 'No figure could be measured. Not a forecast'
  const ends = figures.flatMap((one) => (one.kind === 'missing' ? [] : [Date.parse(one.windowEndsAt)]))
  const oldest = Math.min(...ends)
  const span = oldest === at ? clockUtc(at) : `${clockUtc(oldest)} to ${clockUtc(at)}`
  return `Measured ${span} UTC, ${dateUtc(at)}, ${clockLocal(at, timeZone)} local. Not a forecast`
}

const momentWords = (at: string, timeZone: string): { utc: string; local: string; day: string } => {
  const ms = Date.parse(at)
  return { utc: clockUtc(ms), local: clockLocal(ms, timeZone), day: dateUtc(ms) }
}

/** `In force 15:00 to 21:00 UTC, 16:00 to 22:00 local, unless replaced.` The days are named where they differ. */
export function termWords({
  validFrom,
  validUntil,
  timeZone,
}: Pick<BulletinContent, 'validFrom' | 'validUntil' | 'timeZone'>): string {
  if (validFrom === null || validUntil === null) return 'No term is set.'
  const [from, until] = [momentWords(validFrom, timeZone), momentWords(validUntil, timeZone)]
  const utc =
    from.day === until.day
      ? `${from.utc} to ${until.utc} UTC, ${from.day}`
      : `${from.utc} UTC, ${from.day}, to ${until.utc} UTC, ${until.day}`
  return `In force ${utc}, ${from.local} to ${until.local} local, unless replaced.`
}

/** `Next issue by 21:00 UTC, 22:00 local.`; null where none is promised. */
export function nextIssueWords({
  nextIssueAt,
  timeZone,
}: Pick<BulletinContent, 'nextIssueAt' | 'timeZone'>): string | null {
  if (nextIssueAt === null) return null
  const { utc, local, day } = momentWords(nextIssueAt, timeZone)
  return `Next issue by ${utc} UTC, ${day}, ${local} local.`
}
