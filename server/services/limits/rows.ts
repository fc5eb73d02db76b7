/** Limits with the version in force, as the judges read them. Versions never change, so each is checked once. */
import type { Sequelize, Transaction } from 'sequelize'
import { condition, recipients, timeSpan } from '../../../shared/schemas/limit.ts'
import type {
  Condition,
  LimitClass,
  Priority,
  Recipients,
  SubjectKind,
  TimeSpan,
} from '../../../shared/schemas/limit.ts'
import { select } from '../../models/sql.ts'
import type { SqlValues } from '../../models/sql.ts'

export interface LimitInForce {
  limitId: number
  subjectKind: SubjectKind
  subjectId: number | null
  limitClass: LimitClass
  versionId: number
  title: string | null
  condition: Condition
  priority: Priority
  recipients: Recipients
  schedule: TimeSpan | null
  toCheck: string
  isPublished: boolean
  isOutOfService: boolean
  subjectName: string
  subjectCode: string
  /** Of the station, or of a place that is retired: limits are suppressed by design while it is not active. */
  stationState: 'active' | 'maintenance' | 'retired' | null
  staleAfterSeconds: number | null
}

interface StoredLimit extends Omit<
  LimitInForce,
  'condition' | 'recipients' | 'schedule' | 'isPublished' | 'isOutOfService'
> {
  condition: unknown
  steps: unknown
  schedule: unknown
  isPublished: number
  outOfServiceAt: Date | null
}

type Content = Pick<LimitInForce, 'condition' | 'recipients' | 'schedule'>

/** Of each database of the process. */
const contents = new WeakMap<Sequelize, Map<number, Content>>()
const mostKept = 20_000

/** JSON columns come as text or taken apart, as the driver sees fit. */
export const fromJson = (stored: unknown): unknown => (typeof stored === 'string' ? JSON.parse(stored) : stored)

function contentOf(sequelize: Sequelize, row: StoredLimit): Content {
  const known = contents.get(sequelize) ?? new Map<number, Content>()
  contents.set(sequelize, known)
  const kept = known.get(row.versionId)
  if (kept) return kept
  const content: Content = {
    condition: condition.parse(fromJson(row.condition)),
    recipients: recipients.parse(fromJson(row.steps)),
    schedule: timeSpan.nullable().parse(fromJson(row.schedule)),
  }
  if (known.size >= mostKept) known.clear()
  known.set(row.versionId, content)
  return content
}

/** A place may be fed by any station: it is stale when the most patient of them would be. */
const longestStale = 'SELECT MAX(staleAfterSeconds) FROM stations WHERE retiredAt IS NULL'

const selected = `
  SELECT l.id AS limitId, l.subjectKind, l.subjectId, l.limitClass, l.outOfServiceAt, v.id AS versionId, v.title,
    v.condition, v.priority, v.steps, v.schedule, v.toCheck, v.isPublished,
    COALESCE(s.name, p.name, 'Offing itself') AS subjectName, COALESCE(s.code, p.code, 'SYSTEM') AS subjectCode,
    COALESCE(s.state, IF(p.retiredAt IS NULL, NULL, 'retired')) AS stationState,
    COALESCE(s.staleAfterSeconds, IF(p.id IS NULL, NULL, (${longestStale}))) AS staleAfterSeconds
  FROM limits l JOIN limitVersions v ON v.id = l.currentVersionId
    LEFT JOIN stations s ON l.subjectKind = 'station' AND s.id = l.subjectId
    LEFT JOIN places p ON l.subjectKind = 'place' AND p.id = l.subjectId`

/** `which` is a condition on `l`; retired limits are left out. By id, the order in which they are locked. */
export async function limitsInForce(
  sequelize: Sequelize,
  which: string,
  values: SqlValues,
  transaction?: Transaction,
): Promise<LimitInForce[]> {
  const rows = await select<StoredLimit>(
    sequelize,
    `${selected} WHERE l.retiredAt IS NULL AND ${which} ORDER BY l.id`,
    values,
    transaction,
  )
  return rows.map((row) => {
    const { outOfServiceAt, isPublished, condition: _, steps: __, schedule: ___, ...rest } = row
    const flags = { isOutOfService: outOfServiceAt !== null, isPublished: Boolean(isPublished) }
    return { ...rest, ...flags, ...contentOf(sequelize, row) }
  })
}
