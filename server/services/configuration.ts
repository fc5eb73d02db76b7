/** The whole configuration: as one text, compared with another, put in force as a whole, and taken back as a whole. */
import { createHash } from 'node:crypto'
import { appliedKinds, changesBetween, stableText } from '../../shared/configuration/compare.ts'
import type { ConfigurationContent } from '../../shared/configuration/compare.ts'
import { configuration } from '../../shared/schemas/configuration.ts'
import type {
  AppliedConfiguration,
  Comparison,
  Configuration,
  ConfigurationOrder,
} from '../../shared/schemas/configuration.ts'
import type { Parts } from '../config/parts.ts'
import { softwareVersion } from '../config/softwareVersion.ts'
import { ConfigurationRun, Person } from '../models/index.ts'
import { recordAudit } from './audit.ts'
import { applyChanges, takeBack } from './configuration/apply.ts'
import { readContent } from './configuration/read.ts'
import { notFound, Refused } from './problems.ts'
import { inTransaction } from './transaction.ts'

export async function exportConfiguration(parts: Parts): Promise<string> {
  return stableText(wrapped(parts, await readContent(parts)))
}

const wrapped = ({ clock }: Pick<Parts, 'clock'>, content: ConfigurationContent): Configuration => ({
  format: 'offing.configuration.1',
  exportedAt: clock.now().toISOString(),
  software: softwareVersion,
  ...content,
})

/** As a file says it: times are text, and what is not there is not there. */
const asWritten = (content: ConfigurationContent): ConfigurationContent => JSON.parse(JSON.stringify(content))

const basisOf = (content: ConfigurationContent): string =>
  createHash('sha256').update(stableText(content)).digest('hex')

export async function compareConfiguration(parts: Parts, file: Configuration): Promise<Comparison> {
  const now = asWritten(await readContent(parts))
  return { changes: changesBetween(now, file), basis: basisOf(now) }
}

/** All of it or nothing; what stood before is kept, so that it can be taken back. */
export async function applyConfiguration(
  parts: Parts,
  { file, basis, reason }: ConfigurationOrder,
  personId: number,
): Promise<AppliedConfiguration> {
  const { id, touched } = await inTransaction(parts.sequelize, async (transaction) => {
    const before = asWritten(await readContent(parts, transaction))
    if (basisOf(before) !== basis) throw changedSinceCompared()
    const changes = changesBetween(before, file).filter(({ applies }) => applies)
    if (changes.length === 0) throw nothingToDo()
    const people = await applyChanges(parts, file, changes, { personId, reason }, transaction)
    const run = await ConfigurationRun.create(
      { at: parts.clock.now(), personId, reason, changes, before: wrapped(parts, before), rolledBackAt: null },
      { transaction },
    )
    const change = { action: 'configuration.apply', entity: 'configuration', entityId: run.id }
    const after = { reason, changes: changes.map(({ kind, key, what }) => `${what} ${kind} ${key}`) }
    await recordAudit(parts, { ...change, personId, after }, transaction)
    return { id: run.id, touched: people }
  })
  for (const one of touched) parts.bus.publish('person.changed', { personId: one })
  return readApplied(id)
}

/** The newest that still stands: what it changed becomes again what it was, if nobody has changed it since. */
export async function rollBackConfiguration(
  parts: Parts,
  id: number,
  reason: string,
  personId: number,
): Promise<AppliedConfiguration> {
  const touched = await inTransaction(parts.sequelize, async (transaction) => {
    const run = await ConfigurationRun.findByPk(id, { lock: true, transaction })
    if (!run) throw notFound('applied configuration', id)
    if (run.rolledBackAt) throw rolledBackBefore()
    const before = configuration.parse(run.before)
    const now = asWritten(await readContent(parts, transaction))
    // Only what this file changed: others' changes since then stay.
    const keys = new Set(run.changes.map(({ kind, key }) => `${kind} ${key}`))
    const changes = changesBetween(now, before).filter(({ kind, key }) => keys.has(`${kind} ${key}`))
    await takeBack(
      parts,
      run.changes.filter(({ what }) => what === 'add'),
      { personId, reason },
      transaction,
    )
    const back = changes.filter(({ applies }) => applies)
    const people = await applyChanges(parts, before, back, { personId, reason }, transaction)
    await run.update({ rolledBackAt: parts.clock.now() }, { transaction })
    const change = { action: 'configuration.rollBack', entity: 'configuration', entityId: id }
    await recordAudit(parts, { ...change, personId, after: { reason } }, transaction)
    return people
  })
  for (const one of touched) parts.bus.publish('person.changed', { personId: one })
  return readApplied(id)
}

export async function listApplied(): Promise<AppliedConfiguration[]> {
  const runs = await ConfigurationRun.findAll({
    order: [['id', 'DESC']],
    limit: 50,
    attributes: { exclude: ['before'] },
  })
  const people = await Person.findAll({ where: { id: runs.flatMap(({ personId }) => personId ?? []) } })
  return runs.map((run) => {
    const person = people.find(({ id }) => id === run.personId)
    return {
      id: run.id,
      at: run.at.toISOString(),
      person: person ? { id: person.id, name: person.name } : null,
      reason: run.reason,
      count: run.changes.length,
      rolledBackAt: run.rolledBackAt?.toISOString() ?? null,
    }
  })
}

async function readApplied(id: number): Promise<AppliedConfiguration> {
  const found = (await listApplied()).find((one) => one.id === id)
  if (!found) throw notFound('applied configuration', id)
  return found
}

const kindsWords = appliedKinds.join(', ')

const changedSinceCompared = (): Refused =>
  new Refused({
    status: 409,
    code: 'configuration.changedSinceCompared',
    title: 'Changed since it was compared',
    detail: 'Something was changed here after the file was compared. Nothing was put in force: compare it again.',
  })

const nothingToDo = (): Refused =>
  new Refused({
    status: 409,
    code: 'configuration.nothingToDo',
    title: 'Nothing to put in force',
    detail: `In ${kindsWords} this file says what holds already.`,
  })

const rolledBackBefore = (): Refused =>
  new Refused({
    status: 409,
    code: 'configuration.rolledBack',
    title: 'Taken back before',
    detail: 'What this file changed was taken back already.',
  })
