/** Once a day an e-mail says that the program is there: its silence is news. */
import type { Transaction } from 'sequelize'
import { latestDailyMoment } from '../../../shared/dailyMoment.ts'
import { clockLocal, clockUtc, dateUtc } from '../../../shared/times.ts'
import type { Parts } from '../../config/parts.ts'
import { Person, Watermark } from '../../models/index.ts'
import { select } from '../../models/sql.ts'
import { inTransaction } from '../transaction.ts'
import { membersOf } from './people.ts'
import { writeMessage } from './write.ts'
import type { Recipient } from './write.ts'

export interface HeartbeatOrder {
  portName: string
  timeZone: string
  caution: string
  /** `07:00` by the port's clock. */
  clock: string
  /** Null: all operators and administrators. */
  listId: number | null
}

const watermark = { job: 'heartbeat', subjectKind: 'system', subjectId: 0 }

/** Where a day's moment has passed without it, one e-mail, however many days were missed. Answers the message or null. */
export async function writeDueHeartbeat(parts: Parts, order: HeartbeatOrder): Promise<number | null> {
  const now = parts.clock.now()
  const due = new Date(latestDailyMoment(order.clock, order.timeZone, now.getTime()))
  const messageId = await inTransaction(parts.sequelize, async (transaction) => {
    const done = await Watermark.findOne({ where: watermark, lock: true, transaction })
    if (!done) {
      // At the very first time the day's moment may be long over: the next one is the first.
      await Watermark.create({ ...watermark, doneUpTo: due, updatedAt: now }, { transaction })
      return null
    }
    if (done.doneUpTo && done.doneUpTo >= due) return null
    await done.update({ doneUpTo: due, updatedAt: now }, { transaction })
    const recipients = await readers(order, transaction)
    if (recipients.length === 0) return null
    const mark = parts.environment.installationKind === 'demonstration' ? 'DEMONSTRATION ' : ''
    const subject = `${mark}Daily e-mail of ${order.portName}: the watch program is running`
    const text = await textOf(parts, order, now.getTime(), transaction)
    return (await writeMessage(parts, { kind: 'heartbeat', subject, text }, transaction, recipients)).id
  })
  if (messageId !== null) parts.bus.publish('message.changed', { messageId, alertId: null })
  return messageId
}

/** A list that was emptied or taken out of use silences nothing: then it goes to operators and administrators. */
async function readers({ listId }: HeartbeatOrder, transaction: Transaction): Promise<Recipient[]> {
  const ids = listId === null ? [] : (await membersOf([listId], transaction)).map(({ personId }) => personId)
  const onList = ids.length === 0 ? [] : await withAddress({ id: ids }, transaction)
  return onList.length > 0 ? onList : withAddress({ role: ['operator', 'admin'] }, transaction)
}

async function withAddress(
  who: { id: number[] } | { role: ('operator' | 'admin')[] },
  transaction: Transaction,
): Promise<Recipient[]> {
  const people = await Person.findAll({ where: { ...who, disabledAt: null }, order: [['id', 'ASC']], transaction })
  return people.flatMap(({ id, email }) => (email ? [{ personId: id, address: email }] : []))
}

interface Counts {
  stations: number
  current: number
  limits: number
  open: number
  notOut: number
  /** Of the audit: kept in a mailbox, it shows later whether rows were cut off its end. */
  seal: number | null
  sealHash: string | null
}

const plural = (count: number, one: string, many: string): string => `${count} ${count === 1 ? one : many}`

async function textOf(
  { sequelize }: Parts,
  { portName, timeZone, clock, caution }: HeartbeatOrder,
  now: number,
  transaction: Transaction,
): Promise<string> {
  const [counts] = await select<Counts>(
    sequelize,
    `SELECT (SELECT COUNT(*) FROM stations WHERE retiredAt IS NULL) AS stations,
            (SELECT COUNT(*) FROM stations s WHERE retiredAt IS NULL AND EXISTS (
               SELECT 1 FROM estimates e WHERE e.stationId = s.id AND e.runId = 0
                 AND e.windowEndsAt > :now - INTERVAL s.staleAfterSeconds SECOND AND e.windowEndsAt <= :now)) AS current,
            (SELECT COUNT(*) FROM limits WHERE retiredAt IS NULL AND outOfServiceAt IS NULL) AS limits,
            (SELECT COUNT(*) FROM alerts WHERE closedAt IS NULL AND isExercise = 0) AS open,
            (SELECT COUNT(*) FROM deliveries
             WHERE state IN ('refused', 'givenUp', 'unknown') AND createdAt > :now - INTERVAL 1 DAY) AS notOut,
            (SELECT MAX(sealNumber) FROM audits) AS seal,
            (SELECT LOWER(HEX(hash)) FROM audits ORDER BY sealNumber DESC LIMIT 1) AS sealHash`,
    { now: new Date(now) },
    transaction,
  )
  const { stations, current, limits, open, notOut, seal, sealHash } = counts ?? {
    stations: 0,
    current: 0,
    limits: 0,
    open: 0,
    notOut: 0,
    seal: null,
    sealHash: null,
  }
  return [
    `The watch program of ${portName} is running and sends e-mails: ${dateUtc(now)}, ${clockUtc(now)} UTC, ${clockLocal(now, timeZone)} local.`,
    `It comes every day at ${clock} local. When it does not come, ask the harbour office: silence is news.`,
    '',
    `Stations with a current estimate: ${current} of ${stations}.`,
    `Limits in service: ${limits}. Alerts open: ${open}.`,
    `E-mails of the last 24 h that did not go out: ${plural(notOut, 'e-mail', 'e-mails')}.`,
    ...(seal && sealHash ? [`Newest seal of the audit: ${seal}, ${sealHash.slice(0, 16)}.`] : []),
    '',
    caution,
  ].join('\n')
}
