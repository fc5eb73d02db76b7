/** What of a place's limits is shown beside its name, and in words under its figure. Pure. */
import type { PlaceLimit, PlaceView } from '../../../shared/schemas/place.ts'
import type { AlertState, Priority } from '../../../shared/schemas/limit.ts'
import type { PlaceQuantityKey } from '../../../shared/schemas/placeQuantity.ts'
import { placeQuantityOf } from '../../../shared/places/quantities.ts'
import type { LivePlace } from '../../../shared/places/livePlace.ts'
import { momentUtc } from '../../../shared/times.ts'
import { isActive, priorityRank, stateRank } from '../../stores/alertOrder.ts'
import { numberOf, uncertaintyOf, unitOf, wordsOf } from './placeFigures.ts'

const worstFirst = (a: PlaceLimit, b: PlaceLimit): number =>
  stateRank[a.state] - stateRank[b.state] ||
  priorityRank[a.priority] - priorityRank[b.priority] ||
  a.limitId - b.limitId

/** Worst active before worst put aside; null where nothing is or was. */
export function placeMark({ limits }: Pick<PlaceView, 'limits'>): { priority: Priority; state: AlertState } | null {
  const [worst] = limits.filter(({ state }) => state !== 'normal').sort(worstFirst)
  return worst ? { priority: worst.priority, state: worst.state } : null
}

/** The limit that speaks for a quantity: the worst that is up, else the lowest line. */
export function limitOf({ limits }: Pick<PlaceView, 'limits'>, quantity: PlaceQuantityKey): PlaceLimit | null {
  const own = limits.filter((limit) => limit.quantity === quantity)
  const [worst] = own.filter(({ state }) => state !== 'normal').sort(worstFirst)
  return worst ?? own.sort((a, b) => (a.raise ?? Infinity) - (b.raise ?? Infinity))[0] ?? null
}

/** Alert colours stand on what alerts alone. */
export const alertingOf = (limit: PlaceLimit | null): Priority | null =>
  limit && isActive(limit.state) ? limit.priority : null

export interface LimitWords {
  words: string
  /** In strong ink: above, near, shelved. */
  isStrong: boolean
}

const line = (limit: PlaceLimit): string =>
  limit.raise === null ? 'limit' : `limit ${numberOf(limit.quantity, limit.raise)}`

/** `above limit 0.08 m, shelved until 18:00`, `near limit 2.5 m, ± 0.4`, `limit 1.00 m`, `no limit set`. */
export function limitWords(limit: PlaceLimit | null, picture: LivePlace, nowMs: number): LimitWords {
  if (!limit) return { words: 'no limit set', isStrong: false }
  const at = `${line(limit)} ${unitOf(limit.quantity)}`
  if (limit.state === 'shelved') {
    const until = limit.shelvedUntil ? ` until ${momentUtc(Date.parse(limit.shelvedUntil), nowMs)}` : ''
    return { words: `${limit.isActive ? 'above' : 'not above'} ${at}, shelved${until}`, isStrong: true }
  }
  if (limit.state === 'outOfService') return { words: `${at}, out of service: not judged`, isStrong: true }
  if (limit.state === 'suppressed') return { words: `${at}, suppressed by design`, isStrong: true }
  if (picture.kind === 'stale' || picture.kind === 'empty') return { words: `${at}: not judged`, isStrong: true }
  if (isActive(limit.state)) return { words: `above ${at}`, isStrong: true }
  if (limit.notJudged) return { words: `${at}: not judged`, isStrong: true }
  const found = picture.outlook.figures.find(({ quantity }) => quantity === limit.quantity)?.figure
  if (!found || found.value === null) return { words: `${at}: not judged`, isStrong: true }
  if (limit.raise !== null && isNear(found.value, found.sd, found.likely, limit.raise)) {
    const range = uncertaintyOf(limit.quantity, found)
    return { words: `near ${at}, ${range}`, isStrong: true }
  }
  return { words: at, isStrong: false }
}

/** Within one standard deviation, or the likely band, of a line that is not exceeded. */
function isNear(value: number, sd: number | null, likely: { from: number; to: number } | null, raise: number): boolean {
  if (likely) return raise >= likely.from && raise <= likely.to
  return sd !== null && Math.abs(raise - value) <= sd
}

/** Other quantities of the place that are over their limits: each takes a line of its own. */
export function othersOver(place: PlaceView, lead: PlaceQuantityKey): { words: string; priority: Priority }[] {
  return place.limits
    .filter((limit) => limit.quantity !== lead && isActive(limit.state))
    .sort(worstFirst)
    .map((limit) => {
      const value = place.outlook?.figures.find(({ quantity }) => quantity === limit.quantity)?.figure.value ?? null
      const { name } = placeQuantityOf(limit.quantity)
      return { words: `${name} ${wordsOf(limit.quantity, value)}, above ${line(limit)}`, priority: limit.priority }
    })
}
