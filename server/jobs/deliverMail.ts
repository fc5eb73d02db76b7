/** From the outbox to the mail server. News wakes it, and every two seconds it looks by itself: nothing hangs on news. */
import { schedule } from 'node-cron'
import type { Parts, RunningPart } from '../config/parts.ts'
import type { Surroundings } from '../mail/letter.ts'
import { createTransport } from '../mail/transport.ts'
import type { Transport } from '../mail/transport.ts'
import { leaseDeliveries, recoverLeases } from '../services/deliveries.ts'
import type { Leased } from '../services/deliveries.ts'
import { mergeFlood, queueMessages } from '../services/messages.ts'
import { settingInForce } from '../services/settings.ts'
import { createHistories } from './deliverMail/histories.ts'
import { createRateLimit } from './deliverMail/rateLimit.ts'
import { sendBatch } from './deliverMail/sendBatch.ts'

const aBatch = 12
const queuedAtOnce = 100
const mostAMinute = 300

export interface DeliverMailOptions {
  /** Only `run` is called: no clock, no news. */
  isUntimed?: boolean
  /** In place of the mail server of the configuration. */
  transport?: Transport
  mostAMinute?: number
}

export interface DeliverMail extends RunningPart {
  /** Everything that is due now; a second call waits for the first and looks once more. */
  run(): Promise<void>
}

export async function startDeliverMail(parts: Parts, options: DeliverMailOptions = {}): Promise<DeliverMail> {
  const { logger } = parts
  const transport = options.transport ?? transportOf(parts)
  const rate = createRateLimit(parts.clock, options.mostAMinute ?? mostAMinute)
  // One process a database: whatever is leased now belongs to one that is no more.
  const recovered = await recoverLeases(parts, true)
  if (recovered > 0) logger.warn({ recovered }, 'e-mails were on their way when the program ended')

  async function deliver(): Promise<void> {
    const { portName, timeZone } = await settingInForce(parts, 'port')
    const { emergencyLine } = await settingInForce(parts, 'contact')
    const { name: senderName } = await settingInForce(parts, 'sender')
    await recoverLeases(parts)
    const isDemonstration = parts.environment.installationKind === 'demonstration'
    const { publicUrl } = parts.environment
    const histories = createHistories(parts)
    const around = async (letter: Leased): Promise<Surroundings> => ({
      ...{ publicUrl, portName, timeZone, isDemonstration, emergencyLine, senderName },
      history: await histories.of(letter),
    })
    // In a flood the most serious go out while the others are still being queued.
    for (let isServerUp = true, isAllQueued = false; !isAllQueued;) {
      isAllQueued = (await queueMessages(parts, timeZone, queuedAtOnce)) < queuedAtOnce
      if (isAllQueued) await mergeFlood(parts)
      isServerUp = isServerUp && (await sendDue(around))
    }
  }

  /** False: the mail server does not answer. */
  async function sendDue(around: (letter: Leased) => Promise<Surroundings>): Promise<boolean> {
    for (;;) {
      const leased = await leaseDeliveries(parts, Math.min(aBatch, rate.free()))
      rate.take(leased.length)
      if (leased.length === 0) return true
      if (!(await sendBatch(parts, { leased, transport, around }))) return false
    }
  }

  let running: Promise<void> | null = null
  let isAskedAgain = false
  let isStopped = false
  async function untilQuiet(): Promise<void> {
    do {
      isAskedAgain = false
      await deliver()
    } while (isAskedAgain && !isStopped)
  }
  function run(): Promise<void> {
    if (isStopped) return Promise.resolve()
    isAskedAgain = true
    return (running ??= untilQuiet().finally(() => (running = null)))
  }
  const wake = (): void =>
    void run().catch((error: unknown) => logger.warn({ error }, 'e-mails could not be looked after; they wait'))

  const unsubscribe = options.isUntimed ? null : parts.bus.subscribe('message.changed', wake)
  const task = options.isUntimed
    ? null
    : schedule('*/2 * * * * *', wake, { timezone: 'UTC', name: 'deliverMail', noOverlap: true })
  return {
    run,
    async stop() {
      isStopped = true
      unsubscribe?.()
      await task?.destroy()
      await running?.catch(() => undefined)
    },
  }
}

function transportOf({ environment }: Parts): Transport {
  const { smtpUrl, mailFrom, publicUrl } = environment
  const clientName = new URL(publicUrl).hostname
  const from = mailFrom ?? `Offing <offing@${clientName}>`
  if (smtpUrl) return createTransport({ url: smtpUrl, from, clientName })
  const reply = 'No mail server is set: SMTP_URL is missing in the configuration'
  return { send: async () => ({ kind: 'later', reply, isServerDown: true }) }
}
