import { z } from 'zod'
import { caughtMail, caughtMailList } from '../../shared/schemas/caughtMail.ts'
import { messageDetail, messageList } from '../../shared/schemas/message.ts'
import type { Parts } from '../config/parts.ts'
import { listCaughtMails, readCaughtMail } from '../services/caughtMails.ts'
import { retryDelivery } from '../services/deliveries.ts'
import { listMessages, readMessage, writeTestMessage } from '../services/messages.ts'
import { settingInForce } from '../services/settings.ts'
import { idInPath } from './parameters.ts'
import { route } from './registry.ts'
import type { Route } from './registry.ts'

const id = z.coerce.number().int().positive().optional()

export const messageRoutes = (parts: Parts): Route[] => [
  route({
    method: 'get',
    path: '/api/messages',
    action: 'messages.read',
    summary: 'E-mails written, newest first, with what became of each for every person; `show=notOut`: those that wait',
    query: z.object({ before: id, alertId: id, show: z.literal('notOut').optional() }),
    answer: messageList,
    handle: ({ query: { show, ...query } }) => listMessages(parts, { ...query, isNotOut: show === 'notOut' }),
  }),
  route({
    method: 'get',
    path: '/api/messages/:messageId',
    action: 'messages.read',
    summary: 'One e-mail with its text',
    params: z.object({ messageId: idInPath }),
    answer: messageDetail,
    handle: ({ params }) => readMessage(params.messageId),
  }),
  route({
    method: 'post',
    path: '/api/messages/test',
    action: 'deliveries.change',
    summary: 'A test e-mail to one person',
    body: z.strictObject({ personId: z.number().int().positive() }),
    answer: messageDetail,
    status: 201,
    async handle({ body, caller }) {
      const { portName } = await settingInForce(parts, 'port')
      return readMessage(await writeTestMessage(parts, body.personId, caller.person, portName))
    },
  }),
  route({
    method: 'post',
    path: '/api/deliveries/:deliveryId/retry',
    action: 'deliveries.change',
    summary: 'Tries an e-mail again that was refused, given up or of which nobody knows',
    params: z.object({ deliveryId: idInPath }),
    answer: messageDetail,
    handle: async ({ params, caller }) => readMessage(await retryDelivery(parts, params.deliveryId, caller.person.id)),
  }),
  route({
    method: 'get',
    path: '/api/caughtMails',
    action: 'messages.read',
    summary: 'In the demonstration: what its own mail server kept, newest first',
    answer: caughtMailList,
    handle: () => listCaughtMails(parts),
  }),
  route({
    method: 'get',
    path: '/api/caughtMails/:mailId',
    action: 'messages.read',
    summary: 'In the demonstration: one e-mail that was kept',
    params: z.object({ mailId: z.string().max(80) }),
    answer: caughtMail,
    handle: ({ params }) => readCaughtMail(parts, params.mailId),
  }),
]
