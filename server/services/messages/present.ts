/** The outbox as operators see it: each e-mail with what became of it for every person. */
import { messageKind } from '../../../shared/schemas/message.ts'
import type { DeliveryView, MessageView } from '../../../shared/schemas/message.ts'
import type { Message } from '../../models/index.ts'
import { Delivery, Person } from '../../models/index.ts'

const iso = (time: Date | null): string | null => time?.toISOString() ?? null

const presentDelivery = (row: Delivery, name: string): DeliveryView => ({
  id: row.id,
  person: { id: row.personId, name },
  address: row.address,
  standsInFor: row.standsInFor,
  state: row.state,
  attempts: row.attempts,
  nextAttemptAt: iso(row.nextAttemptAt),
  smtpReply: row.smtpReply,
  acceptedAt: iso(row.acceptedAt),
  receivedAt: iso(row.receivedAt),
})

export async function presentMessages(messages: Message[]): Promise<MessageView[]> {
  const deliveries = await Delivery.findAll({
    where: { messageId: messages.map(({ id }) => id) },
    order: [['id', 'ASC']],
  })
  const people = await Person.findAll({
    where: { id: [...new Set(deliveries.map(({ personId }) => personId))] },
    attributes: ['id', 'name'],
  })
  const nameOf = new Map(people.map(({ id, name }) => [id, name]))
  return messages.map((message) => ({
    id: message.id,
    kind: messageKind.parse(message.kind),
    alertId: message.alertId,
    rootMessageId: message.rootMessageId,
    step: message.step,
    subject: message.subject,
    isExercise: message.isExercise,
    createdAt: message.createdAt.toISOString(),
    deliveries: deliveries
      .filter(({ messageId }) => messageId === message.id)
      .map((row) => presentDelivery(row, nameOf.get(row.personId) ?? '')),
  }))
}
