/** Every minute the frames of minutes that have been over for a while become packed minutes. */
import { schedule } from 'node-cron'
import type { Parts, RunningPart } from '../config/parts.ts'
import { compactReadings } from '../services/readings.ts'
import type { ReadingStore } from '../services/readings.ts'

/**
 * Reading a window back costs four times as much from frames as from packed minutes, so they do not wait for what may
 * still come late: that becomes a part of its own.
 */
const hotMs = 3 * 60_000

export async function startCompactReadings(
  parts: Pick<Parts, 'clock' | 'logger'>,
  store: Pick<ReadingStore, 'settledCommitId'>,
): Promise<RunningPart> {
  let running: Promise<void> = Promise.resolve()
  const compact = async (): Promise<void> => {
    const before = parts.clock.now().getTime() - hotMs
    try {
      const frames = await compactReadings({ before, settledCommitId: store.settledCommitId() })
      if (frames > 0) parts.logger.debug({ frames }, 'frames were compacted')
    } catch (error) {
      parts.logger.warn({ error }, 'frames could not be compacted now; the next time goes on from there')
    }
  }
  const task = schedule('20 * * * * *', () => (running = compact()), {
    timezone: 'UTC',
    name: 'compactReadings',
    noOverlap: true,
  })
  return {
    async stop() {
      await task.destroy()
      await running
    },
  }
}
