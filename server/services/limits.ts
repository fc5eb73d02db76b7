/** Limits: set, changed as new versions, tried on stored figures, retired. */
import type { limitWithHistory } from '../../shared/schemas/limit.ts'
import type { LimitView } from '../../shared/schemas/limit.ts'
import type { z } from 'zod'
import type { Parts } from '../config/parts.ts'
import { Limit, LimitVersion } from '../models/index.ts'
import { namesOf, presentLimits, presentVersion } from './limits/present.ts'
import { notFound } from './problems.ts'

export { listSubjects } from './limits/subjects.ts'

export { askBackTest } from './limits/backTest.ts'
export { addLimit, changeLimit, createLimit, retireLimit, staleContent } from './limits/change.ts'
export type { NewLimit } from './limits/change.ts'

/** All that are not retired, by number. */
export async function listLimits(parts: Parts): Promise<LimitView[]> {
  return presentLimits(parts, await Limit.findAll({ where: { retiredAt: null }, order: [['id', 'ASC']] }))
}

/** Set at these places and not retired, by number. */
export async function limitsOfPlaces(parts: Parts, placeIds: number[]): Promise<LimitView[]> {
  if (placeIds.length === 0) return []
  const where = { subjectKind: 'place', subjectId: placeIds, retiredAt: null }
  return presentLimits(parts, await Limit.findAll({ where, order: [['id', 'ASC']] }))
}

/** Throws the 404. */
export async function readLimit(parts: Parts, limitId: number): Promise<LimitView> {
  const row = await Limit.findByPk(limitId)
  const [view] = row ? await presentLimits(parts, [row]) : []
  if (!view) throw notFound('limit', limitId)
  return view
}

export async function readLimitHistory(parts: Parts, limitId: number): Promise<z.input<typeof limitWithHistory>> {
  const limit = await readLimit(parts, limitId)
  const rows = await LimitVersion.findAll({ where: { limitId }, order: [['number', 'DESC']] })
  const nameOf = await namesOf(rows.flatMap(({ authorId, consentById }) => [authorId, consentById]))
  return { ...limit, versions: rows.map((row) => presentVersion(row, nameOf)) }
}
