/** Where somebody is signed in, and ending it there. */
import { Op } from 'sequelize'
import type { OwnSession } from '../../../shared/schemas/account.ts'
import type { Parts } from '../../config/parts.ts'
import { Session } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { notFound } from '../problems.ts'
import { inTransaction } from '../transaction.ts'
import { idleMilliseconds } from './limits.ts'

/** Those that stand idle for long are over, though nobody has asked them yet. */
const inUse = ({ clock }: Pick<Parts, 'clock'>, personId: number) => ({
  personId,
  endedAt: null,
  lastSeenAt: { [Op.gte]: new Date(clock.now().getTime() - idleMilliseconds) },
})

/** Newest first. */
export async function listSessions(parts: Parts, personId: number, thisId: string | null): Promise<OwnSession[]> {
  const rows = await Session.findAll({ where: inUse(parts, personId), order: [['lastSeenAt', 'DESC']] })
  return rows.map(({ id, kind, device, createdAt, lastSeenAt }) => ({
    ...{ id, kind, device, isThis: id === thisId },
    createdAt: createdAt.toISOString(),
    lastSeenAt: lastSeenAt.toISOString(),
  }))
}

/** One of a person's; 404 where it is another's. */
export async function endOneSession(parts: Parts, personId: number, sessionId: string, by: number): Promise<void> {
  const ended = await endThem(parts, personId, by, { id: sessionId })
  if (ended === 0) throw notFound('session', sessionId.slice(0, 12))
}

/** Everywhere but at `except`. Answers how many. */
export const endSessionsOf = (parts: Parts, personId: number, by: number, except: string | null): Promise<number> =>
  endThem(parts, personId, by, except === null ? {} : { id: { [Op.ne]: except } })

async function endThem(
  parts: Parts,
  personId: number,
  by: number,
  which: { id?: string | { [Op.ne]: string } },
): Promise<number> {
  const ids = await inTransaction(parts.sequelize, async (transaction) => {
    const where = { personId, endedAt: null, ...which }
    const rows = await Session.findAll({ where, lock: true, transaction })
    if (rows.length === 0) return []
    await Session.update({ endedAt: parts.clock.now(), endReason: 'signed out' }, { where, transaction })
    const change = { action: 'session.endFromAfar', entity: 'person', entityId: personId }
    await recordAudit(parts, { ...change, personId: by, after: { sessions: rows.length } }, transaction)
    return rows.map(({ id }) => id)
  })
  for (const sessionId of ids) parts.bus.publish('session.ended', { sessionId })
  return ids.length
}
