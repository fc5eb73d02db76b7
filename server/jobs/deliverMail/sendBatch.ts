/** Sends what was leased, a few side by side. When the server does not answer one, the others are not tried. */
import type { Parts } from '../../config/parts.ts'
import { writeLetter } from '../../mail/letter.ts'
import type { Surroundings } from '../../mail/letter.ts'
import type { Transport } from '../../mail/transport.ts'
import { handOver, settleDelivery } from '../../services/deliveries.ts'
import type { Leased, Outcome } from '../../services/deliveries.ts'

const sideBySide = 3

export interface Batch {
  leased: Leased[]
  transport: Transport
  around(letter: Leased): Promise<Surroundings>
}

/** False: the mail server does not answer, and nothing more is to be tried now. */
export async function sendBatch(parts: Parts, { leased, transport, around }: Batch): Promise<boolean> {
  let isServerUp = true
  const waiting = [...leased]
  async function work(): Promise<void> {
    for (let letter = waiting.shift(); letter; letter = waiting.shift()) {
      const outcome = isServerUp ? await sendOne(parts, letter, transport, around) : { kind: 'untried' as const }
      if (outcome.kind === 'later' && outcome.isServerDown) isServerUp = false
      await settleDelivery(parts, letter, outcome)
    }
  }
  // Each goes on to its end, so that nothing of this batch is still under way when the next one begins.
  const ends = await Promise.allSettled(Array.from({ length: sideBySide }, work))
  const failed = ends.find((end) => end.status === 'rejected')
  if (failed) throw failed.reason
  return isServerUp
}

type Sent = Outcome & { isServerDown?: boolean }

async function sendOne(parts: Parts, letter: Leased, transport: Transport, around: Batch['around']): Promise<Sent> {
  const { logger, clock } = parts
  try {
    const surroundings = await around(letter)
    const written = await writeLetter(letter, surroundings)
    const result = await transport.send(written, {
      to: letter.address,
      messageIdHeader: letter.messageIdHeader,
      senderName: surroundings.senderName ?? '',
      date: clock.now(),
      beforeData: () => handOver(parts, letter),
    })
    const { messageId, deliveryId, attempt } = letter
    logger.info({ messageId, deliveryId, attempt, outcome: result.kind, reply: result.reply }, 'an e-mail was tried')
    return result
  } catch (error) {
    logger.error({ error, messageId: letter.messageId }, 'an e-mail could not be written')
    return { kind: 'later', reply: 'The e-mail could not be written; the fault is in the log' }
  }
}
