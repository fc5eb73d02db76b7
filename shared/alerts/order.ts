/** The order in which alerts are shown, everywhere the same. Pure. */
import type { AlertView } from '../schemas/alert.ts'
import type { AlertState, Priority } from '../schemas/limit.ts'

/** Active not acknowledged, active acknowledged, cleared not acknowledged, shelved, suppressed, out of service, over. */
const ranks: Record<AlertState, number> = {
  unacknowledgedActive: 0,
  acknowledgedActive: 1,
  returnedUnacknowledged: 2,
  latchedUnacknowledged: 2,
  latchedAcknowledged: 2,
  shelved: 3,
  suppressed: 4,
  outOfService: 5,
  normal: 6,
}
const priorityRanks: Record<Priority, number> = { urgent: 0, high: 1, medium: 2, low: 3 }

type Ordered = Pick<AlertView, 'id' | 'state' | 'priority' | 'raisedAt'>

/** For `sort`: by state, in it by priority, newest first. */
export const byUrgency = (a: Ordered, b: Ordered): number =>
  ranks[a.state] - ranks[b.state] ||
  priorityRanks[a.priority] - priorityRanks[b.priority] ||
  Date.parse(b.raisedAt) - Date.parse(a.raisedAt) ||
  b.id - a.id

/** More than ten announced within ten minutes are a flood; it ends when fewer than five were (ISA-18.2-2016). */
export const floodSpanMs = 600_000
export const floodBegins = 10
export const floodEnds = 5

/** Since when a flood runs at `now`, from the times of announcement rising (ms); null: none. */
export function floodSince(announced: number[], now: number): number | null {
  let since: number | null = null
  let first = 0
  for (let n = 0; n < announced.length; n += 1) {
    const at = announced[n]
    while (announced[first] <= at - floodSpanMs) first += 1
    const count = n - first + 1
    if (since !== null && count < floodEnds) since = null
    if (since === null && count > floodBegins) since = announced[first]
  }
  const lately = announced.filter((at) => at > now - floodSpanMs).length
  return since !== null && lately >= floodEnds ? since : null
}
