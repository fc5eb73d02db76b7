/** Versions of each group of settings: read, changed from the newest, put back to an older content. */
import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import type { SettingChange, SettingReturn, SettingVersionView } from '../../../shared/schemas/settingGroups.ts'
import type { Parts } from '../../config/parts.ts'
import { Person, SettingVersion } from '../../models/index.ts'
import { changedMeanwhile, invalidInput, notFound } from '../problems.ts'
import { changeSetting, initialSettings, settingGroups, shapeOf } from '../settings.ts'
import type { SettingGroup } from '../settings.ts'
import { inTransaction } from '../transaction.ts'

export function groupNamed(name: string): SettingGroup {
  const group = settingGroups.find((one) => one === name)
  if (!group) throw notFound('group of settings', name.slice(0, 40))
  return group
}

/** What holds now, of every group. */
export async function listSettings(parts: Parts): Promise<SettingVersionView[]> {
  return Promise.all(settingGroups.map(async (group) => newestOf(await readVersions(parts, group))))
}

const newestOf = (versions: SettingVersionView[]): SettingVersionView => {
  const [newest] = versions
  if (!newest) throw new Error('a group has a first version always')
  return newest
}

/** Newest first; the last is what held before anybody set it. What begins later is not among them. */
export async function readVersions(
  { clock }: Pick<Parts, 'clock'>,
  group: SettingGroup,
  transaction?: Transaction,
): Promise<SettingVersionView[]> {
  const rows = await SettingVersion.findAll({
    where: { groupName: group, validFrom: { [Op.lte]: clock.now() } },
    order: [
      ['validFrom', 'ASC'],
      ['id', 'ASC'],
    ],
    ...(transaction && { transaction }),
  })
  const people = await Person.findAll({
    where: { id: rows.flatMap(({ authorId }) => authorId ?? []) },
    attributes: ['id', 'name'],
    ...(transaction && { transaction }),
  })
  const first = {
    group,
    number: 1,
    content: { ...initialSettings[group] },
    validFrom: null,
    author: null,
    reason: null,
  }
  const set = rows.map((row, index) => {
    const author = people.find(({ id }) => id === row.authorId)
    return {
      ...{ group, number: index + 2, content: row.content, reason: row.reason },
      validFrom: row.validFrom.toISOString(),
      author: author ? { id: author.id, name: author.name } : null,
    }
  })
  return [first, ...set].reverse()
}

interface By {
  personId: number
  /** The version from which the change was made. */
  version: number
}

export function changeSettings(parts: Parts, name: string, change: SettingChange, by: By): Promise<SettingVersionView> {
  const group = groupNamed(name)
  return putInForce(parts, group, by, change.reason, () => change.content)
}

export function returnSettings(parts: Parts, name: string, to: SettingReturn, by: By): Promise<SettingVersionView> {
  const group = groupNamed(name)
  return putInForce(parts, group, by, to.reason, (versions) => {
    const wanted = versions.find(({ number }) => number === to.number)
    if (!wanted) throw notFound(`version of ${group}`, to.number)
    return wanted.content
  })
}

async function putInForce(
  parts: Parts,
  group: SettingGroup,
  { personId, version }: By,
  reason: string,
  contentOf: (versions: SettingVersionView[]) => unknown,
): Promise<SettingVersionView> {
  return inTransaction(parts.sequelize, async (transaction) => {
    // Two administrators at once: the second waits here, and then finds the first one's version.
    await SettingVersion.findAll({ where: { groupName: group }, attributes: ['id'], lock: true, transaction })
    const versions = await readVersions(parts, group, transaction)
    const newest = newestOf(versions)
    if (newest.number !== version) throw changedMeanwhile('settings', newest.number, newest)
    await putContent(parts, group, contentOf(versions), { personId, reason }, transaction)
    return newestOf(await readVersions(parts, group, transaction))
  })
}

/** Checks the content by the group's own shape; the faults name their fields. */
export async function putContent<Group extends SettingGroup>(
  parts: Pick<Parts, 'clock'>,
  group: Group,
  content: unknown,
  by: { personId: number; reason: string },
  transaction: Transaction,
): Promise<void> {
  const parsed = shapeOf[group].safeParse(content)
  if (!parsed.success) {
    const faults = parsed.error.issues.map(({ path, message }) => ({ path: path.join('.'), message }))
    throw invalidInput(faults)
  }
  await changeSetting(parts, group, parsed.data, by, transaction)
}
