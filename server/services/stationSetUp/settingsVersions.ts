/** Versions of how a station is computed: a new one is in force from a time on, none is ever edited. */
import type { Transaction } from 'sequelize'
import type { StationSettingsDraft, StationSettingsOrder, StationSettingsRecord } from '../../../shared/schemas/stationSetUp.ts' // prettier-ignore
import type { Parts } from '../../config/parts.ts'
import { Station, StationSettings } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { invalidInput, notFound } from '../problems.ts'
import { inTransaction } from '../transaction.ts'
import { newestFirst, presentSettings } from './present.ts'
import { lockStation } from './lock.ts'

export async function listSettingsVersions(
  parts: Pick<Parts, 'clock'>,
  stationId: number,
): Promise<StationSettingsRecord[]> {
  const station = await Station.findByPk(stationId)
  if (!station) throw notFound('station', stationId)
  return presentSettings(parts, station)
}

export interface SettingsChange {
  stationId: number
  version: number
  order: StationSettingsOrder
  personId: number
}

/** Puts a version in force from now or a later time. Readings that came before keep their rate and their windows. */
export async function orderSettings(parts: Parts, change: SettingsChange): Promise<StationSettingsRecord> {
  const { stationId, order, personId } = change
  const id = await inTransaction(parts.sequelize, async (transaction) => {
    const station = await lockStation(parts, stationId, change.version, transaction)
    refuseSettings(order, 'content.')
    const now = parts.clock.now()
    const validFrom = order.validFrom === null ? now : new Date(order.validFrom)
    if (validFrom < now) throw invalidInput([{ path: 'validFrom', message: 'must not lie in the past: what was computed stays as it was' }]) // prettier-ignore
    const before = await StationSettings.findOne({ where: { stationId }, order: newestFirst, transaction })
    // From here on the station's own rate may change; the versions before say what theirs was.
    await StationSettings.update({ sampleRate: station.sampleRate }, { where: { stationId, sampleRate: null }, transaction }) // prettier-ignore
    const row = await addVersion(station, { ...order, validFrom, personId }, transaction)
    const rate = validFrom <= now ? { sampleRate: order.sampleRate } : {}
    await station.update({ ...rate, version: station.version + 1, updatedAt: now }, { transaction })
    await recordAudit(
      parts,
      {
        personId,
        action: 'stationSettings.order',
        entity: 'station',
        entityId: stationId,
        before: before && { id: before.id, sampleRate: before.sampleRate, content: before.content },
        after: { id: row.id, ...order, validFrom },
      },
      transaction,
    )
    return row.id
  })
  parts.bus.publish('station.changed', { stationId })
  const versions = await listSettingsVersions(parts, stationId)
  const made = versions.find((version) => version.id === id)
  if (!made) throw notFound('stationSettings', id)
  return made
}

export interface NewVersion extends StationSettingsDraft {
  validFrom: Date
  reason: string
  personId: number
}

export const addVersion = (
  station: Station,
  { sampleRate, content, validFrom, reason, personId }: NewVersion,
  transaction: Transaction,
): Promise<StationSettings> =>
  StationSettings.create(
    { stationId: station.id, validFrom, sampleRate, content, authorId: personId, reason },
    { transaction },
  )

/** What shapes alone cannot tell: figures that have to fit each other. `prefix` is where a form names them. */
export function refuseSettings({ content, sampleRate }: StationSettingsDraft, prefix: string): void {
  const { windowSeconds, hopSeconds, periodRange, estimate } = content
  const faults: { path: string; message: string }[] = []
  const refuse = (field: string, message: string): void => void faults.push({ path: prefix + field, message })
  if (windowSeconds % hopSeconds !== 0) refuse('hopSeconds', 'the window must be a whole number of hops')
  if (86_400 % hopSeconds !== 0) refuse('hopSeconds', 'a day must be a whole number of hops')
  if (estimate.bandFrom >= estimate.bandTo) refuse('estimate.bandTo', 'must be above the lower end of the band')
  if (estimate.bandTo > sampleRate / 2) refuse('estimate.bandTo', `must be at most ${sampleRate / 2} Hz, half the sample rate`) // prettier-ignore
  if (estimate.flatSuspectSamples >= estimate.flatFailSamples) refuse('estimate.flatFailSamples', 'must be above the number that is suspect') // prettier-ignore
  if (periodRange && periodRange[0] >= periodRange[1]) refuse('periodRange.1', 'must be longer than the shortest period') // prettier-ignore
  if (faults.length > 0) throw invalidInput(faults)
}
