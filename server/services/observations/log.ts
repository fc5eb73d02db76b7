/** Observations logged, listed, and withdrawn with a reason: they are kept and left out of fits. */
import { isSighting, observationFields } from '../../../shared/schemas/placeObservation.ts'
import type { ObservationDraft, ObservationList, ObservationView } from '../../../shared/schemas/placeObservation.ts'
import type { Team } from '../../../shared/schemas/session.ts'
import type { Parts } from '../../config/parts.ts'
import { Observation, Person, Place } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { invalidInput, notFound, Refused } from '../problems.ts'
import { inTransaction } from '../transaction.ts'
import { pairsOf } from './pairs.ts'
import type { ObservationPair } from './pairs.ts'

/** Who asks. A partner logs at the places of their team alone. */
export interface ObservationAuthor {
  id: number
  role: string
  team: Team | null
}

type Logging = Pick<Parts, 'clock' | 'sequelize'>

const pageLength = 100
/** Older ones are written from memory or from a book: they are history, not observations. */
const longestBackMs = 400 * 24 * 3_600_000
/** A minute for clocks that are a little ahead. */
const forgivenMs = 60_000

function refuseOtherTeam(place: Place, { role, team }: ObservationAuthor): void {
  if (role !== 'partner' || (team !== null && team === place.team)) return
  const detail = `${place.name} is not a place of your team.`
  throw new Refused({ status: 403, code: 'observation.notYourTeam', title: 'Not your team', detail })
}

async function placeOf(placeId: number): Promise<Place> {
  const place = await Place.findByPk(placeId)
  if (!place) throw notFound('place', placeId)
  return place
}

export async function addObservation(
  parts: Logging,
  order: { placeId: number; draft: ObservationDraft; author: ObservationAuthor },
): Promise<ObservationView> {
  const { draft, author } = order
  const place = await placeOf(order.placeId)
  refuseOtherTeam(place, author)
  const now = parts.clock.now()
  const at = new Date(draft.at)
  const faults: { path: string; message: string }[] = []
  const isOfKind = observationFields[place.kind].some(({ kind }) => kind === draft.kind)
  if (!isOfKind) faults.push({ path: 'kind', message: `is not observed at a place of kind ${place.kind}` })
  if (at.getTime() > now.getTime() + forgivenMs) faults.push({ path: 'at', message: 'must not lie in the future' })
  if (at.getTime() < now.getTime() - longestBackMs)
    faults.push({ path: 'at', message: 'must not be older than 400 days' })
  if (faults.length > 0) throw invalidInput(faults)
  const id = await inTransaction(parts.sequelize, async (transaction) => {
    const value = Number(draft.value)
    const made = {
      placeId: place.id,
      at,
      kind: draft.kind,
      value,
      note: draft.note,
      personId: author.id,
      createdAt: now,
    }
    const row = await Observation.create(made, { transaction })
    const audit = { action: 'observation.add', entity: 'observation', entityId: row.id, after: draft }
    await recordAudit(parts, { ...audit, personId: author.id }, transaction)
    return row.id
  })
  return readObservation(parts, id)
}

export async function withdrawObservation(
  parts: Logging,
  order: { observationId: number; reason: string; author: ObservationAuthor },
): Promise<ObservationView> {
  const { observationId, reason, author } = order
  await inTransaction(parts.sequelize, async (transaction) => {
    const row = await Observation.findByPk(observationId, { lock: true, transaction })
    if (!row) throw notFound('observation', observationId)
    refuseOtherTeam(await placeOf(row.placeId), author)
    if (row.withdrawnAt !== null) return
    const withdrawn = { withdrawnAt: parts.clock.now(), withdrawnById: author.id, withdrawReason: reason }
    await row.update(withdrawn, { transaction })
    const audit = { action: 'observation.withdraw', entity: 'observation', entityId: observationId, after: { reason } }
    await recordAudit(parts, { ...audit, personId: author.id }, transaction)
  })
  return readObservation(parts, observationId)
}

async function readObservation({ sequelize }: Logging, observationId: number): Promise<ObservationView> {
  const row = await Observation.findByPk(observationId)
  if (!row) throw notFound('observation', observationId)
  const place = await placeOf(row.placeId)
  const [pair] = await pairsOf(sequelize, place, row.kind, { before: row.id + 1, most: 1 })
  const [view] = pair ? await present(place.id, [pair]) : []
  if (!view) throw notFound('observation', observationId)
  return view
}

async function present(placeId: number, pairs: ObservationPair[]): Promise<ObservationView[]> {
  const ids = [...new Set(pairs.flatMap(({ personId }) => personId ?? []))]
  const people = ids.length === 0 ? [] : await Person.findAll({ where: { id: ids }, attributes: ['id', 'name'] })
  return pairs.map(({ id, at, kind, value, note, personId, predicted, withdrawnAt, withdrawReason }) => {
    const person = people.find((one) => one.id === personId)
    return {
      ...{ id, placeId, at: new Date(at).toISOString(), kind, note, predicted, withdrawReason },
      value: isSighting(kind) ? value > 0 : value,
      by: person ? { id: person.id, name: person.name } : null,
      withdrawnAt: withdrawnAt?.toISOString() ?? null,
    }
  })
}

/** All kinds of the place together, newest first; counts are of those not withdrawn. */
export async function listObservations(
  { sequelize }: Logging,
  placeId: number,
  before: number | null,
): Promise<ObservationList> {
  const place = await placeOf(placeId)
  const kinds = observationFields[place.kind].map(({ kind }) => kind)
  const pages = await Promise.all(
    kinds.map((kind) => pairsOf(sequelize, place, kind, { before, most: pageLength + 1 })),
  )
  const all = pages.flat().sort((a, b) => b.id - a.id)
  const page = all.slice(0, pageLength)
  const counted = await Promise.all(
    kinds.map(async (kind) => {
      const fitted = await pairsOf(sequelize, place, kind, { isFitted: true })
      return { kind, count: fitted.length, withPrediction: fitted.filter(({ predicted }) => predicted !== null).length }
    }),
  )
  return {
    observations: await present(placeId, page),
    next: all.length > pageLength ? (page.at(-1)?.id ?? null) : null,
    counts: counted,
  }
}
