/** The drawings of set-up: where things stand, and what hands and keys do to them. */
import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import { checkDesign } from '../../../shared/arrayDesign/checkDesign.ts'
import { placeSensors } from '../../../shared/arrayDesign/placeSensors.ts'
import type { DesignQuestion } from '../../../shared/schemas/stationSetUpDesign.ts'
import ArrayPlan from '../../../src/components/drawings/ArrayPlan.vue'
import HealthStrips from '../../../src/components/drawings/HealthStrips.vue'
import PositionPlan from '../../../src/components/drawings/PositionPlan.vue'
import { arrayPlanFrame, keptExtent, planExtent } from '../../../src/components/drawings/geometry/arrayPlanFrame.ts'
import { beamCells } from '../../../src/components/drawings/geometry/beamCells.ts'
import { dayStarts, stripRows } from '../../../src/components/drawings/geometry/healthStrips.ts'
import { planFrame } from '../../../src/components/drawings/geometry/planFrame.ts'
import { isInSector, sectorBearings, sectorSpan } from '../../../src/components/drawings/geometry/sectors.ts'
import { connectionSteps } from '../../../src/components/setUp/connectionSteps.ts'
import { errorBearings, worstWithout } from '../../../src/components/setUp/headingErrors.ts'
import { connection, draftSensor } from './setUpViews.ts'

const ledge = [[-44, -20], [-6, -44], [28, -30], [30, 36], [-20, 26]].map(([east, north], index) => ({ key: `s${index + 1}`, name: `OL-${index + 1}`, east, north })) // prettier-ignore

describe('the grid of the array editor', () => {
  it('is just under twice as wide as the array and leads back from a point to its place', () => {
    expect(planExtent(ledge).side).toBe(150)
    const frame = arrayPlanFrame(planExtent(ledge), 430)
    expect([frame.minor, frame.major]).toEqual([10, 50])
    const [x, y] = frame.project({ east: 28, north: -30 })
    expect(frame.locate(x, y).east).toBeCloseTo(28, 9)
    expect(frame.locate(x, y).north).toBeCloseTo(-30, 9)
  })

  it('holds still while sensors move inside it, and is drawn anew when one leaves', () => {
    const before = planExtent(ledge)
    const nudged = ledge.map((one) => ({ ...one, east: one.east + 5 }))
    expect(keptExtent(before, nudged)).toBe(before)
    expect(keptExtent(before, [...ledge, { east: 120, north: 0 }]).side).toBeGreaterThan(150)
  })
})

describe('the plan of the array', () => {
  const plan = (props: object = {}) =>
    mount(ArrayPlan, { props: { sensors: ledge, selected: null, tool: 'move', ...props } })

  it('moves a sensor by 0.1 m with an arrow key and by 1 m with Shift, the moves of a held key as one gesture', async () => {
    const drawing = plan()
    const sensor = drawing.find('[aria-label^="OL-3"]')
    expect(sensor.attributes('aria-label')).toBe('OL-3, 28.00 m east, \u221230.00 m north')
    await sensor.trigger('keydown', { key: 'ArrowRight' })
    await sensor.trigger('keydown', { key: 'ArrowDown', shiftKey: true })
    await sensor.trigger('keydown', { key: 'ArrowDown', shiftKey: true, repeat: true })
    const moves = drawing.emitted('move') ?? []
    expect(moves[0]).toEqual(['s3', { east: 28.1, north: -30 }, 1])
    expect(moves[1]).toEqual(['s3', { east: 28, north: -31 }, 2])
    expect(moves[2]?.[2]).toBe(2)
  })

  it('moves nothing while it measures, and says distance and true bearing', async () => {
    const drawing = plan({ tool: 'measure', measured: ['s3', 's4'] })
    await drawing.find('[aria-label^="OL-3"]').trigger('keydown', { key: 'ArrowRight' })
    expect(drawing.emitted('move')).toBeUndefined()
    expect(drawing.find('[role=img]').attributes('aria-label')).toContain('measured 66.0 m, bears 002° T')
  })

  it('chooses a sensor by Enter', async () => {
    const drawing = plan()
    await drawing.find('[aria-label^="OL-1"]').trigger('keydown', { key: 'Enter' })
    expect(drawing.emitted('choose')).toEqual([['s1']])
  })
})

describe('the plan on which a station is placed', () => {
  it('moves it north by ten metres with an arrow key', async () => {
    const at = { latitude: 47.4865, longitude: -21.0222 }
    const drawing = mount(PositionPlan, { props: { coast: null, others: [], position: at, name: 'Outer Ledge' } })
    await drawing.find('[role=button]').trigger('keydown', { key: 'ArrowUp' })
    const [[moved]] = drawing.emitted<[typeof at]>('place') ?? [[at]]
    // A minute of latitude is a nautical mile, 1852 m [definition].
    expect((moved.latitude - at.latitude) * 60 * 1852).toBeCloseTo(10, 0)
    expect(moved.longitude).toBeCloseTo(at.longitude, 5)
  })

  it('leads back from every point of the drawing to its position', () => {
    const frame = planFrame([[-21, 47.4], [-20.9, 47.5]], 500, 300, { left: 20, top: 20, right: 20, bottom: 20 }) // prettier-ignore
    const [x, y] = frame.project(-20.95, 47.44)
    expect(frame.locate(x, y).longitude).toBeCloseTo(-20.95, 9)
    expect(frame.locate(x, y).latitude).toBeCloseTo(47.44, 9)
  })
})

