import { describe, expect, it } from 'vitest'
import {
  age,
  decimals,
  heightPlaces,
  metres,
  metresPerSecond,
  percent,
  plusMinus,
  seconds,
} from '../../shared/units.ts'

describe('a figure', () => {
  it('has the decimals of its quantity and its unit', () => {
    expect(metresPerSecond(11.4321)).toBe('11.4 m/s')
    expect(metres(2.149)).toBe('2.1 m')
    expect(metres(1.1067, 2)).toBe('1.11 m')
    expect(seconds(12.44)).toBe('12.4 s')
    expect(percent(0.034)).toBe('3 %')
  })

  it('below zero has the minus sign U+2212', () => {
    expect(decimals(-3.14, 1)).toBe('\u22123.1')
  })

  it('that rounds to zero from below has no minus sign', () => {
    expect(decimals(-0.04, 1)).toBe('0.0')
  })

  it('from 10 000 has thin groups, below it none', () => {
    expect(decimals(9999, 0)).toBe('9999')
    expect(decimals(12345.6, 1)).toBe('12\u202f345.6')
    expect(decimals(1234567, 0)).toBe('1\u202f234\u202f567')
  })

  it('that is not there is a word, never 0', () => {
    expect(metres(null)).toBe('none')
    expect(decimals(Number.NaN, 1)).toBe('none')
    expect(percent(null)).toBe('none')
  })

  it('of a small height has two decimals', () => {
    expect(heightPlaces(0.12)).toBe(2)
    expect(heightPlaces(2.1)).toBe(1)
    expect(heightPlaces(null)).toBe(1)
  })
})

describe('an uncertainty', () => {
  it('has the decimals of its figure', () => {
    expect(plusMinus(0.34, 1)).toBe('± 0.3')
    expect(plusMinus(3.2, 0)).toBe('± 3')
  })

  it('is never written smaller than the last digit shown', () => {
    expect(plusMinus(0.02, 1)).toBe('± 0.1')
    expect(plusMinus(0, 0)).toBe('± 1')
  })

  it('that is not known says so', () => {
    expect(plusMinus(null, 1)).toBe('± not known')
  })
})

describe('an age', () => {
  it('counts seconds up to two minutes', () => {
    expect(age(38.9)).toBe('38 s')
    expect(age(119.9)).toBe('119 s')
    expect(age(120)).toBe('2 min')
  })

  it('counts minutes, then hours and minutes, then days and hours', () => {
    expect(age(22 * 60 + 59)).toBe('22 min')
    expect(age(3 * 3600 + 10 * 60)).toBe('3 h 10 min')
    expect(age(3 * 3600)).toBe('3 h')
    expect(age(52 * 3600)).toBe('2 d 4 h')
  })

  it('before the end of the window counts as none', () => {
    expect(age(-3)).toBe('0 s')
  })
})
