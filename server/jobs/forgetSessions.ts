/** Every night sessions that nobody used for long are forgotten. */
import { schedule } from 'node-cron'
import type { Parts, RunningPart } from '../config/parts.ts'
import { forgetOldSessions } from '../services/sessions.ts'

export async function startForgetSessions(parts: Pick<Parts, 'clock' | 'logger'>): Promise<RunningPart> {
  let running: Promise<void> = Promise.resolve()
  const forget = async (): Promise<void> => {
    try {
      const sessions = await forgetOldSessions(parts)
      if (sessions > 0) parts.logger.info({ sessions }, 'old sessions were forgotten')
    } catch (error) {
      parts.logger.warn({ error }, 'old sessions could not be forgotten now; the next night goes on from there')
    }
  }
  const task = schedule('0 47 2 * * *', () => (running = forget()), { timezone: 'UTC', name: 'forgetSessions' })
  return {
    async stop() {
      await task.destroy()
      await running
    },
  }
}
