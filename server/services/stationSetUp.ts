/** Stations set up by an administrator: made, changed, retired, restored. Nothing that was measured is ever deleted. */
import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import { areaPolygon } from '../../shared/schemas/stationSetUp.ts'
import type { StationChange, StationDraft, StationRecord } from '../../shared/schemas/stationSetUp.ts'
import type { Parts } from '../config/parts.ts'
import { Station, Stream } from '../models/index.ts'
import { recordAudit } from './audit.ts'
import { invalidInput, notFound, Refused } from './problems.ts'
import { isRetired, lockStation } from './stationSetUp/lock.ts'
import { presentStationRecord } from './stationSetUp/present.ts'
import { addVersion, refuseSettings } from './stationSetUp/settingsVersions.ts'
import { inTransaction } from './transaction.ts'

export { listSettingsVersions, orderSettings } from './stationSetUp/settingsVersions.ts'

export async function listStationRecords(parts: Parts): Promise<StationRecord[]> {
  const stations = await Station.findAll({ order: [['id', 'ASC']] })
  return Promise.all(stations.map((station) => presentStationRecord(parts, station)))
}

export async function readStationRecord(parts: Parts, stationId: number): Promise<StationRecord> {
  const station = await Station.findByPk(stationId)
  if (!station) throw notFound('station', stationId)
  return presentStationRecord(parts, station)
}

/** With its first settings, in force from now. An array and a key come by their own steps. */
export async function createStation(parts: Parts, draft: StationDraft, personId: number): Promise<StationRecord> {
  refuseSettings(draft.settings, 'settings.content.')
  const { settings, reason, ...fields } = draft
  const now = parts.clock.now()
  const stationId = await inTransaction(parts.sequelize, async (transaction) => {
    await refuseTakenNames(draft, null, transaction)
    const station = await Station.create(
      { ...fields, sampleRate: settings.sampleRate, createdAt: now, updatedAt: now, retiredAt: null },
      { transaction },
    )
    await addVersion(station, { ...settings, validFrom: now, reason, personId }, transaction)
    const change = { action: 'station.create', entity: 'station', entityId: station.id, after: draft }
    await recordAudit(parts, { ...change, personId }, transaction)
    return station.id
  })
  return told(parts, stationId)
}

export interface StationEdit {
  stationId: number
  version: number
  personId: number
}

export async function changeStation(parts: Parts, edit: StationEdit, change: StationChange): Promise<StationRecord> {
  const { reason: _, ...fields } = change
  await inTransaction(parts.sequelize, async (transaction) => {
    const station = await lockStation(parts, edit.stationId, edit.version, transaction)
    if (station.retiredAt) throw isRetired()
    if (change.code !== station.code) await refuseNewCode(station, transaction)
    await refuseTakenNames(change, station.id, transaction)
    const before = fieldsOf(station)
    await station.update({ ...fields, version: station.version + 1, updatedAt: parts.clock.now() }, { transaction })
    const audited = { action: 'station.change', entity: 'station', entityId: station.id, before }
    await recordAudit(parts, { ...audited, personId: edit.personId, after: change }, transaction)
  })
  return told(parts, edit.stationId)
}

/** Out of service: its link is closed, nothing more is computed; everything it measured stays and is shown. */
export const retireStation = (parts: Parts, edit: StationEdit, reason: string): Promise<StationRecord> =>
  setService(parts, edit, { reason, action: 'station.retire', isRetired: true })

/** Back in maintenance, so that nothing is alerted before somebody has looked. */
export const restoreStation = (parts: Parts, edit: StationEdit, reason: string): Promise<StationRecord> =>
  setService(parts, edit, { reason, action: 'station.restore', isRetired: false })

async function setService(
  parts: Parts,
  { stationId, version, personId }: StationEdit,
  wanted: { reason: string; action: string; isRetired: boolean },
): Promise<StationRecord> {
  await inTransaction(parts.sequelize, async (transaction) => {
    const station = await lockStation(parts, stationId, version, transaction)
    if ((station.retiredAt !== null) === wanted.isRetired) throw alreadySo(wanted.isRetired)
    const now = parts.clock.now()
    const before = fieldsOf(station)
    await station.update(
      {
        state: wanted.isRetired ? 'retired' : 'maintenance',
        retiredAt: wanted.isRetired ? now : null,
        version: version + 1,
        updatedAt: now,
      },
      { transaction },
    )
    const audited = { action: wanted.action, entity: 'station', entityId: stationId, before: { state: before.state } }
    await recordAudit(parts, { ...audited, personId, after: { reason: wanted.reason } }, transaction)
  })
  return told(parts, stationId)
}

async function told(parts: Parts, stationId: number): Promise<StationRecord> {
  parts.bus.publish('station.changed', { stationId })
  return readStationRecord(parts, stationId)
}

function fieldsOf(station: Station): Omit<StationChange, 'reason' | 'state'> & { state: string } {
  const { code, shortName, name, latitude, longitude, datumName, datumOffset, staleAfterSeconds, notes, state } =
    station
  const datumSurveyedOn = station.datumSurveyedOn ?? null
  const area = areaPolygon.nullable().parse(station.areaPolygon ?? null)
  return { code, shortName, name, latitude, longitude, datumName, datumOffset, datumSurveyedOn, staleAfterSeconds, areaPolygon: area, notes, state } // prettier-ignore
}

const nameFields = ['code', 'shortName', 'name'] as const

async function refuseTakenNames(
  wanted: Pick<StationChange, (typeof nameFields)[number]>,
  ownId: number | null,
  transaction: Transaction,
): Promise<void> {
  const faults: { path: string; message: string }[] = []
  for (const field of nameFields) {
    const others = ownId === null ? {} : { id: { [Op.ne]: ownId } }
    const taken = await Station.findOne({ where: { [field]: wanted[field], ...others }, transaction })
    if (taken) faults.push({ path: field, message: `is that of ${taken.name}${taken.retiredAt ? ', which is retired' : ''}` }) // prettier-ignore
  }
  if (faults.length > 0) throw invalidInput(faults)
}

/** Stations say their code in every hello, and it stands in files and messages. */
async function refuseNewCode(station: Station, transaction: Transaction): Promise<void> {
  const streams = await Stream.count({ where: { stationId: station.id }, transaction })
  if (streams > 0) {
    throw invalidInput([{ path: 'code', message: `stays ${station.code}: the station has sent readings under it` }])
  }
}

const alreadySo = (isRetired: boolean): Refused =>
  new Refused({
    status: 409,
    code: isRetired ? 'station.retired' : 'station.inService',
    title: isRetired ? 'Already retired' : 'In service',
    detail: isRetired ? 'The station is retired already.' : 'The station is not retired.',
  })
