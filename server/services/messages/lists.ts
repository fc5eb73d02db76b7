/** An e-mail to the people of some lists, each once, by their hours and deputies: what is told at once and by nobody's alert. */
import type { Transaction } from 'sequelize'
import type { Priority } from '../../../shared/schemas/limit.ts'
import type { Parts } from '../../config/parts.ts'
import { inTransaction } from '../transaction.ts'
import { membersOf, reachablePeople } from './people.ts'
import { chooseRecipients } from './recipients.ts'
import { writeMessage } from './write.ts'
import type { NewMessage } from './write.ts'

export interface ListOrder {
  listIds: number[]
  /** Members take some priorities alone. */
  priority: Priority
  /** The port's, in which hours are kept. */
  timeZone: string
}

async function recipientsOf({ clock }: Pick<Parts, 'clock'>, order: ListOrder, transaction: Transaction) {
  const now = clock.now()
  const [members, people] = await Promise.all([
    membersOf(order.listIds, transaction),
    reachablePeople(now, transaction),
  ])
  return chooseRecipients({ members, people, priority: order.priority, at: now.getTime(), timeZone: order.timeZone })
}

/** How many people an e-mail to these lists would go to now. */
export const countReached = (parts: Pick<Parts, 'clock' | 'sequelize'>, order: ListOrder): Promise<number> =>
  inTransaction(parts.sequelize, async (transaction) => {
    const { recipients } = await recipientsOf(parts, order, transaction)
    return recipients.length
  })

/** Answers the message, or null where nobody is to get it, and who could not be reached. */
export async function writeToLists(
  parts: Pick<Parts, 'clock' | 'environment'>,
  message: NewMessage,
  order: ListOrder,
  transaction: Transaction,
): Promise<{ messageId: number | null; count: number; unreached: string[] }> {
  const { recipients, unreached } = await recipientsOf(parts, order, transaction)
  if (recipients.length === 0) return { messageId: null, count: 0, unreached }
  const { id } = await writeMessage(parts, message, transaction, recipients)
  return { messageId: id, count: recipients.length, unreached }
}
