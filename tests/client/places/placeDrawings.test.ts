import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import AcrossAlongBars from '../../../src/components/drawings/AcrossAlongBars.vue'
import ApproachDrawing from '../../../src/components/drawings/ApproachDrawing.vue'
import PlaceTrend from '../../../src/components/drawings/PlaceTrend.vue'
import { approachGround, offAxis } from '../../../src/components/drawings/geometry/approachLayout.ts'
import { beachLayout } from '../../../src/components/drawings/geometry/beachLayout.ts'
import { breakwaterLayout } from '../../../src/components/drawings/geometry/breakwaterLayout.ts'
import { substituteSince, trendPaths, trendScale } from '../../../src/components/drawings/geometry/trendLayout.ts'
import type { TrendPoint } from '../../../src/components/drawings/geometry/trendLayout.ts'
import { demonstrationCoast } from '../../../shared/demonstration/coast.ts'

const now = Date.parse('2026-11-12T14:30:00Z')
const minute = 60_000
const point = (ago: number, value: number | null, isSubstitute = false): TrendPoint => ({
  ...{ ms: now - ago * minute, value, from: value === null ? null : value / 3, to: value === null ? null : value * 3 },
  isSubstitute,
})
const box = { width: 460, height: 222, left: 44, right: 18, top: 10, bottom: 26 }

describe('the approach drawing', () => {
  it('turns a system against the axis: toward 061° is 23° right of 038°, toward 350° is 48° left', () => {
    expect(offAxis(61, 38).words).toBe('23° right of the axis')
    expect(offAxis(350, 38).words).toBe('48° left of the axis')
    expect(offAxis(218, 38).words).toBe('against the axis')
  })

  it('says both senses of every system and never scales a line by height', () => {
    const systems = [{ key: 1, name: 'Swell', sign: 1 as const, toward: 61, spread: 13 }]
    const props = { width: 470, height: 470, axis: 38, channelWidth: 96, systems, coast: null, place: { latitude: 47, longitude: -21 } } // prettier-ignore
    const drawing = mount(ApproachDrawing, { props })
    expect(drawing.attributes('aria-label')).toContain('Swell from two four one degrees true, toward zero six one degrees true') // prettier-ignore
    expect(drawing.text()).toContain('spread ± 13°')
  })

  it('puts what lies ahead on the axis above the place', () => {
    const place = { longitude: -21.0222, latitude: 47.4865 }
    const ahead: [number, number] = [place.longitude + (Math.sin((38 * Math.PI) / 180) * 300) / (111_180 * Math.cos((47.4865 * Math.PI) / 180)), place.latitude + (Math.cos((38 * Math.PI) / 180) * 300) / 111_180] // prettier-ignore
    const mole = { type: 'Feature' as const, properties: { kind: 'mole' as const, name: 'Head' }, geometry: { type: 'LineString' as const, coordinates: [ahead, ahead] } } // prettier-ignore
    const ground = approachGround({ ...demonstrationCoast, features: [mole] }, place, 38, [235, 282], 1)
    expect(ground.moles[0]!.at[0]).toBeCloseTo(235, 0)
    expect(ground.moles[0]!.at[1]).toBeCloseTo(282 - 300, 0)
  })
})

describe('bars across and along', () => {
  it('have lengths in the proportion of their metres, and a word where there is no figure', () => {
    const bars = [
      { name: 'Across the axis', value: 1, sd: 0.1, limit: 1, priority: null },
      { name: 'Along the axis', value: 2, sd: null, limit: null, priority: null },
      { name: 'Nothing', value: null, sd: null, limit: null, priority: null },
    ]
    const drawing = mount(AcrossAlongBars, { props: { bars, width: 470 } })
    const widths = drawing.findAll('rect').map((rect) => Number(rect.attributes('width')))
    expect(widths[1]! / widths[0]!).toBeCloseTo(2)
    expect(drawing.text()).toContain('none')
    expect(drawing.attributes('aria-label')).toContain('Nothing cannot be determined')
  })
})

describe('a trend', () => {
  it('is broken where a window had no figure, and where windows are missing', () => {
    const points = [point(60, 1), point(55, 1.1), point(50, null), point(45, 1.2), point(10, 1.3)]
    const scale = trendScale(points, [], box, now, false)
    expect(trendPaths(points, scale)).toHaveLength(3)
  })

  it('puts a factor of ten at one distance on the logarithmic scale', () => {
    const scale = trendScale([point(5, 1.2)], [1], box, now, true)
    expect(scale.y(0.1) - scale.y(1)).toBeCloseTo(scale.y(1) - scale.y(10), 6)
  })

  it('knows since when a substitute stands in, and only while it does', () => {
    expect(substituteSince([point(30, 1), point(20, 1, true), point(10, 1, true)])).toBe(now - 20 * minute)
    expect(substituteSince([point(30, 1, true), point(10, 1)])).toBeNull()
  })

  it('shows no newest value for a line that has ended', () => {
    const props = { name: 'Cross-sea', lines: [{ label: 'Cross-sea 1.0', points: [point(120, 1)], sd: 0.1 }], nowMs: now, width: 460, height: 222, newest: 'no figure now' } // prettier-ignore
    expect(mount(PlaceTrend, { props }).text()).not.toContain('Cross-sea 1.0')
  })
})

describe('sections', () => {
  const beach = { breakerHeight: 2.3, setUp: 0.37, runUp: 1.27, nearshoreSlope: 0.05, foreshoreSlope: 0.05, isPlunging: false } // prettier-ignore

  it.each([0.3, 1, 2.3, 5])('a beach with breakers of %f m keeps everything inside the drawing', (breakerHeight) => {
    const layout = beachLayout({ ...beach, breakerHeight, runUp: 0.55 * breakerHeight }, 940, 318, false)
    expect(layout.breaker!.top).toBeGreaterThan(40)
    expect(layout.breaker!.trough).toBeLessThan(318)
    expect(layout.runUp![1]).toBeGreaterThan(60)
    expect(layout.runUp![0]).toBeLessThan(940)
    expect(layout.exaggeration).toBeGreaterThan(1)
  })

  it('set-up and run-up stand at their metres above still water, by the stated scale', () => {
    const layout = beachLayout(beach, 940, 318, false)
    const perMetre = layout.upBar.length / layout.upBar.metres
    expect(layout.still.y - layout.setUp!.y).toBeCloseTo(0.37 * perMetre)
    expect(layout.still.y - layout.runUp![1]).toBeCloseTo(1.27 * perMetre)
  })

  it('a breakwater is to scale above the water and says how deep it is drawn', () => {
    const layout = breakwaterLayout(
      { freeCrest: 2.1, toeDepth: 9, slope: 1 / 1.5, height: 1.9, goesOver: true },
      940,
      300,
    )
    expect(layout.stillY - layout.crestY).toBeCloseTo(2.1 * layout.perMetre)
    expect(layout.drawnDepth).toBeLessThan(9)
    expect(layout.over).toHaveLength(2)
  })
})
