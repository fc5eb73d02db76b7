/** The design logic: limits of a station in maintenance or out of their schedule are suppressed, and return by themselves. */
import { isWithin } from '../../../shared/alerts/timeSpan.ts'
import type { LimitInForce } from '../limits/rows.ts'
import type { Desk, HeldState } from './desk.ts'
import { happen } from './lifecycle.ts'

/** Why a limit is suppressed at a moment; null: it is not. */
export function suppressedBecause(limit: LimitInForce, at: number, timeZone: string): string | null {
  if (limit.stationState === 'maintenance') return 'Station in maintenance'
  if (limit.stationState === 'retired') return 'Station out of service'
  return isWithin(limit.schedule, at, timeZone) ? null : 'Outside its schedule'
}

export const isSuppressed = (limit: LimitInForce, at: number, timeZone: string): boolean =>
  suppressedBecause(limit, at, timeZone) !== null

/** Brings the state in line with the design logic; answers whether something happened. */
export async function followDesign(
  desk: Desk,
  limit: LimitInForce,
  held: HeldState,
  isShelved: boolean,
): Promise<boolean> {
  const because = suppressedBecause(limit, desk.now, desk.office.timeZone)
  const isNow = held.state === 'suppressed'
  if ((because !== null) === isNow || held.state === 'outOfService') return false
  const cause = because !== null ? 'suppress' : 'resume'
  const facts = { isShelved, isSuppressed: because !== null }
  const at = held.lastWindowEndsAt ?? desk.now
  return happen(desk, limit, held, { cause, facts, at, sea: null, personId: null, note: because })
}
