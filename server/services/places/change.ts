/** Places made, described anew, given other settings, retired and restored: each one transaction with its audit row. */
import type { Transaction } from 'sequelize'
import type { PlaceChange, PlaceDraft, PlaceSettingsChange } from '../../../shared/schemas/place.ts'
import type { PlaceSettingsContent } from '../../../shared/schemas/placeSettings.ts'
import type { Parts } from '../../config/parts.ts'
import { DistributionList, Limit, Place, PlaceSettings, Station } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { changedMeanwhile, invalidInput, notFound, Refused } from '../problems.ts'
import { inTransaction } from '../transaction.ts'
import { writeSystemLine } from '../watchLog.ts'

type Faults = { path: string; message: string }[]
type Changing = Pick<Parts, 'bus' | 'clock' | 'sequelize'>

/** What a person saw and changes. */
export interface PlaceOrder {
  placeId: number
  version: number
  personId: number
}

/** What shapes alone cannot tell: names that are free, stations and lists that are there. */
async function faultsOf(
  described: Omit<PlaceChange, 'reason'>,
  settings: PlaceSettingsContent | null,
  except: number | null,
  transaction: Transaction,
): Promise<Faults> {
  const faults: Faults = []
  const places = await Place.findAll({ attributes: ['id', 'code', 'shortName', 'name'], transaction })
  for (const field of ['code', 'shortName', 'name'] as const) {
    const taken = places.find(
      (place) => place.id !== except && place[field].toLowerCase() === described[field].toLowerCase(),
    )
    if (taken) faults.push({ path: field, message: `is already that of ${taken.name}` })
  }
  const lists = [...new Set(described.noticeListIds)]
  const known =
    lists.length === 0 ? 0 : await DistributionList.count({ where: { id: lists, retiredAt: null }, transaction })
  if (known < lists.length) faults.push({ path: 'noticeListIds', message: 'names a list that is not there' })
  if (settings) faults.push(...(await faultsOfSettings(settings, 'settings', transaction)))
  return faults
}

async function faultsOfSettings(
  content: PlaceSettingsContent,
  path: string,
  transaction: Transaction,
): Promise<Faults> {
  const stations = await Station.findAll({ attributes: ['id', 'retiredAt'], transaction })
  const isThere = (id: number): boolean => stations.some((station) => station.id === id && station.retiredAt === null)
  const faults = content.stationOrder.flatMap(({ stationId }, n) =>
    isThere(stationId) ? [] : [{ path: `${path}.stationOrder.${n}.stationId`, message: 'is no station in service' }],
  )
  if (content.tideStationId !== null && !isThere(content.tideStationId)) {
    faults.push({ path: `${path}.tideStationId`, message: 'is no station in service' })
  }
  return faults
}

const addVersion = (
  placeId: number,
  version: { content: PlaceSettingsContent; validFrom: Date; personId: number | null; reason: string; now: Date },
  transaction: Transaction,
): Promise<PlaceSettings> => {
  const { content, validFrom, personId, reason, now } = version
  return PlaceSettings.create(
    { placeId, validFrom, content, authorId: personId, reason, createdAt: now },
    { transaction },
  )
}

/** In a transaction of the caller's. `validFrom`: the demonstration's places are as old as its record. */
export async function addPlace(
  parts: Pick<Parts, 'clock'>,
  draft: PlaceDraft,
  personId: number | null,
  transaction: Transaction,
  validFrom: Date = parts.clock.now(),
): Promise<number> {
  const { settings, reason, ...described } = draft
  const faults = await faultsOf(described, settings, null, transaction)
  if (faults.length > 0) throw invalidInput(faults)
  const now = parts.clock.now()
  const place = await Place.create(
    { ...described, kind: settings.kind, createdAt: now, updatedAt: now },
    { transaction },
  )
  await addVersion(place.id, { content: settings, validFrom, personId, reason, now }, transaction)
  const audit = { action: 'place.add', entity: 'place', entityId: place.id, after: draft }
  await recordAudit(parts, { ...audit, personId }, transaction)
  return place.id
}

export async function createPlace(parts: Changing, draft: PlaceDraft, personId: number): Promise<number> {
  const placeId = await inTransaction(parts.sequelize, async (transaction) => {
    const id = await addPlace(parts, draft, personId, transaction)
    const text = `Place added: ${draft.name}. ${draft.reason}`
    await writeSystemLine(parts, { kind: 'place', text, links: { placeId: id } }, transaction)
    return id
  })
  parts.bus.publish('place.changed', { placeId })
  return placeId
}

