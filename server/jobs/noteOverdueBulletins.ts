/** Every minute: was a next bulletin promised that did not come? */
import { schedule } from 'node-cron'
import type { Parts, RunningPart } from '../config/parts.ts'
import { noteOverdueBulletins } from '../services/bulletins.ts'

export function startNoteOverdueBulletins(parts: Pick<Parts, 'bus' | 'clock' | 'logger' | 'sequelize'>): RunningPart {
  let running: Promise<void> = Promise.resolve()
  const look = async (): Promise<void> => {
    try {
      await noteOverdueBulletins(parts)
    } catch (error) {
      parts.logger.warn({ error }, 'overdue bulletins could not be looked for now; the next minute does')
    }
  }
  const task = schedule('5 * * * * *', () => (running = running.then(look)), {
    timezone: 'UTC',
    name: 'overdueBulletins',
  })
  return {
    async stop() {
      await task.destroy()
      await running
    },
  }
}
