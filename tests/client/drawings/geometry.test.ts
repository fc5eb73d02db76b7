import geographic from 'geographiclib-geodesic'
import { describe, expect, it } from 'vitest'
import { aperture, squarePlan } from '../../../src/components/drawings/geometry/crestPlanLayout.ts'
import { glyphCrests } from '../../../src/components/drawings/geometry/glyphArcs.ts'
import { placeLabels } from '../../../src/components/drawings/geometry/labelPlacement.ts'
import { niceLength, planFrame } from '../../../src/components/drawings/geometry/planFrame.ts'
import { polar } from '../../../src/components/drawings/geometry/polar.ts'
import { spreadApart } from '../../../src/components/drawings/geometry/recordLayout.ts'
import { sensorResiduals } from '../../../src/components/drawings/geometry/sensorResiduals.ts'
import {
  frequencyTicks,
  lastFrequency,
  roundAbove,
  tickPlaces,
} from '../../../src/components/drawings/geometry/spectrumLayout.ts'
import { borderPoint, borderSector } from '../../../src/components/drawings/geometry/squareBorder.ts'
import { dashOf, vectorShape } from '../../../src/components/drawings/geometry/vectorShape.ts'

describe('a bearing on a drawing', () => {
  it('runs clockwise from the top', () => {
    const [x, y] = polar(100, 100, 90, 50)
    expect([x, y]).toEqual([150, 100])
    expect(polar(100, 100, 180, 50)[1]).toBeCloseTo(150, 9)
  })

  it('meets the border of a square plan', () => {
    expect(borderPoint(200, 150, 0)).toEqual([200, 50])
    const [x, y] = borderPoint(200, 150, 45)
    expect(x).toBeCloseTo(350, 9)
    expect(y).toBeCloseTo(50, 9)
  })

  it('of a land sector is followed around the corners', () => {
    const path = borderSector(200, 130, 150, 330, 150)
    expect(path).toContain('350 50')
    expect(path).toContain('350 350')
    expect(path.endsWith('Z')).toBe(true)
  })
})

describe('the plan of the coast', () => {
  it('keeps distances within 0.3 % of the geodesic ones', () => {
    const wgs84 = geographic.Geodesic.WGS84
    const places: [number, number][] = [
      [-21.0222, 47.4865],
      [-20.9965, 47.4925],
      [-20.9886, 47.4973],
    ]
    const frame = planFrame(places, 846, 438, { left: 20, top: 20, right: 20, bottom: 20 })
    for (const [i, a] of places.entries())
      for (const b of places.slice(i + 1)) {
        const geodesic = wgs84.Inverse(a[1], a[0], b[1], b[0]).s12 ?? 0
        const [ax, ay] = frame.project(...a)
        const [bx, by] = frame.project(...b)
        expect(Math.abs((Math.hypot(ax - bx, ay - by) * frame.metresPerUnit) / geodesic - 1)).toBeLessThan(0.003)
      }
  })

  it('holds all positions within its padding', () => {
    const frame = planFrame(
      [
        [10, 50],
        [10.02, 50.01],
      ],
      800,
      400,
      { left: 300, top: 50, right: 100, bottom: 50 },
    )
    for (const [x, y] of [frame.project(10, 50), frame.project(10.02, 50.01)]) {
      expect(x).toBeGreaterThanOrEqual(299.9)
      expect(x).toBeLessThanOrEqual(700.1)
      expect(y).toBeGreaterThanOrEqual(49.9)
      expect(y).toBeLessThanOrEqual(350.1)
    }
  })

  it('has a scale bar of a round length', () => {
    expect([57, 1.3, 0.9, 21].map(niceLength)).toEqual([50, 1, 0.5, 20])
  })
})

describe('the crest plan', () => {
  const sensors = [
    { name: 'a', east: -40, north: -18, isUsed: true },
    { name: 'b', east: 30, north: 34, isUsed: true },
    { name: 'c', east: 6, north: -14, isUsed: true },
  ]

  it('is about twice the aperture wide, north up about the centroid', () => {
    expect(aperture(sensors)).toBeCloseTo(Math.hypot(70, 52), 9)
    const plan = squarePlan(sensors, 404)
    expect(plan.side / aperture(sensors)).toBeCloseTo(2.05, 6)
    const [x, y] = plan.project(-4 / 3, 2 / 3)
    expect(x).toBeCloseTo(202, 9)
    expect(y).toBeCloseTo(202, 9)
    expect(plan.project(-4 / 3, 20)[1]).toBeLessThan(202)
  })
})

