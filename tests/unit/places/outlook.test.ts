import { describe, expect, test } from 'vitest'
import { demonstrationPlaces } from '../../../shared/demonstration/places.ts'
import { outlookOf } from '../../../shared/places/outlook.ts'
import type { Outlook } from '../../../shared/places/outlook.ts'
import type { FeedEstimate, FeedStation } from '../../../shared/places/feed.ts'
import type { PlaceSettingsContent } from '../../../shared/schemas/placeSettings.ts'
import type { TideNow } from '../../../shared/schemas/placeOutlook.ts'
import type { PlaceQuantityKey } from '../../../shared/schemas/placeQuantity.ts'
import { waveSystem } from '../../support/waveSystem.ts'
import type { SystemWanted } from '../../support/waveSystem.ts'

const at = Date.parse('2026-11-12T14:30:00Z')
const ids: Record<string, number> = { OL: 1, FW: 2, PB: 3 }

function settingsOf(code: string): PlaceSettingsContent {
  const place = demonstrationPlaces.find((one) => one.code === code)
  if (!place) throw new Error(`no place ${code}`)
  return place.settings((station) => ids[station] ?? 0)
}

interface SeaWanted {
  systems?: SystemWanted[]
  agoMinutes?: number
  changes?: Partial<FeedEstimate>
}

function estimate({
  systems = [{ height: 1.9, period: 12.5, from: 241 }],
  agoMinutes = 0,
  changes = {},
}: SeaWanted = {}): FeedEstimate {
  const height = Math.hypot(...systems.map((one) => one.height))
  const windowEndsAt = at - agoMinutes * 60_000
  return {
    ...{
      windowStartsAt: windowEndsAt - 1_200_000,
      windowEndsAt,
      revision: 1,
      resolved: true,
      reason: null,
      qualityFlag: 1,
    },
    ...{ significantWaveHeight: height, significantWaveHeightSd: 0.05 * height, peakPeriod: 12.5, meanPeriod: 9 },
    ...{ energyPeriod: 11, surgeHeight: 0.09, surgeSpectrum: null, waterDepth: 11.6, directionalSpectrum: null },
    systems: systems.map((one, n) => waveSystem(one, n + 1)),
    ...changes,
  }
}

const station = (id: number, found: FeedEstimate | null): FeedStation => ({ id, name: `Station ${id}`, staleAfterSeconds: 900, estimate: found }) // prettier-ignore

const meanLevel: TideNow = {
  ...{ level: 0, sd: 0.05, source: 'predicted', stationName: 'Station 2', stage: 'falling', highWater: null },
  lowWater: { at: new Date(at + 9_180_000).toISOString(), level: -0.8 },
}

function outlook(
  code: string,
  stations: (FeedEstimate | null)[],
  changes: { settings?: PlaceSettingsContent; tide?: TideNow } = {},
): Outlook {
  const settings = changes.settings ?? settingsOf(code)
  const ordered = settings.stationOrder.map(({ stationId }, n) => station(stationId, stations[n] ?? null))
  return outlookOf({ at, settings, stations: ordered, tide: changes.tide ?? meanLevel })
}

const figure = ({ content }: Outlook, quantity: PlaceQuantityKey) => {
  const found = content.figures.find((one) => one.quantity === quantity)
  if (!found) throw new Error(`no ${quantity}`)
  return found
}

