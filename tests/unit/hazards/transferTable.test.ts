import { describe, expect, it } from 'vitest'
import { degreesTrue } from '../../../shared/directions.ts'
import { carryByTable, lookUp } from '../../../shared/hazards/transferTable.ts'
import { degree, system } from './seas.ts'

const table = {
  origin: 'model runs of the harbour’s engineer, 2025, mean level',
  periods: [6, 10, 14],
  directions: [340, 360, 380],
  heightRatio: [
    [0.2, 0.4, 0.6],
    [0.3, 0.5, 0.7],
    [0.4, 0.6, 0.8],
  ],
  turn: [
    [20, 10, 0],
    [30, 15, 0],
    [40, 20, 0],
  ],
  relativeSd: 0.15,
}

describe('a transfer table', () => {
  it('gives its entries, straight lines between them, and passes north', () => {
    expect(lookUp(table, 10, 0)).toEqual({ ratio: 0.5, turn: 15 })
    expect(lookUp(table, 8, 350)?.ratio).toBeCloseTo((0.3 + 0.4) / 2, 12)
    expect(lookUp(table, 8, 350)?.turn).toBeCloseTo((15 + 22.5) / 2, 12)
    expect(lookUp(table, 14, 20)).toEqual({ ratio: 0.8, turn: 0 })
    expect(lookUp(table, 14, 340)).toEqual({ ratio: 0.4, turn: 40 })
  })

  it.each([
    [5.9, 0],
    [14.1, 0],
    [10, 21],
    [10, 339],
  ])('has nothing to say of %s s from %s°', (period, from) => {
    expect(lookUp(table, period, from)).toBeNull()
  })

  it('of one period and one direction holds there alone', () => {
    const one = { ...table, periods: [10], directions: [270], heightRatio: [[0.5]], turn: [[-10]] }
    expect(lookUp(one, 10, 270)).toEqual({ ratio: 0.5, turn: -10 })
    expect(lookUp(one, 10, 271)).toBeNull()
  })

  it('carries a system with the table’s ± and its origin as source', () => {
    const swell = system({ height: 2, heightSd: 0, period: 10, toward: 180, headingSd: 0 })
    const carried = carryByTable({ ...swell, period: { value: 10, sd: 0 } }, table)
    expect(carried.height.value).toBeCloseTo(1, 12)
    expect(carried.height.sd).toBeCloseTo(0.15, 12)
    expect(degreesTrue(carried.heading.value ?? NaN)).toBeCloseTo(195, 9)
    expect(carried.height.method.source).toBe(table.origin)
    const turned = carryByTable({ ...swell, heading: { ...swell.heading, sd: 2 * degree } }, table)
    expect(turned.heading.sd).toBeGreaterThan(0)
  })

  it('refuses a system outside it and names period and direction', () => {
    const { height, system: there } = carryByTable(system({ height: 1, period: 5, toward: 180 }), table)
    expect(there).toBeNull()
    expect(height.reason).toBe('period 5.0 s from 0° T lies outside the transfer table')
  })
})
