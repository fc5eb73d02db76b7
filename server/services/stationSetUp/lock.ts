/** A station held for a change, from the version that the person saw. */
import type { Transaction } from 'sequelize'
import type { Parts } from '../../config/parts.ts'
import { Station } from '../../models/index.ts'
import { changedMeanwhile, notFound, Refused } from '../problems.ts'
import { presentStationRecord } from './present.ts'

/** Throws 404, or 412 with the station as it stands. */
export async function lockStation(
  parts: Parts,
  stationId: number,
  version: number,
  transaction: Transaction,
): Promise<Station> {
  const station = await Station.findByPk(stationId, { lock: transaction.LOCK.UPDATE, transaction })
  if (!station) throw notFound('station', stationId)
  if (station.version !== version) {
    throw changedMeanwhile('station', station.version, await presentStationRecord(parts, station))
  }
  return station
}

export const isRetired = (): Refused =>
  new Refused({
    status: 409,
    code: 'station.retired',
    title: 'The station is retired',
    detail: 'Restore it first.',
  })