describe('an outlook', () => {
  test('is the same for the same estimate, settings and tide', () => {
    expect(outlook('PS', [estimate()])).toEqual(outlook('PS', [estimate()]))
  })

  test('of a station without a direction takes the next in the order, and says what keeps the first', () => {
    const refused = estimate({ changes: { resolved: false, reason: 'ambiguous', systems: [] } })
    const { content, feed } = outlook('EN', [refused, estimate()])
    expect(feed?.index).toBe(1)
    expect(content.substituteWords).toBe(
      "Not measured here. Station 2 gives no direction: direction ambiguous, H_m0 1.90 m. Station 1's figures stand in: 15 % of each height and 8° of direction added to ±.",
    )
    expect(content.qualityFlag).toBe(3)
  })

  test('of a substitute is no surer than the same figure measured here', () => {
    const own = figure(outlook('EN', [estimate()]), 'crossSea')
    const lent = figure(outlook('EN', [null, estimate()]), 'crossSea')
    expect(lent.figure.value).toBeCloseTo(own.figure.value ?? 0, 10)
    // 15 % of the height alone is more than the whole ± of the place's own figure.
    expect(lent.figure.sd).toBeGreaterThan(0.15 * (own.figure.value ?? 0))
    expect(own.figure.sd).toBeLessThan(0.15 * (own.figure.value ?? 0))
  })

  test('without any station that could feed it has no figure and every reason', () => {
    const { content, feed } = outlook('PS', [estimate({ agoMinutes: 22 }), null])
    expect(feed).toBeNull()
    expect(content).toMatchObject({ figures: [], sea: null, qualityFlag: 9 })
    expect(content.reason).toBe('Station 3 is stale, last estimate 14:08 UTC; Station 2 has no estimate.')
  })

  test('of waves from outside the sector its carrying is meant for is suspect and says so', () => {
    const { content } = outlook('EN', [estimate({ systems: [{ height: 1.5, period: 9, from: 300 }] })])
    expect(content.qualityFlag).toBe(3)
    expect(content.remarks).toEqual([
      'Waves from 300° T lie outside 218° T to 270° T, for which the carrying is meant.',
    ])
  })

  test('at a breakwater takes the tide off the free crest', () => {
    const seas = [estimate({ systems: [{ height: 2.4, period: 12.5, from: 241 }] })]
    const low = figure(outlook('LA', seas, { tide: { ...meanLevel, level: -1 } }), 'overtopping').figure
    const high = figure(outlook('LA', seas, { tide: { ...meanLevel, level: 1 } }), 'overtopping').figure
    const crestIn = (one: typeof low) => one.inputs.find(({ name }) => name === 'free crest')?.value
    expect(crestIn(low)).toBeCloseTo(4.4, 10)
    expect(crestIn(high)).toBeCloseTo(2.4, 10)
    expect(high.value).toBeGreaterThan(20 * (low.value ?? Infinity))
    expect(high.likely?.from).toBeLessThan(high.value ?? 0)
  })

  test('at a vertical face says that any predicted overtopping means no access', () => {
    const settings = settingsOf('LA')
    if (settings.kind !== 'breakwater') throw new Error('not a breakwater')
    const wall = { ...settings, form: 'vertical' as const, seawardSlope: null }
    const { content } = outlook('LA', [estimate({ systems: [{ height: 2.4, period: 12.5, from: 241 }] })], {
      settings: wall,
    })
    expect(content.remarks).toContain('No access for any predicted overtopping at vertical faces.')
  })

  test('at berths needs long waves alone, and gives the basin’s own periods by Merian', () => {
    const refused = estimate({
      changes: { resolved: false, reason: 'no-resolvable-wave', systems: [], surgeHeight: 0.09 },
    })
    const made = outlook('B36', [refused])
    expect(figure(made, 'longSwell').figure.value).toBeCloseTo(0.09, 10)
    // Merian: 2 · 300/√(9.81 · 6) = 78.2 s closed, 4 · 300/√(9.81 · 6) = 156.4 s open.
    expect(made.content.basin.slice(0, 2).map(({ kind, period }) => [kind, Math.round(period.value ?? 0)])).toEqual([
      ['open', 156],
      ['closed', 78],
    ])
  })

  test('at a beach lists the reasons for a rip caution, each with its value, and adds them up to no grade', () => {
    const { content } = outlook('PS', [estimate({ systems: [{ height: 1.6, period: 12, from: 226, spread: 13 }] })])
    expect(content.rip?.reasons.map(({ name, isPresent }) => [name, isPresent])).toEqual([
      ['height', true],
      ['incidence', true],
      ['spread', true],
      ['tide', false],
    ])
    expect(content.rip?.reasons[3]).toMatchObject({ value: '2 h 33 min before low water', counts: 'counts within 2 h of low water' }) // prettier-ignore
  })

  test('leaves out a system that runs away from the shore, and says so', () => {
    const seas = estimate({ systems: [{ height: 1.2, period: 11, from: 230 }, { height: 0.8, period: 6, from: 20, name: 'wind sea' }] }) // prettier-ignore
    expect(outlook('PS', [seas]).content.remarks).toContain(
      'The wind sea from 020° T, toward 200° T does not run toward this shore.',
    )
  })

  test('by a transfer table is refused outside the table and takes its ratio inside', () => {
    const settings = settingsOf('EN')
    if (settings.kind !== 'entrance') throw new Error('not an entrance')
    const table = {
      ...{ kind: 'table' as const, origin: 'made up for this check, 2026', periods: [10, 14], directions: [220, 260] },
      ...{ heightRatio: [[0.5, 0.5], [0.5, 0.5]], turn: [[10, 10], [10, 10]], relativeSd: 0.1 },
    } // prettier-ignore
    const [first] = settings.stationOrder
    const byTable = { ...settings, stationOrder: [{ ...first, transfer: table }] }
    const inside = outlook('EN', [estimate()], { settings: byTable })
    expect(inside.content.sea?.systems[0]).toMatchObject({ heightHere: 0.95, notCarried: null })
    expect(inside.content.sea?.systems[0].towardHere).toBeCloseTo(71, 6)
    const outside = outlook('EN', [estimate({ systems: [{ height: 1.9, period: 8, from: 241 }] })], {
      settings: byTable,
    })
    expect(outside.content.sea?.systems[0].notCarried).toContain('lies outside the transfer table')
    expect(figure(outside, 'crossSea').figure.value).toBeNull()
    expect(outside.content.qualityFlag).toBe(4)
  })
})
