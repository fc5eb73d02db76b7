/** At the start and every night: months ahead get their partitions, months past their retention go, old details are thinned. */
import { schedule } from 'node-cron'
import type { Parts, RunningPart } from '../config/parts.ts'
import { thinDetails } from '../services/estimates.ts'
import { thinOutlooks } from '../services/places.ts'
import { keepPartitions } from '../services/readings.ts'
import { settingInForce } from '../services/settings.ts'

export async function startRetention(parts: Pick<Parts, 'clock' | 'logger' | 'sequelize'>): Promise<RunningPart> {
  let running: Promise<void> = Promise.resolve()
  const keep = async (): Promise<void> => {
    try {
      const kept = await settingInForce(parts, 'retention')
      const months = { ...kept, outlooks: kept.estimates }
      for (const change of await keepPartitions(parts.clock.now(), months))
        parts.logger.info(change, 'partitions changed')
      const thinned = await thinDetails(parts)
      if (thinned > 0) parts.logger.info({ thinned }, 'details of old estimates went')
      const outlooks = await thinOutlooks(parts)
      if (outlooks > 0) parts.logger.info({ outlooks }, 'details of old outlooks went')
    } catch (error) {
      parts.logger.error({ error }, 'retention could not be kept now; it is tried again the next night')
    }
  }
  await keep()
  const task = schedule('0 17 2 * * *', () => (running = keep()), {
    timezone: 'UTC',
    name: 'retention',
    noOverlap: true,
  })
  return {
    async stop() {
      await task.destroy()
      await running
    },
  }
}
