/**
 * New lines of the watch log for those who look at it. Lines are written in the transactions of what they tell, so the news of those is
 * what wakes this; a line that was told twice is known to the page by its number.
 */
import { logEntryView } from '../../../shared/schemas/watchLog.ts'
import { liveEventKinds as kinds } from '../../../shared/wire/live.ts'
import { newestLog, readEntry } from '../../services/log.ts'
import type { Hub } from '../hub.ts'

const looksBack = 40
const remembers = 400

export interface LogTail {
  /** What was written since the last time. */
  follow(): Promise<void>
  /** These lines as they are now. */
  tellAgain(entryIds: number[]): Promise<void>
}

export function createLogTail(hub: Hub): LogTail {
  const told = new Set<number>()
  return {
    async follow() {
      for (const entry of await newestLog(looksBack)) {
        if (told.has(entry.id)) continue
        told.add(entry.id)
        hub.publish('watch', kinds.logEntry, logEntryView.parse(entry), entry.id)
      }
      for (const id of told) {
        if (told.size <= remembers) break
        told.delete(id)
      }
    },
    async tellAgain(entryIds) {
      for (const id of entryIds) {
        told.add(id)
        hub.publish('watch', kinds.logEntry, logEntryView.parse(await readEntry(id)), id)
      }
    },
  }
}
