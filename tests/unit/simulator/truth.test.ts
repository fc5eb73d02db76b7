import { describe, expect, it } from 'vitest'
import { demonstrationStations } from '../../../shared/demonstration/stations.ts'
import { demonstration } from '../../../simulator/scenarios/demonstration.ts'
import { clockSlip } from '../../../simulator/scenarios/faulty.ts'
import { quiet } from '../../../simulator/scenarios/quiet.ts'
import type { Scenario } from '../../../simulator/scenarios/scenario.ts'
import { faultsAt, truthAt } from '../../../simulator/sea/truth.ts'

const anchor = Date.parse('2026-11-12T14:30:00Z')
const [outerLedge, , pennowBar] = demonstrationStations

describe('the truth behind the readings', () => {
  it('of the quiet sea is what the scenario says', () => {
    const truth = truthAt({ scenario: quiet, anchor, site: outerLedge }, anchor + 5_000_000, 1200)
    expect(truth.systems).toHaveLength(1)
    expect(truth.significantWaveHeight).toBeCloseTo(1.2, 9)
    expect(truth.systems[0]).toMatchObject({ from: expect.closeTo(240, 6), toward: expect.closeTo(60, 6) })
  })

  it('of the demonstration at its anchor is a grown swell across a steep wind sea', () => {
    const seen = { scenario: demonstration, anchor, site: outerLedge }
    const [swell, windSea] = truthAt(seen, anchor, 1200).systems
    expect(swell).toMatchObject({
      name: 'swell',
      significantWaveHeight: expect.closeTo(2.1, 1),
      from: expect.closeTo(246.6, 0),
    })
    expect(swell.peakPeriod).toBeCloseTo(12.4, 0)
    expect(windSea).toMatchObject({
      name: 'wind sea',
      significantWaveHeight: expect.closeTo(1.3, 1),
      from: expect.closeTo(292, 0),
    })
    const [before] = truthAt(seen, anchor - 12 * 3_600_000, 1200).systems
    expect(before.significantWaveHeight).toBeLessThan(1.1)
    expect(before.from).toBeGreaterThan(205)
    expect(before.from).toBeLessThan(225)
  })

  it('averages headings as directions, across north too', () => {
    const northerly: Scenario = {
      name: 'northerly',
      summary: '',
      systems: (hours) => [{ ...quiet.systems(0)[0], from: 180 + 40 * Math.sin(hours) }],
    }
    const { systems } = truthAt({ scenario: northerly, anchor, site: outerLedge }, anchor + 1_200_000, 2400)
    expect(Math.min(systems[0].toward, 360 - systems[0].toward)).toBeLessThan(30)
  })

  it('turns waves toward the coast’s normal and lowers them inshore', () => {
    const seen = { scenario: demonstration, anchor }
    const outside = truthAt({ ...seen, site: outerLedge }, anchor)
    const inside = truthAt({ ...seen, site: pennowBar }, anchor)
    expect(Math.abs(inside.systems[1].from - 240)).toBeLessThan(Math.abs(outside.systems[1].from - 240))
    expect(inside.significantWaveHeight).toBeLessThan(outside.significantWaveHeight)
    expect(inside.systems[0].phaseSpeed).toBeLessThan(outside.systems[0].phaseSpeed)
  })

  it('names the faults from the anchor on', () => {
    const seen = { scenario: clockSlip, anchor, site: outerLedge }
    expect(faultsAt(seen, anchor - 1)).toEqual([])
    expect(faultsAt(seen, anchor)).toMatchObject([{ kind: 'clock', sensorIndex: 2 }])
  })
})
