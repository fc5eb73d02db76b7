/** What an administrator sees of each account; nothing of it is a secret. */
import { fn, col, Op } from 'sequelize'
import type { AccountState, AccountView } from '../../../shared/schemas/account.ts'
import type { Parts } from '../../config/parts.ts'
import { LinkToken } from '../../models/index.ts'
import type { Person } from '../../models/index.ts'
import { select } from '../../models/sql.ts'
import { linkKinds } from './sendLink.ts'

interface Seen {
  personId: number
  open: number
  lastSeenAt: Date | null
}

const idleHours = 12

export async function presentAccounts({ clock, sequelize }: Parts, people: Person[]): Promise<AccountView[]> {
  const ids = people.map(({ id }) => id)
  if (ids.length === 0) return []
  const now = clock.now()
  const [seen, links] = await Promise.all([
    select<Seen>(
      sequelize,
      `SELECT personId, MAX(lastSeenAt) AS lastSeenAt,
              CAST(SUM(endedAt IS NULL AND lastSeenAt >= :since) AS UNSIGNED) AS open
       FROM sessions WHERE personId IN (:ids) GROUP BY personId`,
      { ids, since: new Date(now.getTime() - idleHours * 3_600_000) },
    ),
    LinkToken.findAll({
      where: { personId: ids, kind: linkKinds, usedAt: null, expiresAt: { [Op.gt]: now } },
      attributes: ['personId', [fn('MAX', col('expiresAt')), 'expiresAt']],
      group: ['personId'],
    }),
  ])
  return people.map((person) => {
    const { id, version, name, email, role, team, timeZone } = person
    const of = seen.find(({ personId }) => personId === id)
    const linkUntil = links.find(({ personId }) => personId === id)?.expiresAt.toISOString() ?? null
    return {
      ...{ id, version, name, email, role, team, timeZone, linkUntil },
      state: stateOf(person, linkUntil !== null),
      disabledAt: person.disabledAt?.toISOString() ?? null,
      hasPassphrase: person.passwordHash !== null,
      hasSecondFactor: person.totpSince !== null,
      signedInOn: Number(of?.open ?? 0),
      lastSeenAt: of?.lastSeenAt?.toISOString() ?? null,
    }
  })
}

function stateOf(person: Person, hasLink: boolean): AccountState {
  if (person.disabledAt) return 'disabled'
  if (!person.role) return 'mailOnly'
  if (person.passwordHash !== null) return 'active'
  return hasLink ? 'invited' : 'linkEnded'
}
