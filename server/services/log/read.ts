import { Op, literal, where } from 'sequelize'
import type { WhereOptions } from 'sequelize'
import type { LogEntryView, LogKind } from '../../../shared/schemas/watchLog.ts'
import { LogEntry } from '../../models/index.ts'
import { notFound } from '../problems.ts'
import { presentEntries } from './present.ts'

export interface LogQuestion {
  /** Id of the last line of the page before. */
  before?: number
  kind?: LogKind
  personId?: number
  alertId?: number
  /** ISO 8601, the first included, the second not. */
  from?: string
  to?: string
  /** Looked for in the text, as it is written. */
  text?: string
}

const aPage = 60

const literally = (text: string): string => text.replace(/[\\%_]/g, (sign) => `\\${sign}`)

function conditionsOf({ before, kind, personId, alertId, from, to, text }: LogQuestion): WhereOptions<LogEntry>[] {
  const conditions: WhereOptions<LogEntry>[] = []
  if (before !== undefined) conditions.push({ id: { [Op.lt]: before } })
  if (kind !== undefined) conditions.push({ kind })
  if (personId !== undefined) conditions.push({ personId })
  // A number by its shape: nothing of the question is written into the statement as text.
  if (alertId !== undefined)
    conditions.push(where(literal("JSON_VALUE(`links`, '$.alertId')"), String(Math.trunc(alertId))))
  if (from !== undefined) conditions.push({ at: { [Op.gte]: new Date(from) } })
  if (to !== undefined) conditions.push({ at: { [Op.lt]: new Date(to) } })
  if (text) conditions.push({ text: { [Op.like]: `%${literally(text)}%` } })
  return conditions
}

/** Newest first, by the order of writing. */
export async function readLog(question: LogQuestion): Promise<{ entries: LogEntryView[]; next: number | null }> {
  const rows = await LogEntry.findAll({
    where: { [Op.and]: conditionsOf(question) },
    order: [['id', 'DESC']],
    limit: aPage + 1,
  })
  const page = rows.slice(0, aPage)
  const last = page.at(-1)
  return { entries: await presentEntries(page), next: rows.length > aPage && last ? Number(last.id) : null }
}

/** Throws the 404. */
export async function readEntry(entryId: number): Promise<LogEntryView> {
  const row = await LogEntry.findByPk(entryId)
  const [view] = row ? await presentEntries([row]) : []
  if (!view) throw notFound('log entry', entryId)
  return view
}

/** The last lines, oldest first: numbers are given before their transactions end, so the newest id alone is no watermark. */
export async function newestLog(count: number): Promise<LogEntryView[]> {
  const rows = await LogEntry.findAll({ order: [['id', 'DESC']], limit: count })
  return presentEntries(rows.reverse())
}

const changeKinds: LogKind[] = ['limit', 'station', 'place']

/** Lines about changes of what is watched and how, newest first. */
export async function changesSince(since: Date): Promise<LogEntryView[]> {
  const where = { at: { [Op.gte]: since }, kind: changeKinds }
  return presentEntries(await LogEntry.findAll({ where, order: [['id', 'DESC']], limit: 100 }))
}
