/** Every ten seconds what was committed to the audit is chained by hashes; every night the whole chain is walked. */
import { schedule } from 'node-cron'
import type { Parts, RunningPart } from '../config/parts.ts'
import { sealAudits } from '../services/audit.ts'
import { verifyAudit } from '../services/audit/verify.ts'

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
  let looking: Promise<void> = Promise.resolve()
  const look = async (): Promise<void> => {
    try {
      const { isWhole, faults } = await verifyAudit(parts, null)
      if (!isWhole) parts.logger.error({ faults }, 'the audit does not hold')
    } catch (error) {
      parts.logger.warn({ error }, 'the audit could not be looked over now; the next night does')
    }
  }
  const nightly = schedule('0 27 3 * * *', () => (looking = look()), { timezone: 'UTC', name: 'verifyAudit' })
  return {
    async stop() {
      await task.destroy()
      await nightly.destroy()
      await looking
      await running
    },
  }
}
