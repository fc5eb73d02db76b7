/** Surveys that are worked on: one a station for a new version, and one for each correction of the past. */
import type { Transaction } from 'sequelize'
import type { z } from 'zod'
import { placeSensors } from '../../../shared/arrayDesign/placeSensors.ts'
import { deploymentDraftContent } from '../../../shared/schemas/stationSetUpDeployments.ts'
import type { DeploymentDraftContent, DeploymentDraftView, deploymentDraftOrder } from '../../../shared/schemas/stationSetUpDeployments.ts' // prettier-ignore
import type { Parts } from '../../config/parts.ts'
import { Deployment, DeploymentDraft, Station } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { changedMeanwhile, invalidInput, notFound, Refused } from '../problems.ts'
import { namesOf, numberedDeployments } from '../stationSetUp/present.ts'
import { isRetired } from '../stationSetUp/lock.ts'
import { inTransaction } from '../transaction.ts'
import { contentOf, deploymentRecord } from './rows.ts'

export interface DraftEdit {
  stationId: number
  draftId: number
  version: number
  personId: number
}

export async function listDrafts(stationId: number): Promise<DeploymentDraftView[]> {
  const station = await stationOf(stationId)
  const drafts = await DeploymentDraft.findAll({ where: { stationId, retiredAt: null }, order: [['id', 'ASC']] })
  return Promise.all(drafts.map((draft) => presentDraft(station, draft)))
}

export async function readDraft(stationId: number, draftId: number): Promise<DeploymentDraftView> {
  return presentDraft(await stationOf(stationId), await draftOf(stationId, draftId))
}

/** With the content that is given, or as a copy of a version; without either as the first survey of an empty array. */
export async function addDraft(
  parts: Parts,
  stationId: number,
  order: z.infer<typeof deploymentDraftOrder>,
  personId: number,
): Promise<DeploymentDraftView> {
  const station = await stationOf(stationId)
  if (station.retiredAt) throw isRetired()
  const basedOnId = order.basedOnId ?? order.correctsId
  const based = basedOnId === null ? null : await deploymentRecord(parts, stationId, basedOnId)
  if (order.correctsId !== null) await refuseCorrectionOf(stationId, order.correctsId)
  const content = order.content ?? (based && contentOf(based))
  if (!content) throw invalidInput([{ path: 'content', message: 'is needed where no version is copied' }])
  refuseUnplaced(station, content, 'content.')
  const now = parts.clock.now()
  const draftId = await inTransaction(parts.sequelize, async (transaction) => {
    await Station.findByPk(stationId, { lock: transaction.LOCK.UPDATE, transaction })
    const open = await DeploymentDraft.findOne({ where: { stationId, correctsId: order.correctsId, retiredAt: null }, transaction }) // prettier-ignore
    if (open) throw alreadyOpen(open.id)
    const draft = await DeploymentDraft.create(
      { stationId, basedOnId, correctsId: order.correctsId, content, authorId: personId, deploymentId: null, createdAt: now, updatedAt: now, retiredAt: null }, // prettier-ignore
      { transaction },
    )
    const audited = { action: 'deploymentDraft.add', entity: 'station', entityId: stationId, after: { draftId: draft.id, basedOnId } } // prettier-ignore
    await recordAudit(parts, { ...audited, personId }, transaction)
    return draft.id
  })
  return readDraft(stationId, draftId)
}

export async function changeDraft(
  parts: Parts,
  edit: DraftEdit,
  content: DeploymentDraftContent,
): Promise<DeploymentDraftView> {
  const station = await stationOf(edit.stationId)
  refuseUnplaced(station, content, '')
  await inTransaction(parts.sequelize, async (transaction) => {
    const draft = await lockDraft(station, edit, transaction)
    const before = draft.content
    const change = { content, authorId: edit.personId, version: edit.version + 1, updatedAt: parts.clock.now() }
    await draft.update(change, { transaction })
    const audited = { action: 'deploymentDraft.change', entity: 'station', entityId: edit.stationId, before }
    await recordAudit(parts, { ...audited, personId: edit.personId, after: content }, transaction)
  })
  return readDraft(edit.stationId, edit.draftId)
}

