/** Alerts of the past, newest first, page by page. */
import { Op } from 'sequelize'
import type { z } from 'zod'
import type { alertList } from '../../../shared/schemas/alert.ts'
import type { Parts } from '../../config/parts.ts'
import { Alert } from '../../models/index.ts'
import { presentAlerts } from './present.ts'

export interface AlertQuestion {
  since: Date
  /** Only those with a lower number: the `next` of the page before. */
  before: number | null
  limitId: number | null
}

const pageLength = 100

export async function listAlerts(parts: Parts, question: AlertQuestion): Promise<z.input<typeof alertList>> {
  const rows = await Alert.findAll({
    where: {
      raisedAt: { [Op.gte]: question.since },
      ...(question.before !== null && { id: { [Op.lt]: question.before } }),
      ...(question.limitId !== null && { limitId: question.limitId }),
    },
    order: [['id', 'DESC']],
    limit: pageLength + 1,
  })
  const page = rows.slice(0, pageLength)
  const last = page.at(-1)
  return { alerts: await presentAlerts(parts, page), next: rows.length > pageLength && last ? last.id : null }
}

/** When these alerts were raised and acknowledged. */
export async function acknowledgementsOf(
  alertIds: number[],
): Promise<Map<number, { raisedAt: string; acknowledgedAt: string | null }>> {
  if (alertIds.length === 0) return new Map()
  const rows = await Alert.findAll({ where: { id: alertIds }, attributes: ['id', 'raisedAt', 'acknowledgedAt'] })
  return new Map(
    rows.map(({ id, raisedAt, acknowledgedAt }) => [
      id,
      { raisedAt: raisedAt.toISOString(), acknowledgedAt: acknowledgedAt?.toISOString() ?? null },
    ]),
  )
}