describe('sectors', () => {
  it('are followed clockwise over north', () => {
    expect(sectorSpan([330, 150])).toBe(180)
    expect(isInSector(10, [330, 150])).toBe(true)
    expect(isInSector(200, [330, 150])).toBe(false)
    expect(sectorBearings([350, 10], 10)).toEqual([350, 360, 370])
  })
})

describe('the beam', () => {
  it('is drawn in runs of equal tone, nothing below a tenth', () => {
    const paths = beamCells([0.05, 0.95, 0.95, 0.3], 2, 20)
    expect(paths.map((path) => path !== '')).toEqual([false, true, false, false, false, true])
    expect(paths[5]).toContain('M10 0h10')
  })
})

describe('the strips of a week', () => {
  const hours = [
    { hour: '2026-11-12T10:00:00.000Z', letter: 'A', expected: 100, received: 100 },
    { hour: '2026-11-12T11:00:00.000Z', letter: 'A', expected: 100, received: 0 },
    { hour: '2026-11-12T10:00:00.000Z', letter: 'B', expected: 0, received: 0 },
  ]
  const [from, to] = [Date.parse('2026-11-12T00:00:00Z'), Date.parse('2026-11-14T00:00:00Z')]

  it('tell what was expected and did not come from what was never expected', () => {
    expect(stripRows(hours, ['A', 'B'], from, to).map(({ share }) => share)).toEqual([0.5, null])
    expect(dayStarts(from, to)).toEqual([from, from + 86_400_000])
    const drawing = mount(HealthStrips, { props: { hours, letters: ['A', 'B'], fromMs: from, toMs: to } })
    expect(drawing.attributes('aria-label')).toContain('A 50 %, B nothing expected')
  })
})

describe('the expected error of a heading', () => {
  const question: DesignQuestion = {
    ...{ waterDepth: 14.2, gravity: 9.81, periodFrom: 4, periodTo: 20, windowSeconds: 1200 },
    sea: { significantWaveHeight: 1, peakPeriod: 10, directionalSpread: 20, noiseSd: 0.01, sampleRate: 4 },
    openSeaSector: [300, 60],
  }
  const sensors = placeSensors({ latitude: 47, longitude: -21 }, ['A', 'B', 'C'].map((letter, index) => draftSensor(letter, [0, 20, 0][index], [0, 0, 20][index]))) // prettier-ignore
  const check = checkDesign({ sensors: sensors.placed, levelOfBed: -14.2, earlier: null }, question)

  it('is drawn over the open sea alone, without a jump at north', () => {
    const bearings = errorBearings(check).map((one) => one.bearing)
    expect([bearings[0], bearings.at(-1)]).toEqual([300, 420])
    expect(bearings).toEqual([...bearings].sort((a, b) => a - b))
  })

  it('counts a loss by which no heading is left as the worst', () => {
    expect(worstWithout(check)?.headingSd.every((one) => one === null)).toBe(true)
  })
})

describe('the steps to a first connection', () => {
  const known = { hasDeployment: true, hasKey: true }
  const states = (newest: Parameters<typeof connectionSteps>[0]['newest']) =>
    connectionSteps({ ...known, newest }).map((step) => step.state)

  it('wait while nothing has knocked', () => {
    expect(states(null)).toEqual(['done', 'done', 'waiting', 'waiting', 'waiting', 'waiting'])
    expect(connectionSteps({ hasDeployment: false, hasKey: false, newest: null })[0].words).toContain('Draw it')
  })

  it('are done when readings are stored', () => {
    expect(states(connection())).toEqual(['done', 'done', 'done', 'done', 'done', 'done'])
  })

  it('stand at what is wrong, with every difference of a hello that does not fit', () => {
    const wrong = connection({ reached: 'keyAccepted', trouble: 'Its sensors are not those in force.', differences: ['B is missing'], closeCode: 4409 }) // prettier-ignore
    expect(states(wrong)).toEqual(['done', 'done', 'done', 'done', 'wrong', 'waiting'])
    expect(connectionSteps({ ...known, newest: wrong })[4]).toMatchObject({ words: wrong.trouble, details: wrong.differences }) // prettier-ignore
  })

  it('stand at the key that nobody knows', () => {
    const wrong = connection({
      stationId: null,
      reached: 'opened',
      keyState: 'unknown',
      trouble: 'The key is unknown.',
    })
    expect(states(wrong)).toEqual(['done', 'done', 'done', 'wrong', 'waiting', 'waiting'])
  })
})
