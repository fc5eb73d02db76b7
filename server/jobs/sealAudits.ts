/** Every ten seconds what was committed to the audit is chained by hashes. */
import { schedule } from 'node-cron'
import type { Parts, RunningPart } from '../config/parts.ts'
import { sealAudits } from '../services/audit.ts'

export async function startSealAudits(parts: Parts): Promise<RunningPart> {
  let running: Promise<void> = Promise.resolve()
  const seal = async (): Promise<void> => {
    try {
      while ((await sealAudits(parts)) > 0) continue
    } catch (error) {
      parts.logger.warn({ error }, 'the audit could not be sealed now; the next time goes on from there')
    }
  }
  const task = schedule('*/10 * * * * *', () => (running = seal()), {
    timezone: 'UTC',
    name: 'sealAudits',
    noOverlap: true,
  })
  return {
    async stop() {
      await task.destroy()
      await running
    },
  }
}
