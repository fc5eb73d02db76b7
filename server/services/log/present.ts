/** Lines of the log as they are shown, with what was added to them since. */
import { z } from 'zod'
import { logEntryView, logKind, logMark } from '../../../shared/schemas/watchLog.ts'
import type { LogEntryView } from '../../../shared/schemas/watchLog.ts'
import { Attachment, LogEntry, Person } from '../../models/index.ts'

const figuresShape = logEntryView.shape.figures
const linksShape = z.record(z.string(), z.union([z.number(), z.string()]))

/** Whatever stands in an old line, the page gets a shape it knows. */
const parsed = <Shape extends z.ZodType>(shape: Shape, value: unknown): z.output<Shape> | null => {
  const result = shape.safeParse(value)
  return result.success ? result.data : null
}

/** Lines of features without a kind of their own are the program's. */
const kindOf = ({ kind, personId }: LogEntry): LogEntryView['kind'] =>
  parsed(logKind, kind) ?? (personId === null ? 'system' : 'entry')

export async function presentEntries(rows: LogEntry[]): Promise<LogEntryView[]> {
  const ids = rows.map(({ id }) => id)
  if (ids.length === 0) return []
  const [people, corrected, corrections, attachments] = await Promise.all([
    Person.findAll({ where: { id: rows.flatMap(({ personId }) => personId ?? []) }, attributes: ['id', 'name'] }),
    LogEntry.findAll({ where: { id: rows.flatMap(({ correctsId }) => correctsId ?? []) }, attributes: ['id', 'at'] }),
    LogEntry.findAll({ where: { correctsId: ids }, attributes: ['id', 'at', 'correctsId'], order: [['id', 'ASC']] }),
    Attachment.findAll({ where: { entryId: ids }, order: [['id', 'ASC']] }),
  ])
  const other = ({ id, at }: LogEntry) => ({ id: Number(id), at: at.toISOString() })
  const named = new Map(people.map(({ id, name }) => [id, name]))
  return rows.map((row) => {
    const first = corrected.find(({ id }) => id === row.correctsId)
    return {
      id: Number(row.id),
      at: row.at.toISOString(),
      kind: kindOf(row),
      person:
        row.personId === null ? null : { id: row.personId, name: named.get(row.personId) ?? `Person ${row.personId}` },
      text: row.text,
      figures: parsed(figuresShape, row.figures),
      mark: parsed(logMark, row.figures),
      corrects: first ? other(first) : null,
      correctedBy: corrections.filter(({ correctsId }) => correctsId === row.id).map(other),
      links: parsed(linksShape, row.links) ?? {},
      attachments: attachments
        .filter(({ entryId }) => entryId === row.id)
        .map(({ id, name, mediaType, bytes, sha256 }) => ({ id, name, mediaType, bytes, sha256 })),
    }
  })
}
