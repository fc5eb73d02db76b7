/** What time alone changes: shelves that end, seasons that begin and end, stations that go into maintenance. */
import type { Parts } from '../../config/parts.ts'
import { select } from '../../models/sql.ts'
import { limitsInForce } from '../limits/rows.ts'
import type { LimitInForce } from '../limits/rows.ts'
import { followDesign, isSuppressed } from './design.ts'
import { atDesk, holdStates, keepStates } from './desk.ts'
import { happen } from './lifecycle.ts'
import type { Office } from './office.ts'
import { endShelvings, shelvedAmong } from './shelves.ts'

/** Each limit in its own transaction; what is asked without a lock is asked again with it. */
export async function keepTimers(parts: Parts, office: Office): Promise<void> {
  const now = parts.clock.now().getTime()
  const expired = await select<{ limitId: number }>(
    parts.sequelize,
    'SELECT DISTINCT limitId FROM shelvings WHERE endedAt IS NULL AND endsAt <= :now',
    { now: new Date(now) },
  )
  const isOver = new Set(expired.map(({ limitId }) => limitId))
  const states = await select<{ limitId: number; state: string }>(
    parts.sequelize,
    'SELECT limitId, state FROM limitStates',
  )
  const stateOf = new Map(states.map(({ limitId, state }) => [limitId, state]))
  for (const limit of await limitsInForce(parts.sequelize, 'TRUE', {})) {
    const state = stateOf.get(limit.limitId)
    const wantsDesign =
      state !== 'outOfService' && (state === 'suppressed') !== isSuppressed(limit, now, office.timeZone)
    if (isOver.has(limit.limitId) || wantsDesign) await keepTimersOf(parts, office, limit, isOver.has(limit.limitId))
  }
}

const keepTimersOf = (parts: Parts, office: Office, limit: LimitInForce, isExpired: boolean): Promise<void> =>
  atDesk(parts, office, async (desk) => {
    const held = (await holdStates(desk, [limit.limitId])).get(limit.limitId)
    if (!held) return
    const isShelved = (await shelvedAmong(desk, [limit.limitId])).has(limit.limitId)
    await followDesign(desk, limit, held, isShelved)
    if (isExpired && !isShelved) {
      await endShelvings(desk, limit.limitId, null)
      const facts = { isShelved: false, isSuppressed: isSuppressed(limit, desk.now, office.timeZone) }
      const at = held.lastWindowEndsAt ?? desk.now
      const happening = { cause: 'unshelve', facts, at, sea: null, personId: null, note: null } as const
      await happen(desk, limit, held, { ...happening, eventKind: 'shelfExpired' })
    }
    await keepStates(desk, [held])
  })
