/** Places of a small coast for a test: stations whose estimates are written, not computed, with the outlooks that belong to them. */
import { deflateRawSync } from 'node:zlib'
import { Estimate, EstimateDetail } from '../../server/models/index.ts'
import type { Station } from '../../server/models/index.ts'
import { addPlace, saveOutlooks } from '../../server/services/places.ts'
import { inTransaction } from '../../server/services/transaction.ts'
import { demonstrationPlaces } from '../../shared/demonstration/places.ts'
import type { UnresolvedReason } from '../../shared/schemas/estimate.ts'
import type { PlaceDraft } from '../../shared/schemas/place.ts'
import { makeStation } from './factories.ts'
import type { TestParts } from './parts.ts'
import { waveSystem } from './waveSystem.ts'
import type { SystemWanted } from './waveSystem.ts'

export interface SeaWanted {
  systems?: SystemWanted[]
  reason?: UnresolvedReason
  flag?: 1 | 3 | 4
  surge?: number | null
  revision?: number
}

/** An estimate of the window that ends at a moment, saved with the outlooks it makes, as the job does. */
export async function saveSea(parts: TestParts, station: Station, end: Date, wanted: SeaWanted = {}): Promise<void> {
  const {
    systems = [{ height: 1.5, period: 12, from: 240 }],
    reason = null,
    flag = 1,
    surge = 0.05,
    revision = 1,
  } = wanted
  const resolved = reason === null
  const waves = resolved ? systems.map((one, n) => waveSystem(one, n + 1)) : []
  const total = Math.hypot(...systems.map(({ height }) => height))
  const [leading] = waves
  const key = { stationId: station.id, windowEndsAt: end, runId: 0, revision }
  const windowStartsAt = new Date(end.getTime() - 1_200_000)
  const saved = await inTransaction(parts.sequelize, async (transaction) => {
    await Estimate.create(
      {
        ...{
          ...key,
          windowStartsAt,
          surgeStartsAt: null,
          computedAt: parts.clock.now(),
          origin: 'live',
          deploymentId: 1,
        },
        ...{
          settingsId: 1,
          softwareVersion: 'test',
          inputCommitId: null,
          resultDigest: 'test',
          completeness: 1,
          resolved,
        },
        ...{ reason, qualityFlag: flag, waterDepth: 11.6, sensorsUsed: 4, sensorsDeployed: 4 },
        ...{ significantWaveHeight: total, significantWaveHeightSd: 0.05 * total, peakPeriod: 12, meanPeriod: 8 },
        ...{ energyPeriod: 10.5, energyFlux: 20_000, surgeHeight: surge },
        ...{ height: leading?.significantWaveHeight ?? null, period: leading?.peakPeriod ?? null },
        ...{
          towardDegrees: leading?.toward ?? null,
          towardDegreesSd: leading ? 3 : null,
          measuredSpeed: 10,
          speed: 10,
        },
        ...{ speedSd: 0.3, linearSpeed: 10, directionalSpread: 13, slownessEast: null, slownessNorth: null },
        ...{ covarianceEastEast: null, covarianceEastNorth: null, covarianceNorthNorth: null },
        ...{ swellHeight: leading?.significantWaveHeight ?? null, swellPeriod: leading?.peakPeriod ?? null },
        ...{
          swellTowardDegrees: leading?.toward ?? null,
          swellTowardDegreesSd: null,
          swellSpeed: null,
          swellSpeedSd: null,
        },
        ...{ windSeaHeight: null, windSeaPeriod: null, windSeaTowardDegrees: null, windSeaTowardDegreesSd: null },
        ...{ windSeaSpeed: null, windSeaSpeedSd: null },
      },
      { transaction },
    )
    const payload = deflateRawSync(JSON.stringify({ systems: waves, directionalSpectrum: null }))
    await EstimateDetail.create({ ...key, payload }, { transaction })
    return saveOutlooks(
      parts,
      { stationId: station.id, windowStartsAt: windowStartsAt.getTime(), windowEndsAt: end.getTime() },
      transaction,
    )
  })
  parts.bus.publish('estimate.saved', { stationId: station.id, windowEndsAt: end.getTime(), revision })
  for (const outlook of saved) parts.bus.publish('outlook.saved', outlook)
}

export interface SmallCoast {
  /** By the demonstration's codes. */
  stations: Record<'OL' | 'FW' | 'PB', Station>
  draftOf(code: string, changes?: Partial<PlaceDraft>): PlaceDraft
  /** Answers the place's id. Its settings hold from the start of 2020. */
  add(code: string, changes?: Partial<PlaceDraft>): Promise<number>
}

/** The demonstration's places, fed by stations of the test. */
export async function makeSmallCoast(parts: TestParts): Promise<SmallCoast> {
  const [OL, FW, PB] = await Promise.all(['OL', 'FW', 'PB'].map((code) => makeStation(parts.clock, { code })))
  const stations = { OL: OL.station, FW: FW.station, PB: PB.station }
  const idOf = (code: string): number => Object.values(stations).find((station) => station.code === code)?.id ?? 0
  let position = 0
  function draftOf(code: string, changes: Partial<PlaceDraft> = {}): PlaceDraft {
    const known = demonstrationPlaces.find((place) => place.code === code)
    if (!known) throw new Error(`no place ${code}`)
    position += 1
    const { at: _, noticeLists: __, settings, ...described } = known
    return {
      ...{ ...described, settings: { ...settings(idOf), tideStationId: null }, latitude: 47.5, longitude: -21 },
      ...{ areaPolygon: null, position, noticeListIds: [], reason: 'The coast of the test', ...changes },
    }
  }
  return {
    stations,
    draftOf,
    add: (code, changes) =>
      inTransaction(parts.sequelize, (transaction) =>
        addPlace(parts, draftOf(code, changes), null, transaction, new Date('2020-01-01T00:00:00Z')),
      ),
  }
}
