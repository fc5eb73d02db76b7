import { mount } from '@vue/test-utils'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { demonstrationCoast } from '../../../shared/demonstration/coast.ts'
import { demonstrationStations } from '../../../shared/demonstration/stations.ts'
import { coast } from '../../../shared/schemas/coast.ts'
import BearingRibbon from '../../../src/components/drawings/BearingRibbon.vue'
import CoastPlan from '../../../src/components/drawings/CoastPlan.vue'
import CrestPlan from '../../../src/components/drawings/CrestPlan.vue'
import QualityMark from '../../../src/components/drawings/QualityMark.vue'
import RecordSection from '../../../src/components/drawings/RecordSection.vue'
import SpectrumChart from '../../../src/components/drawings/SpectrumChart.vue'
import WaveGlyph from '../../../src/components/drawings/WaveGlyph.vue'
import { planStation } from '../../../src/components/drawings/geometry/planStation.ts'
import { estimate, station, swell } from '../support/views.ts'

const end = Date.parse('2026-11-12T14:30:00.000Z')
const sensors = demonstrationStations[0].sensors.map((sensor) => ({
  name: sensor.letter,
  east: sensor.east,
  north: sensor.north,
  isUsed: true,
}))
const west = {
  key: 1,
  title: 'Swell',
  sign: 1 as const,
  toward: 67,
  speed: 11.4,
  period: 12.4,
  headingSd: 3,
  speedSd: 0.3,
}

afterEach(() => vi.unstubAllGlobals())

