/** Every hour, and at the start, how large the database is: one row a day, from which its growth is seen. */
import { schedule } from 'node-cron'
import type { Parts, RunningPart } from '../config/parts.ts'
import { noteDatabaseSize } from '../services/system/database.ts'

export async function startNoteDatabaseSize(
  parts: Pick<Parts, 'clock' | 'logger' | 'sequelize'>,
): Promise<RunningPart> {
  let running: Promise<void> = Promise.resolve()
  const note = (): Promise<void> =>
    noteDatabaseSize(parts).catch((error: unknown) =>
      parts.logger.warn({ error }, "the database's size could not be noted now; the next hour does"),
    )
  await note()
  const task = schedule('0 7 * * * *', () => (running = note()), { timezone: 'UTC', name: 'noteDatabaseSize' })
  return {
    async stop() {
      await task.destroy()
      await running
    },
  }
}
