import { describe, expect, it } from 'vitest'
import {
  spokenBearing,
  spokenBothSenses,
  spokenBulletinNumber,
  spokenDigits,
  spokenNumber,
  spokenTime,
} from '../../../shared/bulletins/spoken.ts'
import { spokenProse } from '../../../shared/bulletins/spokenProse.ts'

/**
 * IMO Resolution A.918(22), Standard Marine Communication Phrases, part A: numbers in separate digits ("one-five-zero" for 150, "two decimal
 * five" for 2.5), bearings and courses in the 360-degree notation from true north, times in the 24-hour notation with the zone named. The
 * examples are written down from memory of the resolution's general rules.
 */
describe('figures read out by voice', () => {
  it.each([
    [150, 0, 'one five zero'],
    [2.5, 1, 'two decimal five'],
    [12.4, 1, 'one two decimal four'],
    [0.09, 2, 'zero decimal zero nine'],
    [-0.31, 2, 'minus zero decimal three one'],
    [-0.04, 1, 'zero decimal zero'],
    [9.96, 1, 'one zero decimal zero'],
  ])('a number %s with %i decimals is spoken in single digits', (value, places, words) => {
    expect(spokenNumber(value, places)).toBe(words)
  })

  it('a bearing has three digits and says that it is true', () => {
    expect(spokenBearing(7)).toBe('zero zero seven degrees true')
    expect(spokenBearing(359.7)).toBe('zero zero zero degrees true')
  })

  it('a direction has both senses, the one it comes from first', () => {
    expect(spokenBothSenses(67)).toBe('from two four seven degrees true, toward zero six seven degrees true')
  })

  it('a time has four digits and its zone', () => {
    expect(spokenTime(Date.UTC(2026, 10, 12, 9, 5))).toBe('zero nine zero five UTC')
  })

  it('a bulletin number is spoken in its two parts', () => {
    expect(spokenBulletinNumber('2026-316')).toBe('two zero two six, three one six')
  })

  it('what is no number is refused rather than guessed', () => {
    expect(() => spokenNumber(NaN, 1)).toThrow(RangeError)
    expect(() => spokenDigits('12a')).toThrow(RangeError)
  })
})

describe('an officer’s sentence read out', () => {
  it.each([
    ['swell from 247° T, toward 067° T', 'swell from two four seven degrees true, toward zero six seven degrees true'],
    ['above 1.0 m from 15:00 UTC', 'above one decimal zero metres from one five zero zero UTC'],
    ['gusts of 25 kn', 'gusts of two five knots'],
    ['1.2 l/s per m', 'one decimal two litres per second per metre'],
    ['2.3 m ± 0.4', 'two decimal three metres plus or minus zero decimal four'],
    ['Berths 3–6 are closed', 'Berths three to six are closed'],
    ['speed 11.4 m/s', 'speed one one decimal four metres per second'],
    ['a 20 min mean', 'a two zero minutes mean'],
    ['exceeded by 2 %', 'exceeded by two per cent'],
    ['The Long Arm walk is closed.', 'The Long Arm walk is closed.'],
  ])('%s', (written, spoken) => {
    expect(spokenProse(written)).toBe(spoken)
  })
})