async function lockedPlace({ placeId, version }: PlaceOrder, transaction: Transaction): Promise<Place> {
  const place = await Place.findByPk(placeId, { lock: true, transaction })
  if (!place) throw notFound('place', placeId)
  if (place.version !== version) throw changedMeanwhile('place', place.version)
  return place
}

const refuseRetired = (place: Place): void => {
  if (place.retiredAt === null) return
  const detail = 'It was retired and is kept for the record alone. Restore it first.'
  throw new Refused({ status: 409, code: 'place.retired', title: 'Retired', detail })
}

const describedOf = ({ code, shortName, name, team, latitude, longitude, areaPolygon, position, noticeListIds }: Place) => ({ code, shortName, name, team, latitude, longitude, areaPolygon, position, noticeListIds }) // prettier-ignore

/** One change of a locked place: the work, its version, its audit row and its line in the watch log. */
async function change(
  parts: Changing,
  order: PlaceOrder,
  work: (
    place: Place,
    transaction: Transaction,
  ) => Promise<{ action: string; before?: unknown; after: unknown; text: string }>,
): Promise<void> {
  await inTransaction(parts.sequelize, async (transaction) => {
    const place = await lockedPlace(order, transaction)
    const { text, ...done } = await work(place, transaction)
    await place.update({ version: place.version + 1, updatedAt: parts.clock.now() }, { transaction })
    const audit = { ...done, entity: 'place', entityId: place.id, personId: order.personId }
    await recordAudit(parts, audit, transaction)
    await writeSystemLine(parts, { kind: 'place', text, links: { placeId: place.id } }, transaction)
  })
  parts.bus.publish('place.changed', { placeId: order.placeId })
}

export const changePlace = (parts: Changing, order: PlaceOrder, { reason, ...described }: PlaceChange): Promise<void> =>
  change(parts, order, async (place, transaction) => {
    refuseRetired(place)
    const faults = await faultsOf(described, null, place.id, transaction)
    if (faults.length > 0) throw invalidInput(faults)
    const before = describedOf(place)
    await place.update(described, { transaction })
    return {
      action: 'place.change',
      before,
      after: { ...described, reason },
      text: `Place changed: ${place.name}. ${reason}`,
    }
  })

/** A stored outlook keeps the version it was made with, so none begins in the past. */
export const changePlaceSettings = (parts: Changing, order: PlaceOrder, asked: PlaceSettingsChange): Promise<void> =>
  change(parts, order, async (place, transaction) => {
    refuseRetired(place)
    const now = parts.clock.now()
    const validFrom = asked.validFrom === null ? now : new Date(asked.validFrom)
    const faults = await faultsOfSettings(asked.content, 'content', transaction)
    if (asked.content.kind !== place.kind) faults.push({ path: 'content.kind', message: `must be ${place.kind}` })
    if (validFrom < now) faults.push({ path: 'validFrom', message: 'must not lie in the past' })
    if (faults.length > 0) throw invalidInput(faults)
    const { content, reason } = asked
    const { id } = await addVersion(
      place.id,
      { content, validFrom, personId: order.personId, reason, now },
      transaction,
    )
    const text = `Settings of ${place.name}: version ${id}, from ${validFrom.toISOString()}. ${reason}`
    return { action: 'place.changeSettings', after: { placeSettingsId: id, validFrom, content, reason }, text }
  })

/** Its limits must be retired first: a limit that is never judged again would look as if it watched. */
export const retirePlace = (parts: Changing, order: PlaceOrder, reason: string): Promise<void> =>
  change(parts, order, async (place, transaction) => {
    refuseRetired(place)
    const limits = await Limit.count({
      where: { subjectKind: 'place', subjectId: place.id, retiredAt: null },
      transaction,
    })
    if (limits > 0) {
      const detail = `${limits === 1 ? '1 limit is' : `${limits} limits are`} set here. Retire them first.`
      throw new Refused({ status: 409, code: 'place.hasLimits', title: 'Limits are set here', detail })
    }
    await place.update({ retiredAt: parts.clock.now() }, { transaction })
    return { action: 'place.retire', after: { reason }, text: `Place retired: ${place.name}. ${reason}` }
  })

export const restorePlace = (parts: Changing, order: PlaceOrder, reason: string): Promise<void> =>
  change(parts, order, async (place, transaction) => {
    if (place.retiredAt === null) {
      const detail = 'It is in service.'
      throw new Refused({ status: 409, code: 'place.inService', title: 'In service', detail })
    }
    await place.update({ retiredAt: null }, { transaction })
    return { action: 'place.restore', after: { reason }, text: `Place restored: ${place.name}. ${reason}` }
  })