describe('every drawing', () => {
  it('is one picture with one full sentence', () => {
    const drawings = [
      mount(WaveGlyph, { props: { toward: 67, height: 2.1, name: 'Swell' } }),
      mount(CrestPlan, { props: { sensors, systems: [west], still: true } }),
      mount(CoastPlan, { props: { coast: null, stations: [planStation(station({ estimate: estimate() }), end)] } }),
      mount(SpectrumChart, { props: { frequency: [0.05, 0.1], density: [1, 2], cutoff: 0.3, systems: [] } }),
      mount(BearingRibbon, { props: { points: [], nowMs: end, name: 'Outer Ledge' } }),
      mount(RecordSection, { props: { traces: null, sensors, heading: null, nowMs: end } }),
    ]
    for (const drawing of drawings) {
      expect(drawing.element.getAttribute('role')).toBe('img')
      expect(drawing.element.getAttribute('aria-label')).toMatch(/^[A-Z].+\.$/)
      expect(drawing.html()).not.toMatch(/\sstyle="/)
    }
  })
})

describe('the glyph', () => {
  it('says both senses and the height', () => {
    const glyph = mount(WaveGlyph, { props: { toward: 61, height: 1.9, name: 'Swell' } })
    expect(glyph.attributes('aria-label')).toBe(
      'Swell from two four one degrees true, toward zero six one degrees true, 1.9 m.',
    )
  })

  it('without a resolvable wave is a dashed ring and no arrow', () => {
    const glyph = mount(WaveGlyph, { props: { toward: null } })
    expect(glyph.find('circle').attributes('stroke-dasharray')).toBeTruthy()
    expect(glyph.findAll('path')).toHaveLength(0)
    expect(glyph.text()).toBe('no direction')
  })
})

describe('the crest plan', () => {
  it('names both senses at the border and every sensor', () => {
    const plan = mount(CrestPlan, { props: { sensors, systems: [west], still: true } })
    for (const words of ['from 247° T', 'toward 067° T', 'OL-1', 'OL-5', '50 m']) expect(plan.text()).toContain(words)
    expect(plan.attributes('aria-label')).toContain('crests 141 m apart')
  })

  it('strikes the name of a sensor that was left out', () => {
    const left = sensors.map((sensor) => ({ ...sensor, isUsed: sensor.name !== 'OL-3' }))
    const plan = mount(CrestPlan, { props: { sensors: left, systems: [west], still: true } })
    const struck = plan.findAll('text').filter((text) => text.attributes('text-decoration') === 'line-through')
    expect(struck.map((text) => text.text())).toEqual(['OL-3'])
  })

  it('draws no crest and no vector without a system', () => {
    const plan = mount(CrestPlan, { props: { sensors, systems: [], still: false } })
    expect(plan.html()).not.toContain('--of-sys-')
  })

  it('moves its crests at the measured speed: 11.4 m in a second', () => {
    const frames: FrameRequestCallback[] = []
    vi.stubGlobal('requestAnimationFrame', (frame: FrameRequestCallback) => frames.push(frame))
    vi.stubGlobal('cancelAnimationFrame', () => undefined)
    const plan = mount(CrestPlan, { props: { sensors, systems: [west], still: false }, attachTo: document.body })
    for (let ms = 0; ms <= 1000; ms += 20) frames.at(-1)?.(ms)
    const moved = [...plan.html().matchAll(/translate\((-?[\d.]+) (-?[\d.]+)\)/g)][0].slice(1).map(Number)
    const greatest = Math.max(
      ...sensors.flatMap((a) => sensors.map((b) => Math.hypot(a.east - b.east, a.north - b.north))),
    )
    const pixelsPerMetre = (404 - 2 * 50) / (2.05 * greatest)
    expect(Math.hypot(...moved) / pixelsPerMetre).toBeCloseTo(11.4, 1)
    expect((Math.atan2(moved[0], -moved[1]) * 180) / Math.PI).toBeCloseTo(67, 0)
    plan.unmount()
  })

  it('asks for no frame under Still', () => {
    const asked = vi.fn()
    vi.stubGlobal('requestAnimationFrame', asked)
    mount(CrestPlan, { props: { sensors, systems: [west], still: true } })
    expect(asked).not.toHaveBeenCalled()
  })
})

describe('the plan of the coast', () => {
  const live = station({ estimate: estimate(), lastGood: estimate() })

  it('shows the vector of a live station with its words', () => {
    const plan = mount(CoastPlan, { props: { coast: demonstrationCoast, stations: [planStation(live, end + 60_000)] } })
    expect(plan.text()).toContain('swell 2.1 m, 11.4 m/s')
    expect(plan.html()).toContain('--of-wedge')
    expect(plan.text()).toContain('inbound 038° T')
  })

  it('keeps of a stale station its struck square and when it was last good, and no figure', () => {
    const stale = planStation(live, end + 22 * 60_000)
    const plan = mount(CoastPlan, { props: { coast: demonstrationCoast, stations: [stale], bars: false } })
    expect(plan.text()).toContain('stale 22 min, last 14:30')
    expect(plan.html()).not.toContain('--of-wedge')
    expect(plan.text()).not.toMatch(/m\/s|2\.1 m/)
    expect(plan.attributes('aria-label')).not.toContain('m/s,')
  })

  it('has the demonstration stations in the sea, off the land', () => {
    const land = coast.parse(demonstrationCoast).features.find((feature) => feature.properties.kind === 'land')
    const ring = land?.geometry.type === 'Polygon' ? land.geometry.coordinates[0] : []
    expect(ring.length).toBeGreaterThan(10)
    const inside = (x: number, y: number): boolean =>
      ring.slice(1).reduce((within, [bx, by], index) => {
        const [ax, ay] = ring[index]
        return ay > y !== by > y && x < ((bx - ax) * (y - ay)) / (by - ay) + ax ? !within : within
      }, false)
    for (const one of demonstrationStations) expect(inside(one.longitude, one.latitude)).toBe(false)
    expect(inside(-20.985, 47.52)).toBe(true)
  })
})

describe('the bearing ribbon', () => {
  const points = Array.from({ length: 40 }, (_, index) => ({
    at: new Date(end - (39 - index) * 300_000).toISOString(),
    qualityFlag: 1 as const,
    resolved: true,
    toward: 67,
    significantWaveHeight: 2.4,
    height: 2.1,
    period: 12.4,
    speed: 11.4,
    spread: 14,
  }))

  it('writes newest height and period at its end and whiskers of the spread', () => {
    const ribbon = mount(BearingRibbon, { props: { points, nowMs: end, name: 'Outer Ledge' } })
    expect(ribbon.text()).toContain('2.1 m')
    expect(ribbon.text()).toContain('12.4 s')
  })

  it('of a stale station writes nothing at its end', () => {
    const ribbon = mount(BearingRibbon, {
      props: { points, nowMs: end + 22 * 60_000, name: 'Outer Ledge', staleSinceMs: end },
    })
    expect(ribbon.text()).not.toContain('2.1 m')
    expect(ribbon.attributes('aria-label')).toContain('stale since then')
  })

  it('counts its gaps for whoever cannot see them', () => {
    const holed = points.filter((_, index) => index < 10 || index > 18)
    const ribbon = mount(BearingRibbon, { props: { points: holed, nowMs: end, name: 'Outer Ledge' } })
    expect(ribbon.attributes('aria-label')).toContain('with 1 gap')
  })
})

describe('the record section', () => {
  const slowness = 1 / 11.4
  const along = (sensor: { east: number; north: number }): number =>
    sensor.east * Math.sin((67 * Math.PI) / 180) + sensor.north * Math.cos((67 * Math.PI) / 180)
  const traces = {
    startsAtMs: end - 90_000,
    interval: 0.25,
    sensors: sensors.map((sensor) => sensor.name),
    values: sensors.map((sensor) =>
      Array.from(
        { length: 360 },
        (_, n) => 14 + Math.cos((2 * Math.PI * (n * 0.25 - along(sensor) * slowness)) / 12.4),
      ),
    ),
  }
  const heading = { toward: 67, slowness, period: 12.4 }

  it('puts one measured pick on each trace of the followed crest, on one straight line', () => {
    const record = mount(RecordSection, { props: { traces, sensors, heading, nowMs: end } })
    const picks = record
      .findAll('circle')
      .map((circle) => [Number(circle.attributes('cx')), Number(circle.attributes('cy'))])
    expect(picks).toHaveLength(sensors.length)
    const rows = [...sensors].sort((a, b) => along(a) - along(b))
    const pixelsPerSecond = (410 - 116 - 16) / 60
    picks.forEach(([x], index) =>
      expect((x - picks[0][0]) / pixelsPerSecond).toBeCloseTo((along(rows[index]) - along(rows[0])) * slowness, 1),
    )
  })

  it('without a heading draws traces and follows no crest', () => {
    const record = mount(RecordSection, { props: { traces, sensors, heading: null, nowMs: end } })
    expect(record.findAll('circle')).toHaveLength(0)
    expect(record.attributes('aria-label')).toContain('no crest can be followed')
    expect(record.text()).not.toContain('along heading')
  })

  it('draws nothing of readings that are older than its minute', () => {
    const record = mount(RecordSection, { props: { traces, sensors, heading, nowMs: end + 120_000 } })
    expect(record.findAll('circle')).toHaveLength(0)
    expect(record.attributes('aria-label')).toContain('no crest followed just now')
  })
})

describe('the quality of a figure', () => {
  it('is told by mark and word', () => {
    const flags = [1, 2, 3, 4, 9] as const
    expect(flags.map((flag) => mount(QualityMark, { props: { flag } }).text())).toEqual([
      'Good',
      'Not evaluated',
      'Suspect',
      'Fail',
      'Missing',
    ])
  })
})

describe('the spectrum', () => {
  it('marks each system and claims nothing above the cut-off', () => {
    const frequency = Array.from({ length: 50 }, (_, index) => 0.01 * (index + 1))
    const marks = [{ key: 1, title: 'Swell', sign: 1 as const, period: 12.4, from: swell().from }]
    const chart = mount(SpectrumChart, {
      props: { frequency, density: frequency.map(() => 1), cutoff: 0.25, systems: marks, width: 424 },
    })
    expect(chart.text()).toContain('Swell 12.4 s, from 247° T')
    const line = chart.findAll('path').find((path) => path.attributes('stroke') === 'var(--of-c1)')
    const lastX = Number(/L([\d.]+) [\d.]+$/.exec(line?.attributes('d') ?? '')?.[1])
    expect(lastX).toBeCloseTo(44 + ((0.25 - 0.03) / (0.3 - 0.03)) * (424 - 58), 0)
  })
})
