/** Every minute: notices about to expire and notices that have, told once each by stored times. */
import { schedule } from 'node-cron'
import type { Parts, RunningPart } from '../config/parts.ts'
import { noticeOfficeOf } from '../presenters/place.ts'
import { tellOfExpiry } from '../services/notices.ts'

export interface KeepNotices extends RunningPart {
  /** Resolves when everything due was told. */
  wake(): Promise<void>
}

export function startKeepNotices(parts: Parts, { isUnscheduled = false } = {}): KeepNotices {
  let running: Promise<void> | null = null

  async function keep(): Promise<void> {
    try {
      await tellOfExpiry(parts, await noticeOfficeOf(parts))
    } catch (error) {
      parts.logger.error({ error }, 'notices could not be looked through now; they stay due')
    }
  }
  const wake = (): Promise<void> => (running ??= keep().finally(() => (running = null)))

  const task = isUnscheduled
    ? null
    : schedule('5 * * * * *', () => void wake(), { timezone: 'UTC', name: 'keepNotices' })
  if (!isUnscheduled) void wake()

  return {
    wake,
    async stop() {
      await task?.destroy()
      await running
    },
  }
}
