import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import DirectionalDisc from '../../../src/components/drawings/DirectionalDisc.vue'
import {
  highestPower,
  powerStep,
  ringBorders,
  stepPaths,
} from '../../../src/components/drawings/geometry/directionalLayout.ts'
import { directionalMethods } from '../../../src/components/station/directionalChoice.ts'
import { directionalFigures } from '../../../src/components/station/figures/directionalFigures.ts'

/** Energy toward 67° at 0.08 Hz alone, on directions ten degrees apart beginning at 7. */
const directions = Array.from({ length: 36 }, (_, n) => 7 + n * 10)
const only = directions.map((toward) => (toward === 67 ? 2 : 0))
const found = { frequency: [0.08, 0.1, 0.14], directions, density: [only, only.map(() => 0), only.map(() => 0)] }
const swell = { key: 1, title: 'Swell', sign: 1 as const, period: 12.5, from: 247 }

describe('the disc of directions', () => {
  it('has the energy where it comes from, and says so', () => {
    expect(highestPower(found)).toEqual({ density: 2, frequency: 0.08, from: 247 })
    const disc = mount(DirectionalDisc, { props: { ...found, method: 'IMLM', systems: [swell] } })
    const sentence = disc.find('svg').attributes('aria-label')
    expect(sentence).toContain('highest from two four seven degrees true at 12.5 s')
    expect(sentence).toContain('Swell from two four seven degrees true at 12.5 s')
  })

  it('draws one ring piece, left of and below the middle for waves from the west-south-west', () => {
    const paths = stepPaths(found, [0, 0], (frequency) => 1000 * frequency)
    expect(paths.filter((path) => path !== '')).toEqual([paths[5]])
    const points = [...paths[5].matchAll(/(-?[\d.]+) (-?[\d.]+)/g)].map(([, x, y]) => [Number(x), Number(y)])
    for (const [x, y] of points) {
      const bearing = (Math.atan2(x, -y) * 180) / Math.PI + 360
      expect(Math.abs(bearing - 247)).toBeLessThanOrEqual(5.05)
      expect(Math.hypot(x, y)).toBeGreaterThanOrEqual(69.9)
      expect(Math.hypot(x, y)).toBeLessThanOrEqual(90.1)
    }
  })

  it('draws nothing where there is no energy', () => {
    const nothing = { ...found, density: found.density.map((row) => row.map(() => 0)) }
    expect(stepPaths(nothing, [0, 0], Number).join('')).toBe('')
  })

  it('shows its key beside it, in the steps of power that it uses', () => {
    const disc = mount(DirectionalDisc, { props: { ...found, method: 'IMLM', systems: [] } })
    for (const step of ['0.1', '0.2', '0.35', '0.5', '0.7', '0.85']) expect(disc.find('.key').text()).toContain(step)
    expect([0.05, 0.1, 0.34, 0.35, 0.84, 1].map(powerStep)).toEqual([0, 1, 2, 3, 5, 6])
  })

  it('puts the borders of its rings half way between the frequencies', () => {
    expect(ringBorders([0.08, 0.1, 0.14]).map((f) => Number(f.toFixed(3)))).toEqual([0.07, 0.09, 0.12, 0.16])
    expect(ringBorders([0.1])).toHaveLength(2)
  })
})

describe('the methods of a directional spectrum', () => {
  const spectrum = {
    ...found,
    method: 'IMLM',
    converged: false,
    beside: [{ method: 'conventional', highest: 0.5, hundredths: found.density.map((row) => row.map((v) => 50 * v)) }],
  }

  it('are told with what may be said of each', () => {
    const [used, beam] = directionalMethods(spectrum)
    expect(used.statement).toContain('has not settled')
    expect(directionalMethods({ ...spectrum, converged: true })[0].statement).toContain('gives the measured')
    expect(beam.method).toBe('conventional')
    expect(Math.max(...beam.density.flat())).toBe(0.5)
    expect(beam.directions[1]).toBe(10)
  })

  it('open as figures with the bearing the energy comes from, and every direction in the file', () => {
    const table = directionalFigures(directionalMethods(spectrum)[0])
    expect(table.rows[0].slice(1, 4)).toEqual(['12.5', '247°', '247°'])
    expect(table.rows[1][2]).toBe('none')
    expect(table.fileRows).toHaveLength(3 * 36)
  })
})