describe('a vector', () => {
  it('has the line and head of its system', () => {
    expect([1, 2, 3].map((sign) => dashOf(sign as 1 | 2 | 3))).toEqual([undefined, '14 5', '5 4'])
    expect(vectorShape(0, 0, { toward: 0, length: 80, width: 4, sign: 3 }).headIsOpen).toBe(true)
    expect(vectorShape(0, 0, { toward: 0, length: 80, width: 4, sign: 1 }).head.endsWith('Z')).toBe(true)
  })

  it('ends its head at its length along its heading', () => {
    expect(vectorShape(0, 0, { toward: 90, length: 80, width: 4, sign: 1 }).head.startsWith('M80 0')).toBe(true)
  })

  it('has no wedge where no uncertainty is known', () => {
    const { wedge, wedgeEdge } = vectorShape(0, 0, { toward: 90, length: 80, width: 4, sign: 1, headingSd: 3 })
    expect([wedge, wedgeEdge]).toEqual([null, null])
  })
})

describe('a glyph', () => {
  it('has one arc for each metre begun and one block above three', () => {
    expect([0.4, 1, 1.01, 2.1, 3].map((height) => glyphCrests(height))).toEqual(
      [1, 1, 2, 3, 3].map((arcs) => ({ block: false, arcs })),
    )
    expect(glyphCrests(3.1)).toEqual({ block: true })
  })
})

describe('labels', () => {
  it('do not cover each other, their marks or a line', () => {
    const frame = { x: 0, y: 0, width: 400, height: 400 }
    const at: [number, number][] = [
      [200, 200],
      [206, 204],
      [198, 207],
    ]
    const placed = placeLabels(
      at.map((one) => ({ at: one, width: 36, height: 15, gap: 8 })),
      {
        frame,
        boxes: [],
        segments: [
          [
            [200, 200],
            [300, 200],
          ],
        ],
      },
    ).map(({ box }) => box)
    placed.forEach((a, i) =>
      placed.slice(i + 1).forEach((b) => {
        const apart = a.x + a.width <= b.x || b.x + b.width <= a.x || a.y + a.height <= b.y || b.y + b.height <= a.y
        expect(apart).toBe(true)
      }),
    )
  })

  it('closer than a line height are moved apart, in order and no further', () => {
    expect(spreadApart([10, 14, 60], 14)).toEqual([5, 19, 60])
    expect(spreadApart([10, 40, 60], 14)).toEqual([10, 40, 60])
    const three = spreadApart([10, 12, 14], 14)
    expect(three).toEqual([-2, 12, 26])
  })
})

describe('the axes of the spectrum', () => {
  it('end at round numbers', () => {
    expect([12.9, 15.1, 0.034, 1, 0].map(roundAbove)).toEqual([15, 20, 0.05, 1, 1])
    expect([0.22, 0.33, 0.8].map(lastFrequency)).toEqual([0.3, 0.35, 0.5])
    expect(frequencyTicks(0.3)).toEqual([0.05, 0.1, 0.15, 0.2, 0.25, 0.3])
    expect([15, 7.5, 0.25, 0.025].map(tickPlaces)).toEqual([0, 1, 2, 3])
  })
})

describe('the lag left over at each sensor', () => {
  it('is the clock error that the pairs agree on', () => {
    const names = ['a', 'b', 'c', 'd']
    const errors = [-0.2, -0.2, 0.6, -0.2]
    const pairs = names.flatMap((a, i) =>
      names
        .slice(i + 1)
        .map((b, k) => ({ between: [a, b] as [string, string], residual: errors[i + 1 + k] - errors[i] })),
    )
    sensorResiduals(names, pairs).forEach(({ residual }, index) => expect(residual).toBeCloseTo(errors[index], 9))
  })

  it('is not known without residuals', () => {
    expect(sensorResiduals(['a'], [{ between: ['a', 'b'], residual: null }])).toEqual([{ name: 'a', residual: null }])
  })
})
