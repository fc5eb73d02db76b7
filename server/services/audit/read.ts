/** The audit as it is looked at: filtered, newest first, by pages or as a file. */
import { Op } from 'sequelize'
import type { WhereOptions } from 'sequelize'
import { differences } from '../../../shared/audit/differences.ts'
import { toCsv } from '../../../shared/csv.ts'
import type { AuditChoices, AuditFilter, AuditPage, AuditView } from '../../../shared/schemas/audit.ts'
import type { Parts } from '../../config/parts.ts'
import { Audit, Person } from '../../models/index.ts'
import { select } from '../../models/sql.ts'

const aPage = 50
const longestFile = 50_000

function whereOf({ personId, entity, action, from, to }: AuditFilter): WhereOptions<Audit> {
  return {
    ...(personId !== null && { personId: personId === 0 ? null : personId }),
    ...(entity !== null && { entity }),
    ...(action !== null && { action }),
    ...((from || to) && { at: { ...(from && { [Op.gte]: from }), ...(to && { [Op.lt]: to }) } }),
  }
}

/** `before`: the last id of the page before. */
export async function listAudits(filter: AuditFilter, before: number | null): Promise<AuditPage> {
  const where = whereOf(filter)
  const rows = await Audit.findAll({
    where: before === null ? where : { [Op.and]: [where, { id: { [Op.lt]: before } }] },
    order: [['id', 'DESC']],
    limit: aPage + 1,
  })
  const page = rows.slice(0, aPage)
  return {
    audits: await present(page),
    next: rows.length > aPage ? (page.at(-1)?.id ?? null) : null,
    total: await Audit.count({ where }),
  }
}

async function present(rows: Audit[]): Promise<AuditView[]> {
  const ids = [...new Set(rows.flatMap(({ personId }) => personId ?? []))]
  const people = await Person.findAll({ where: { id: ids }, attributes: ['id', 'name'] })
  const names = new Map(people.map(({ id, name }) => [id, name]))
  return rows.map(({ id, at, personId, action, entity, entityId, before, after, sealNumber }) => ({
    ...{ id, action, entity, entityId, before, after, sealNumber },
    at: at.toISOString(),
    person: personId === null ? null : { id: personId, name: names.get(personId) ?? `person ${personId}` },
  }))
}

export async function readAuditChoices({ sequelize }: Pick<Parts, 'sequelize'>): Promise<AuditChoices> {
  const [people, entities, actions] = await Promise.all([
    select<{ id: number; name: string }>(
      sequelize,
      'SELECT id, name FROM people WHERE id IN (SELECT DISTINCT personId FROM audits) ORDER BY name',
    ),
    select<{ entity: string }>(sequelize, 'SELECT DISTINCT entity FROM audits ORDER BY entity'),
    select<{ action: string }>(sequelize, 'SELECT DISTINCT action FROM audits ORDER BY action'),
  ])
  return { people, entities: entities.map(({ entity }) => entity), actions: actions.map(({ action }) => action) }
}

/** One row a changed field, newest first; a longer audit is asked for in spans. Cells that a spreadsheet would run are guarded. */
export async function writeAuditFile(filter: AuditFilter): Promise<string> {
  const rows = await Audit.findAll({ where: whereOf(filter), order: [['id', 'DESC']], limit: longestFile })
  const views = await present(rows)
  const heading = ['time', 'person', 'action', 'entity', 'entity_id', 'seal_number', 'field', 'before', 'after']
  return toCsv([
    heading,
    ...views.flatMap(({ at, person, action, entity, entityId, sealNumber, before, after }) => {
      const common = [at, person?.name ?? 'the program', action, entity, entityId, sealNumber]
      const changes = differences(before, after)
      if (changes.length === 0) return [[...common, null, null, null]]
      return changes.map((one) => [...common, one.path, one.before, one.after])
    }),
  ])
}
