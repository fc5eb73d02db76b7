/** Every five seconds: steps and reminders whose stored time has come, and the daily e-mail that says all is running. */
import { schedule } from 'node-cron'
import type { Parts, RunningPart } from '../config/parts.ts'
import { escalateDue } from '../services/escalations.ts'
import { writeDueHeartbeat } from '../services/messages.ts'
import { settingInForce } from '../services/settings.ts'

/** Everything that is due now. */
export async function escalate(parts: Parts): Promise<void> {
  await escalateDue(parts)
  const [port, cautions, mail] = await Promise.all([
    settingInForce(parts, 'port'),
    settingInForce(parts, 'cautions'),
    settingInForce(parts, 'mail'),
  ])
  if (mail.heartbeatAt === null) return
  await writeDueHeartbeat(parts, {
    ...port,
    caution: cautions.figures,
    clock: mail.heartbeatAt,
    listId: mail.heartbeatListId,
  })
}

export function startEscalate(parts: Parts): RunningPart {
  let running: Promise<void> = Promise.resolve()
  const work = async (): Promise<void> => {
    try {
      await escalate(parts)
    } catch (error) {
      parts.logger.warn({ error }, 'steps and reminders could not be looked after; their times are stored')
    }
  }
  const task = schedule('*/5 * * * * *', () => (running = work()), {
    timezone: 'UTC',
    name: 'escalate',
    noOverlap: true,
  })
  return {
    async stop() {
      await task.destroy()
      await running
    },
  }
}
