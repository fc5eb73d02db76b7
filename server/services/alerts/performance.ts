/** Alerts that people were told of, for the measures; exercises are left out. */
import { Op } from 'sequelize'
import { performanceOf } from '../../../shared/alerts/performance.ts'
import type { AlertPerformance } from '../../../shared/schemas/alert.ts'
import type { Parts } from '../../config/parts.ts'
import { Alert } from '../../models/index.ts'
import { presentAlerts } from './present.ts'

export async function measurePerformance(parts: Parts, days: number): Promise<AlertPerformance> {
  const to = parts.clock.now().getTime()
  const from = to - days * 86_400_000
  const told = { [Op.ne]: null }
  const rows = await Alert.findAll({
    where: {
      isExercise: false,
      announcedAt: told,
      [Op.or]: [{ announcedAt: { [Op.gte]: new Date(from) } }, { closedAt: null }],
    },
  })
  const titles = new Map((await presentAlerts(parts, rows)).map(({ id, title }) => [id, title]))
  const counted = rows.flatMap(({ id, limitId, priority, announcedAt, acknowledgedAt, clearedAt, closedAt }) => {
    if (!announcedAt) return []
    const times = { acknowledgedAt: acknowledgedAt?.getTime() ?? null, clearedAt: clearedAt?.getTime() ?? null }
    const title = titles.get(id) ?? ''
    return [{ id, limitId, title, priority, announcedAt: announcedAt.getTime(), ...times, closedAt: closedAt?.getTime() ?? null }] // prettier-ignore
  })
  return performanceOf(counted, from, to)
}
