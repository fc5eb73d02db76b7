/** Cells, times, units and layouts as loggers and spreadsheets write them. */
import { describe, expect, test } from 'vitest'
import { guessDecimalMark, guessDelimiter, readNumber, splitCells, withoutByteOrderMark } from '../../../shared/delimitedText.ts' // prettier-ignore
import type { UploadLayout } from '../../../shared/schemas/stationSetUpUploads.ts'
import { guessLayout } from '../../../shared/uploads/guessLayout.ts'
import { createRowReader } from '../../../shared/uploads/rowReader.ts'
import { readTime } from '../../../shared/uploads/times.ts'
import { factorOf } from '../../../shared/uploads/units.ts'

describe('a line', () => {
  test.each<[string, ',' | ';' | '\t', string[]]>([
    ['a,b,c', ',', ['a', 'b', 'c']],
    ['"a,b",c', ',', ['a,b', 'c']],
    ['"say ""hello""";2', ';', ['say "hello"', '2']],
    ['a\t\tc', '\t', ['a', '', 'c']],
    ['"never closed,c', ',', ['never closed,c']],
    ['5" pipe,2', ',', ['5" pipe', '2']],
  ])('%s is cut into its cells', (line, delimiter, cells) => {
    expect(splitCells(line, delimiter)).toEqual(cells)
  })

  test('tells its delimiter, a semicolon before commas that are decimal', () => {
    expect([guessDelimiter('time,A,B'), guessDelimiter('time;A;B'), guessDelimiter('time\tA'), guessDelimiter('1,5;2,5')]).toEqual([',', ';', '\t', ';']) // prettier-ignore
  })

  test('loses the mark before its first letter and no other', () => {
    expect(withoutByteOrderMark('\uFEFFtime')).toBe('time')
    expect(withoutByteOrderMark('time\uFEFF')).toBe('time\uFEFF')
  })
})

describe('a number', () => {
  test.each<[string, '.' | ',', number | null]>([
    ['1.25', '.', 1.25],
    ['-3', '.', -3],
    ['+.5', '.', 0.5],
    ['1e-3', '.', 0.001],
    ['\u22122,5', ',', -2.5],
    ['', '.', null],
    ['  ', ',', null],
    ['1.250,5', ',', NaN],
    ['1,5', '.', NaN],
    ['0x10', '.', NaN],
    ['Infinity', '.', NaN],
    ['1 000', '.', NaN],
  ])('written %j with %s is %d', (cell, decimal, value) => {
    expect(readNumber(cell, decimal)).toEqual(value)
  })

  test('has a decimal comma only where the comma cuts no cells', () => {
    expect(guessDecimalMark(['1,5', '2'], ';')).toBe(',')
    expect(guessDecimalMark(['1,5'], ',')).toBe('.')
  })
})

describe('a time', () => {
  const iso = (text: string, utcOffsetMinutes = 0) => readTime(text, { timeForm: 'iso', utcOffsetMinutes })
  const noon = Date.UTC(2026, 2, 5, 12, 0, 0)

  test.each([
    ['2026-03-05T12:00:00.250Z', noon + 250],
    ['2026-03-05 12:00:00,250', noon + 250],
    ['2026/03/05 12:00', noon],
    ['05.03.2026 12:00:00', noon],
    ['2026-03-05T13:00:00+01:00', noon],
    ['2026-03-05T07:30:00-0430', noon],
    ['2026-03-05T12:00:00.0000005Z', noon + 0.0005],
  ])('written %s is read', (text, wanted) => {
    expect(iso(text)).toBeCloseTo(wanted, 4)
  })

  test('without a zone is that of the zone given', () => {
    expect(iso('2026-03-05 13:00', 60)).toBe(noon)
    expect(iso('2026-03-05T12:00:00Z', 60)).toBe(noon)
  })

  test('in seconds or milliseconds since 1970 is read as such', () => {
    expect(readTime(String(noon / 1000), { timeForm: 'epochSeconds', utcOffsetMinutes: 0 })).toBe(noon)
    expect(readTime(String(noon), { timeForm: 'epochMilliseconds', utcOffsetMinutes: 0 })).toBe(noon)
  })

  test.each(['05/03/2026 12:00', '2026-02-30 12:00', '2026-03-05 25:00', '2026-13-05', '5 March 2026', '12:00', ''])(
    'written %j is none: nobody can tell what it means',
    (text) => {
      expect(iso(text)).toBeNaN()
    },
  )
})

