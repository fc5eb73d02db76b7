/** A draft becomes a version: in force from a time on, checked, with a reason; running stations hear of it. */
import type { Transaction } from 'sequelize'
import { checkDesign, unresolvedFindings } from '../../../shared/arrayDesign/checkDesign.ts'
import { designQuestionOf } from '../../../shared/arrayDesign/designQuestion.ts'
import { placeSensors } from '../../../shared/arrayDesign/placeSensors.ts'
import type { DeploymentDraftContent, DeploymentOrder, DeploymentRecord, PlacedSensor } from '../../../shared/schemas/stationSetUpDeployments.ts' // prettier-ignore
import type { DesignCheck } from '../../../shared/schemas/stationSetUpDesign.ts'
import type { Parts } from '../../config/parts.ts'
import type { DeploymentDraft } from '../../models/index.ts'
import { Deployment, DeploymentSensor, Station } from '../../models/index.ts'
import { select } from '../../models/sql.ts'
import { recordAudit } from '../audit.ts'
import { invalidInput, notFound, Refused } from '../problems.ts'
import { presentSettings } from '../stationSetUp/present.ts'
import { isRetired } from '../stationSetUp/lock.ts'
import { inTransaction } from '../transaction.ts'
import { draftOf, lockDraft, stationOf } from './drafts.ts'
import type { DraftEdit } from './drafts.ts'
import { deploymentRecord, deploymentRecords, registerSensors } from './rows.ts'

/** What speaks against a draft, against the version that it comes after. */
export async function checkDraft(parts: Parts, stationId: number, draftId: number): Promise<DesignCheck> {
  const [station, draft] = [await stationOf(stationId), await draftOf(stationId, draftId)]
  return checkContent(parts, station, draft)
}

async function checkContent(parts: Parts, station: Station, draft: DeploymentDraft): Promise<DesignCheck> {
  const settings = (await presentSettings(parts, station)).find(({ isInForce }) => isInForce)
  if (!settings) throw notFound('stationSettings', `of station ${station.id}`)
  const { content, correctsId } = draft
  const { placed } = placeSensors(station, content.sensors)
  const versions = (await deploymentRecords(parts, station.id)).filter(({ replacesId }) => replacesId === null)
  const earlier = versions.find(({ id, isInForce }) => (correctsId === null ? isInForce : id === correctsId)) ?? null
  const question = designQuestionOf(settings.content, content.waterDepth, settings.sampleRate)
  return checkDesign({ sensors: placed, levelOfBed: content.levelOfBed, earlier }, question)
}

export async function putInForce(parts: Parts, edit: DraftEdit, order: DeploymentOrder): Promise<DeploymentRecord> {
  const { stationId, personId } = edit
  const station = await stationOf(stationId)
  if (station.retiredAt) throw isRetired()
  const deploymentId = await inTransaction(parts.sequelize, async (transaction) => {
    await Station.findByPk(stationId, { lock: transaction.LOCK.UPDATE, transaction })
    const draft = await lockDraft(station, edit, transaction)
    const resolved = await resolvedFindings(parts, station, draft, order)
    const { placed } = placeSensors(station, draft.content.sensors)
    const now = parts.clock.now()
    const validFrom = await beginning(parts, draft, order, transaction)
    const { waterDepth, levelOfBed, surveyedOn, notes } = draft.content
    const version = await Deployment.create(
      { stationId, validFrom, recordedAt: now, replacesId: draft.correctsId, ...{ waterDepth, levelOfBed, surveyedOn, notes }, resolved, authorId: personId, reason: order.reason }, // prettier-ignore
      { transaction },
    )
    await addSensors(parts, version, placed, draft.content, transaction)
    await draft.update({ retiredAt: now, deploymentId: version.id }, { transaction })
    const audited = { action: draft.correctsId === null ? 'deployment.putInForce' : 'deployment.correct', entity: 'station', entityId: stationId } // prettier-ignore
    const after = { deploymentId: version.id, validFrom, reason: order.reason, resolved, ...draft.content }
    await recordAudit(parts, { ...audited, personId, after }, transaction)
    return version.id
  })
  parts.bus.publish('station.changed', { stationId })
  return deploymentRecord(parts, stationId, deploymentId)
}

