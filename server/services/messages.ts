/** The outbox: e-mails written once, each for everybody who is to get it. */
import { Op } from 'sequelize'
import type { MessageView } from '../../shared/schemas/message.ts'
import type { Parts } from '../config/parts.ts'
import { Message } from '../models/index.ts'
import { notOutSince, notOutSql } from '../models/notOut.ts'
import { select } from '../models/sql.ts'
import { presentMessages } from './messages/present.ts'
import { notFound } from './problems.ts'

export { announcedSince } from './messages/announced.ts'
export { mergeFlood } from './messages/flood.ts'
export { writeDueHeartbeat } from './messages/heartbeat.ts'
export { countReached, writeToLists } from './messages/lists.ts'
export { queueMessages } from './messages/queue.ts'
export { writeTestMessage } from './messages/test.ts'
export { writeMessage } from './messages/write.ts'

const aPage = 50

/** Newest first; `before` is the last id of the page before. */
export async function listMessages(
  { sequelize, clock }: Pick<Parts, 'sequelize' | 'clock'>,
  asked: { before?: number; alertId?: number; isNotOut?: boolean },
): Promise<{ messages: MessageView[]; next: number | null }> {
  const { before, alertId, isNotOut } = asked
  const notOut = isNotOut ? await notOutAmong(sequelize, clock.now()) : null
  const rows = await Message.findAll({
    where: {
      [Op.and]: [before ? { id: { [Op.lt]: before } } : {}, notOut ? { id: notOut } : {}],
      ...(alertId && { alertId }),
    },
    order: [['id', 'DESC']],
    limit: aPage + 1,
  })
  const page = rows.slice(0, aPage)
  return {
    messages: await presentMessages(page),
    next: rows.length > aPage ? (page.at(-1)?.id ?? null) : null,
  }
}

/** Messages that have not reached the mail server for somebody. */
async function notOutAmong(sequelize: Parts['sequelize'], now: Date): Promise<number[]> {
  const sql = `SELECT DISTINCT d.messageId FROM deliveries d WHERE ${notOutSql}`
  const rows = await select<{ messageId: number }>(sequelize, sql, { notOutSince: notOutSince(now) })
  return rows.map(({ messageId }) => messageId)
}

/** How many e-mails the mail server has not taken, and since when. */
export async function messagesNotOut({
  sequelize,
  clock,
}: Pick<Parts, 'sequelize' | 'clock'>): Promise<{ count: number; since: string | null }> {
  const sql = `SELECT COUNT(DISTINCT d.messageId) AS count, MIN(d.createdAt) AS since FROM deliveries d WHERE ${notOutSql}`
  const [row] = await select<{ count: number; since: Date | null }>(sequelize, sql, {
    notOutSince: notOutSince(clock.now()),
  })
  return { count: Number(row?.count ?? 0), since: row?.since?.toISOString() ?? null }
}

/** As the list shows it. */
export async function readMessageLine(messageId: number): Promise<MessageView | null> {
  const row = await Message.findByPk(messageId)
  return row ? ((await presentMessages([row])).at(0) ?? null) : null
}

/** With its whole text as it was frozen, before names and links were added for each person. */
export async function readMessage(messageId: number): Promise<MessageView & { text: string; html: string | null }> {
  const row = await Message.findByPk(messageId)
  const line = await readMessageLine(messageId)
  if (!row || !line) throw notFound('message', messageId)
  return { ...line, text: row.text, html: row.html }
}