export async function discardDraft(parts: Parts, edit: DraftEdit): Promise<void> {
  const station = await stationOf(edit.stationId)
  await inTransaction(parts.sequelize, async (transaction) => {
    const draft = await lockDraft(station, edit, transaction)
    await draft.update({ retiredAt: parts.clock.now() }, { transaction })
    const audited = { action: 'deploymentDraft.discard', entity: 'station', entityId: edit.stationId }
    await recordAudit(parts, { ...audited, personId: edit.personId, before: draft.content }, transaction)
  })
}

/** Throws 404 for one that is no longer open, 412 with it for another version. */
export async function lockDraft(
  station: Station,
  { draftId, version }: DraftEdit,
  transaction: Transaction,
): Promise<DeploymentDraft> {
  const draft = await DeploymentDraft.findOne({
    where: { id: draftId, stationId: station.id, retiredAt: null },
    lock: transaction.LOCK.UPDATE,
    transaction,
  })
  if (!draft) throw notFound('deploymentDraft', draftId)
  if (draft.version !== version) throw changedMeanwhile('deploymentDraft', draft.version, await presentDraft(station, draft)) // prettier-ignore
  return draft
}

export async function stationOf(stationId: number): Promise<Station> {
  const station = await Station.findByPk(stationId)
  if (!station) throw notFound('station', stationId)
  return station
}

export async function draftOf(stationId: number, draftId: number): Promise<DeploymentDraft> {
  const draft = await DeploymentDraft.findOne({ where: { id: draftId, stationId, retiredAt: null } })
  if (!draft) throw notFound('deploymentDraft', draftId)
  return draft
}

async function presentDraft(station: Station, draft: DeploymentDraft): Promise<DeploymentDraftView> {
  const [versions, nameOf] = await Promise.all([numberedDeployments(station.id), namesOf([draft.authorId])])
  const corrected = versions.find(({ id }) => id === draft.correctsId)
  const content = deploymentDraftContent.parse(draft.content)
  return {
    id: draft.id,
    version: draft.version,
    stationId: station.id,
    number: corrected?.number ?? versions.length + 1,
    basedOnId: draft.basedOnId,
    correctsId: draft.correctsId,
    content,
    placed: placeSensors(station, content.sensors).placed,
    author: nameOf(draft.authorId),
    updatedAt: draft.updatedAt.toISOString(),
  }
}

/** What shapes alone cannot tell: bearings that lead nowhere, positions that are not near the station. */
function refuseUnplaced(station: Station, { sensors }: DeploymentDraftContent, prefix: string): void {
  const { placed, faults } = placeSensors(station, sensors)
  const path = (index: number): string => `${prefix}sensors.${index}.position`
  const errors = faults.map(({ index, reason }) => ({ path: path(index), message: reason }))
  placed.forEach(({ letter, east, north }) => {
    const range = Math.hypot(east, north)
    if (range <= farthest) return
    const index = sensors.findIndex((sensor) => sensor.letter === letter)
    errors.push({ path: path(index), message: `${letter} stands ${(range / 1000).toFixed(1)} km from the station` })
  })
  if (errors.length > 0) throw invalidInput(errors)
}

/** No array reaches further, m. */
const farthest = 20_000

async function refuseCorrectionOf(stationId: number, correctsId: number): Promise<void> {
  const corrected = await Deployment.findOne({ where: { id: correctsId, stationId } })
  if (corrected?.replacesId === null) return
  throw invalidInput([{ path: 'correctsId', message: 'is itself a correction: correct the version it belongs to' }])
}

const alreadyOpen = (draftId: number): Refused =>
  new Refused({
    status: 409,
    code: 'deploymentDraft.open',
    title: 'A draft is open',
    detail: `Draft ${draftId} of this station is open: go on with it, or discard it first.`,
    current: { draftId },
  })
