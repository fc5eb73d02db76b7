/** The daily e-mail and the rules of the watch as operators and administrators see and change them. */
import type { Transaction } from 'sequelize'
import type { DailyEmail, DailyEmailView, WatchRules, WatchRulesView } from '../../../shared/schemas/watchRules.ts'
import type { Parts } from '../../config/parts.ts'
import { DistributionList, Person, SettingVersion } from '../../models/index.ts'
import { changedMeanwhile, invalidInput } from '../problems.ts'
import { changeSetting, settingInForce } from '../settings.ts'
import type { SettingGroup } from '../settings.ts'
import { inTransaction } from '../transaction.ts'

interface Change<Content> {
  version: number
  content: Content
  reason: string
  personId: number
}

/** Versions are never edited, so their number is the version; 1 is what holds until somebody has set it. */
async function inForce(groupName: SettingGroup) {
  const rows = await SettingVersion.findAll({ where: { groupName }, order: [['id', 'DESC']] })
  const [newest] = rows
  const author = newest?.authorId ? await Person.findByPk(newest.authorId, { attributes: ['id', 'name'] }) : null
  return {
    version: rows.length + 1,
    since: newest?.validFrom.toISOString() ?? null,
    by: author ? { id: author.id, name: author.name } : null,
    reason: newest?.reason ?? null,
  }
}

async function holdVersion(groupName: SettingGroup, version: number, transaction: Transaction): Promise<void> {
  const rows = await SettingVersion.findAll({ where: { groupName }, lock: true, transaction })
  if (rows.length + 1 !== version) throw changedMeanwhile('setting', rows.length + 1)
}

export async function readDailyEmail(parts: Parts): Promise<DailyEmailView> {
  return { ...(await inForce('mail')), content: await settingInForce(parts, 'mail') }
}

export async function changeDailyEmail(parts: Parts, change: Change<DailyEmail>): Promise<DailyEmailView> {
  const { version, content, reason, personId } = change
  await inTransaction(parts.sequelize, async (transaction) => {
    await holdVersion('mail', version, transaction)
    const { heartbeatListId } = content
    const where = { id: heartbeatListId ?? 0, retiredAt: null }
    if (heartbeatListId !== null && !(await DistributionList.findOne({ where, transaction }))) {
      throw invalidInput([{ path: 'content.heartbeatListId', message: 'is no list in use' }])
    }
    await changeSetting(parts, 'mail', content, { personId, reason }, transaction)
  })
  return readDailyEmail(parts)
}

export async function readWatchRules(parts: Parts): Promise<WatchRulesView> {
  const { asksSecondPerson, longestShelfHours } = await settingInForce(parts, 'alerts')
  return { ...(await inForce('alerts')), content: { asksSecondPerson, longestShelfHours } }
}

/** What else stands in the group stays as it is. */
export async function changeWatchRules(parts: Parts, change: Change<WatchRules>): Promise<WatchRulesView> {
  const { version, content, reason, personId } = change
  await inTransaction(parts.sequelize, async (transaction) => {
    await holdVersion('alerts', version, transaction)
    const before = await settingInForce(parts, 'alerts', transaction)
    await changeSetting(parts, 'alerts', { ...before, ...content }, { personId, reason }, transaction)
  })
  return readWatchRules(parts)
}
