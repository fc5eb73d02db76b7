/** What an officer wrote, prepared for a voice: figures and units in it are written out by the same rules as the measured ones. */
import { spokenDigits, spokenNumber } from './spoken.ts'

const units: [RegExp, string][] = [
  [/^l\/s per m$/, 'litres per second per metre'],
  [/^m\/s$/, 'metres per second'],
  [/^kn$/, 'knots'],
  [/^m$/, 'metres'],
  [/^ft$/, 'feet'],
  [/^s$/, 'seconds'],
  [/^min$/, 'minutes'],
  [/^h$/, 'hours'],
  [/^km$/, 'kilometres'],
]

const unitWords = (unit: string): string => units.find(([pattern]) => pattern.test(unit))?.[1] ?? unit

const spokenDecimal = (digits: string): string => spokenNumber(Number(digits), digits.split('.')[1]?.length ?? 0)

/**
 * `from 247° T`, `14:30 UTC`, `1.0 m`, `± 0.3`, `3–6` and bare numbers become words; everything else stays as it was written. The longest
 * form is tried first, so that the hours of a time are not read as a number.
 */
export function spokenProse(sentence: string): string {
  return sentence
    .replace(/\b(\d{3})° T(?![A-Za-z])/g, (_, digits: string) => `${spokenDigits(digits)} degrees true`)
    .replace(/\b([01]\d|2[0-3]):([0-5]\d)\b/g, (_, hours: string, minutes: string) => spokenDigits(hours + minutes))
    .replace(/±\s*/g, 'plus or minus ')
    .replace(
      /\b(\d+(?:\.\d+)?)\s?(l\/s per m|m\/s|min|km|kn|ft|m|s|h)(?![A-Za-z/])/g,
      (_, digits: string, unit: string) => `${spokenDecimal(digits)} ${unitWords(unit)}`,
    )
    .replace(
      /\b(\d+)\s?[–-]\s?(\d+)\b/g,
      (_, from: string, to: string) => `${spokenDigits(from)} to ${spokenDigits(to)}`,
    )
    .replace(/\b\d+\.\d+\b/g, spokenDecimal)
    .replace(/\b\d+\b/g, spokenDigits)
    .replace(/\s?%/g, ' per cent')
}