/** Every finding that is not good, with what was written; a finding without a reason is refused. */
async function resolvedFindings(
  parts: Parts,
  station: Station,
  draft: DeploymentDraft,
  { resolved }: DeploymentOrder,
): Promise<DeploymentOrder['resolved']> {
  const { findings } = await checkContent(parts, station, draft)
  const open = unresolvedFindings(findings)
  const missing = open.filter(({ check }) => !resolved.some((one) => one.check === check))
  if (missing.length > 0) {
    throw new Refused({
      status: 409,
      code: 'deployment.checkUnresolved',
      title: 'A check is not resolved',
      detail: `${missing.map(({ sentence }) => sentence).join('. ')}. A written reason is asked for each.`,
      current: missing,
    })
  }
  return resolved.filter(({ check }) => open.some((finding) => finding.check === check))
}

/** A correction begins where the version did that it corrects; a new one after the others, and after what was measured. */
async function beginning(
  { clock, sequelize }: Parts,
  { stationId, correctsId }: DeploymentDraft,
  order: DeploymentOrder,
  transaction: Transaction,
): Promise<Date> {
  const refuse = (message: string) => invalidInput([{ path: 'validFrom', message }])
  if (correctsId !== null) {
    if (order.validFrom !== null) throw refuse('is that of the version corrected: leave it out')
    const corrected = await Deployment.findByPk(correctsId, { transaction })
    if (!corrected) throw notFound('deployment', correctsId)
    return corrected.validFrom
  }
  const now = clock.now()
  const validFrom = order.validFrom === null ? now : new Date(order.validFrom)
  const latest = await Deployment.findOne({ where: { stationId, replacesId: null }, order: [['validFrom', 'DESC']], transaction }) // prettier-ignore
  if (latest && validFrom <= latest.validFrom) throw refuse(`must be after ${latest.validFrom.toISOString()}, when the version before it begins`) // prettier-ignore
  if (validFrom < now) {
    const newest = await newestReading(sequelize, stationId, transaction)
    if (newest && newest > validFrom) throw refuse(`readings up to ${newest.toISOString()} are stored with the array before: correct that version instead`) // prettier-ignore
  }
  return validFrom
}

async function newestReading(
  sequelize: Parts['sequelize'],
  stationId: number,
  transaction: Transaction,
): Promise<Date | null> {
  const [row] = await select<{ newest: Date | null }>(
    sequelize,
    `SELECT MAX(startsAt) AS newest FROM (
       SELECT MAX(startsAt) AS startsAt FROM readingBlocks WHERE stationId = :stationId
       UNION ALL SELECT MAX(startsAt) FROM frames WHERE stationId = :stationId) AS both_`,
    { stationId },
    transaction,
  )
  return row?.newest ? new Date(row.newest) : null
}

async function addSensors(
  parts: Parts,
  { id, stationId }: Deployment,
  placed: readonly PlacedSensor[],
  { sensors }: DeploymentDraftContent,
  transaction: Transaction,
): Promise<void> {
  const instruments = await registerSensors(parts, stationId, placed, transaction)
  const errors = placed.flatMap(({ serial, kind }, index) => {
    const known = instruments.get(serial)
    return known && known.kind !== kind
      ? [{ path: `sensors.${index}.kind`, message: `${serial} is in the register as a ${known.kind} sensor` }]
      : []
  })
  if (errors.length > 0) throw invalidInput(errors)
  for (const [position, sensor] of placed.entries()) {
    const { letter, serial, east, north, heightAboveBed, positionSd, clockSd, scale, offset, pressureKind } = sensor
    const instrument = instruments.get(serial)
    if (!instrument) throw notFound('sensor', serial)
    await DeploymentSensor.create(
      { deploymentId: id, sensorId: instrument.id, position, letter, east, north, heightAboveBed, positionSd, clockSd, scale, offset, pressureKind, surveyed: sensors[position].position }, // prettier-ignore
      { transaction },
    )
  }
}