test('units are turned into what is stored, and refused where they do not fit', () => {
  expect(factorOf('pressure', 'mbar')).toBeCloseTo(0.01, 12)
  expect(factorOf('pressure', 'psi')).toBeCloseTo(0.6894757, 7)
  expect(factorOf('surface', 'ft')).toBe(0.3048)
  expect(factorOf('barometer', 'hPa')).toBe(100)
  expect(factorOf('windSpeed', 'kn')).toBeCloseTo(0.514444, 6)
  expect([factorOf('pressure', 'm'), factorOf('surface', 'dbar'), factorOf('windFrom', 'm/s')]).toEqual([null, null, null]) // prettier-ignore
})

const known = [
  { letter: 'A', names: ['p4101'] },
  { letter: 'B', names: ['p4102'] },
]

describe('a layout', () => {
  test('is guessed through lines above the heading, serials, units, and a clock in a column of its own', () => {
    const lines = ['Logger 7', '', 'Date;Clock;P4101 (mbar);P4102 (mbar)', '05.03.2026;12:00:00;1112,5;1113', '05.03.2026;12:00:01;1112,5;1113'] // prettier-ignore
    const { layout, reason } = guessLayout(lines, known)
    expect(reason).toBeNull()
    expect(layout).toMatchObject({ delimiter: ';', decimal: ',', linesAbove: 2, timeColumn: 'Date', clockColumn: 'Clock', timeForm: 'iso' }) // prettier-ignore
    expect(layout?.columns).toEqual([
      { column: 'P4101 (mbar)', letter: 'A', unit: 'mbar' },
      { column: 'P4102 (mbar)', letter: 'B', unit: 'mbar' },
    ])
  })

  test('of seconds since 1970 is told from one of milliseconds', () => {
    expect(guessLayout(['t,A', '1772712000,1'], known).layout?.timeForm).toBe('epochSeconds')
    expect(guessLayout(['t,A', '1772712000000,1'], known).layout?.timeForm).toBe('epochMilliseconds')
  })

  const layout: UploadLayout = {
    delimiter: ',', decimal: '.', linesAbove: 0, timeColumn: 'time', clockColumn: null, timeForm: 'iso', utcOffsetMinutes: 0, missing: ['-9999'], columns: [{ column: 'A', letter: 'A', unit: null }] } // prettier-ignore
  const kindOf = (letter: string) => (letter === 'A' ? ('surface' as const) : undefined)

  test('reads rows, and says of each that it cannot read why', () => {
    const read = createRowReader('time,A,other', layout, kindOf)
    if (typeof read !== 'function') throw new Error(read.join())
    expect(read('2026-03-05T12:00:00Z,1.5,x')).toEqual({ timeMs: Date.UTC(2026, 2, 5, 12), values: [1.5] })
    expect(read('2026-03-05T12:00:00Z,-9999,x')).toMatchObject({ values: [null] })
    expect(read('2026-03-05T12:00:00Z,,x')).toMatchObject({ values: [null] })
    expect(read('2026-03-05T12:00:00Z,1')).toBe('2 cells where the heading has 3')
    expect(read('soon,1,x')).toBe('"soon" is no time')
    expect(read('2026-03-05T12:00:00Z,1m,x')).toBe('"1m" under A is no number')
  })

  test('that does not fit the file is refused with everything that is wrong', () => {
    const columns = [
      { column: 'A', letter: 'A', unit: 'psi' as const },
      { column: 'B', letter: 'A', unit: null },
      { column: 'other', letter: 'Q', unit: null },
    ]
    expect(createRowReader('when,A,other', { ...layout, columns }, kindOf)).toEqual([
      'there is no column "time" in the heading',
      'A cannot be in psi; it can be in m, cm, mm, ft',
      'there is no column "B" in the heading',
      'there is no sensor or quantity Q',
      'A is taken from two columns',
    ])
  })
})
