/** At the start and every night: months ahead get their partitions, months past their retention go. */
import { schedule } from 'node-cron'
import type { Parts, RunningPart } from '../config/parts.ts'
import { keepPartitions } from '../services/readings.ts'
import { settingInForce } from '../services/settings.ts'

export async function startRetention(parts: Pick<Parts, 'clock' | 'logger'>): Promise<RunningPart> {
  let running: Promise<void> = Promise.resolve()
  const keep = async (): Promise<void> => {
    try {
      const months = await settingInForce(parts, 'retention')
      for (const change of await keepPartitions(parts.clock.now(), months))
        parts.logger.info(change, 'partitions changed')
    } catch (error) {
      parts.logger.error({ error }, 'partitions could not be kept now; they are tried again the next night')
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
