import { describe, expect, it } from 'vitest'
import { radiansFromEast } from '../../../shared/directions.ts'
import { crossSea } from '../../../shared/hazards/crossSea.ts'
import { headOrFollowing, seaSides } from '../../../shared/hazards/sides.ts'
import { shareAcross } from '../../../shared/hazards/spreadMoments.ts'
import reference from '../../reference/hazards/crossSea.json' with { type: 'json' }
import { degree, directionalDensity, fairwaySystems, sea, system } from './seas.ts'

const inbound = radiansFromEast(38)
const outbound = radiansFromEast(218)

describe('the share of a train’s energy across an axis', () => {
  it.each(reference.shares)('toward $toward°, spread $spread°, axis $axis° agrees with numpy', (one) => {
    const share = shareAcross(radiansFromEast(one.toward), one.spread * degree, radiansFromEast(one.axis))
    expect(share).toBeCloseTo(one.across, 8)
  })

  it('of a train without spread is sin² of the angle, of one from all sides a half', () => {
    expect(shareAcross(1, 0, 0.4)).toBeCloseTo(Math.sin(0.6) ** 2, 12)
    expect(shareAcross(1, 1.5, 0.4)).toBe(0.5)
  })
})

describe('the cross-sea', () => {
  const systems = fairwaySystems.map(system)

  it('of two systems adds energies with their spreads, as numpy does', () => {
    const { across, along, parts } = crossSea(sea(systems), inbound)
    expect(Math.abs((across.value ?? 0) - reference.sea.across)).toBeLessThan(0.005)
    expect(Math.abs((along.value ?? 0) - reference.sea.along)).toBeLessThan(0.005)
    expect(parts.map(({ spreadFrom }) => spreadFrom)).toEqual(['spread of the system', 'spread of the system'])
    expect(parts.reduce((sum, { acrossShare }) => sum + acrossShare, 0)).toBeCloseTo(1, 12)
    expect((across.value ?? 0) ** 2 + (along.value ?? 0) ** 2).toBeCloseTo(1.9 ** 2 + 0.9 ** 2, 9)
  })

  it('over a directional spectrum agrees with numpy within its 5° and 0.005 Hz', () => {
    const measured = sea(systems, { directional: directionalDensity(fairwaySystems) })
    const { across, along, parts } = crossSea(measured, inbound)
    expect(Math.abs((across.value ?? 0) - reference.sea.across)).toBeLessThan(0.01)
    expect(Math.abs((along.value ?? 0) - reference.sea.along)).toBeLessThan(0.01)
    expect(parts.every(({ spreadFrom }) => spreadFrom === 'directional spectrum')).toBe(true)
  })

  it('is the same from either end of the axis and turns with the whole sea', () => {
    const there = crossSea(sea(systems), inbound).across.value
    expect(crossSea(sea(systems), outbound).across.value).toBeCloseTo(there ?? NaN, 9)
    const turned = fairwaySystems.map((one) => system({ ...one, toward: one.toward + 71 }))
    expect(crossSea(sea(turned), radiansFromEast(38 + 71)).across.value).toBeCloseTo(there ?? NaN, 9)
  })

  it('of a sea dead along the axis is not none, because its spread runs across', () => {
    const following = sea([system({ height: 2, period: 12, toward: 38, spread: 15 })])
    expect(crossSea(following, inbound).across.value).toBeGreaterThan(0.4)
  })

  it('is refused without a direction, with the reason, and never shown as calm', () => {
    const { across, along, parts } = crossSea(sea([], { height: { value: 1.2, sd: 0.1 } }), inbound)
    expect(across).toMatchObject({ value: null, reason: 'no resolvable wave: the direction is not known' })
    expect(along.value).toBeNull()
    expect(parts).toEqual([])
  })

  it('counts energy without a system half across, half along', () => {
    const swell = system({ height: 1, period: 12, toward: 38, spread: 10 })
    const { across, parts } = crossSea(sea([swell], { height: { value: Math.SQRT2, sd: 0.05 } }), inbound)
    expect(parts.find(({ key }) => key === null)?.across).toBeCloseTo(Math.SQRT1_2, 9)
    expect(across.value).toBeGreaterThan(0.7)
  })

  it('of a system whose spread is not known takes one and says so', () => {
    const { across } = crossSea(sea([system({ height: 1, period: 12, toward: 60, spread: null })]), inbound)
    expect(across.method.fromMemory).toBe(true)
    expect(across.inputs.find(({ note }) => note === 'assumed')?.name).toBe('swell, spread')
  })

  it('has a ± that grows with the heading’s, and none where a height’s is not known', () => {
    const sdOf = (headingSd: number, heightSd: number | null) =>
      crossSea(sea([system({ height: 2, heightSd, period: 12, toward: 60, headingSd })]), inbound).across.sd
    // ∂/∂θ of H √((1 − m₂ cos 2θ)/2), by hand for a train of 15°: m₂ = s(s−1)/((s+1)(s+2)).
    const s = 2 / (15 * degree) ** 2 - 1
    const m2 = (s * (s - 1)) / ((s + 1) * (s + 2))
    const across = Math.sqrt((1 - m2 * Math.cos(44 * degree)) / 2)
    const turn = (5 * degree * (2 * m2 * Math.sin(44 * degree))) / (2 * across)
    const spread = (0.2 * 15 * degree * (Math.cos(44 * degree) * 2 * 15 * degree)) / (2 * across)
    expect(Math.abs((sdOf(5, 0) ?? 0) - Math.hypot(turn, spread))).toBeLessThan(0.01)
    expect(sdOf(5, 0.1)).toBeGreaterThan(sdOf(5, 0) ?? Infinity)
    expect(sdOf(5, null)).toBeNull()
  })
})

describe('the side of the sea', () => {
  const systems = fairwaySystems.map(system)
  const { parts } = crossSea(sea(systems), inbound)

  it('inbound is from the port quarter, outbound from the starboard bow, and both are set the other way', () => {
    expect(seaSides(systems, parts, inbound)).toMatchObject({
      words: 'from the port quarter, setting to starboard',
      setsTo: 'starboard',
    })
    expect(seaSides(systems, parts, inbound).systems.map(({ sector, from }) => [sector, from])).toEqual([
      ['quarter', 'port'],
      ['beam', 'port'],
    ])
    expect(seaSides(systems, parts, outbound)).toMatchObject({
      words: 'from the starboard bow, setting to port',
      setsTo: 'port',
    })
    expect(headOrFollowing(systems, parts, inbound)).toBe('following')
    expect(headOrFollowing(systems, parts, outbound)).toBe('head sea')
  })

  it('is both where systems set to opposite sides', () => {
    const crossing = [
      system({ key: 1, height: 1, period: 12, toward: 70 }),
      system({ key: 2, height: 1, period: 8, toward: 350 }),
    ]
    const sides = seaSides(crossing, crossSea(sea(crossing), inbound).parts, inbound)
    expect(sides).toMatchObject({ words: 'from both sides', setsTo: null })
  })

  it('is not told closer to the course than two standard deviations of the heading', () => {
    const near = [system({ height: 1, period: 12, toward: 43, headingSd: 3 })]
    expect(seaSides(near, crossSea(sea(near), inbound).parts, inbound)).toMatchObject({
      words: 'from astern',
      setsTo: null,
    })
  })

  it('has no words without a system', () => {
    expect(seaSides([], [], inbound)).toEqual({ systems: [], words: null, setsTo: null })
  })
})
