/** The sheet of a hand-over, filled in from what is known at the moment: pure, so that screen and signature show the same. */
import { stateWords } from '../alerts/describe.ts'
import { livePicture } from '../livePicture.ts'
import { termOf } from '../bulletins/term.ts'
import type { BulletinView } from '../schemas/bulletin.ts'
import type { LimitView } from '../schemas/limit.ts'
import type { PlaceView } from '../schemas/place.ts'
import type { StationView } from '../schemas/station.ts'
import type { CarriedItem, HandOverSheet, RotaWatch } from '../schemas/watch.ts'
import type { LogEntryView } from '../schemas/watchLog.ts'
import { clockUtc } from '../times.ts'
import { age } from '../units.ts'
import { nextRotaWatch } from './rota.ts'

export interface SheetFacts {
  watchId: number | null
  sea: HandOverSheet['sea']
  limits: readonly LimitView[]
  stations: readonly StationView[]
  places: readonly PlaceView[]
  bulletins: readonly BulletinView[]
  /** E-mails that have not reached the mail server, and since when. */
  messagesNotOut: { count: number; since: string | null }
  /** Since the watch began. */
  log: readonly LogEntryView[]
  notes: Record<string, string>
  expected: string
  rota: readonly RotaWatch[]
  timeZone: string
  /** ms since 1970 UTC. */
  now: number
}

type Blank = Omit<CarriedItem, 'note'>

const clockOf = (at: string): string => `${clockUtc(Date.parse(at))} UTC`

function limitItems(limits: readonly LimitView[]): Blank[] {
  return limits
    .filter(({ state, retiredAt }) => state !== 'normal' && retiredAt === null)
    .map((limit) => {
      const { id, title, state, shelf, outOfService, openAlertId, current } = limit
      const mark = { priority: current.content.priority, state }
      const common = { title, mark, alertId: openAlertId }
      if (shelf) {
        const active = limit.isActive ? 'above its limit, shelf' : 'shelf'
        return { ...common, key: `limit:${id}`, kind: 'shelved', state: `${active} ends ${clockOf(shelf.endsAt)}` }
      }
      if (outOfService) {
        return { ...common, key: `limit:${id}`, kind: 'outOfService', state: `out of service: ${outOfService.reason}` }
      }
      const key = openAlertId === null ? `limit:${id}` : `alert:${openAlertId}`
      return { ...common, key, kind: 'alert', state: stateWords[state].toLowerCase() }
    })
}

function stationItems(stations: readonly StationView[], now: number): Blank[] {
  return stations.flatMap((station) => {
    const { id, name } = station
    const item = (state: string): Blank[] => [
      { key: `station:${id}`, kind: 'station', title: name, state, mark: null, alertId: null },
    ]
    if (station.state === 'retired') return []
    if (station.state === 'maintenance') return item('under maintenance, alerts suppressed by design')
    const picture = livePicture(station, now)
    if (picture.kind === 'stale') return item(`stale ${age(picture.ageSeconds)}`)
    if (picture.kind === 'empty') return item('has never sent anything')
    return picture.kind === 'frozen' ? item('frozen, geometry doubtful') : []
  })
}

const noticeItems = (places: readonly PlaceView[]): Blank[] =>
  places.flatMap(({ name, notices }) =>
    notices
      .filter(({ kind, state }) => kind !== 'flag' || state === 'expired')
      .map(({ id, kind, state, expiresAt }) => {
        const end = expiresAt === null ? '' : `, ${state === 'expired' ? 'expired' : 'ends'} ${clockOf(expiresAt)}`
        const words = state === 'expired' ? 'expired, not withdrawn' : state === 'planned' ? 'planned' : 'in force'
        return {
          ...{ key: `notice:${id}`, kind: 'notice' as const, mark: null, alertId: null },
          ...{ title: `${kind === 'closure' ? 'Closure' : kind === 'advisory' ? 'Advisory' : 'Flag'}, ${name}` },
          state: state === 'expired' ? words : `${words}${end}`,
        }
      }),
  )

function messageItems({ count, since }: SheetFacts['messagesNotOut']): Blank[] {
  if (count === 0) return []
  const title = count === 1 ? '1 message not out' : `${count} messages not out`
  const state = since === null ? 'waiting for the mail server' : `since ${clockOf(since)}`
  return [{ key: 'messages', kind: 'messages', title, state, mark: null, alertId: null }]
}

/** As on the list of alerts: what nobody acknowledged first, then by priority. */
const ranks = ['urgent', 'high', 'medium', 'low']
const kinds: CarriedItem['kind'][] = ['alert', 'station', 'notice', 'messages', 'shelved', 'outOfService', 'owed']
const rank = ({ kind, mark }: Blank): number =>
  kinds.indexOf(kind) * 100 +
  (mark?.state === 'unacknowledgedActive' ? 0 : 10) +
  (mark ? ranks.indexOf(mark.priority) : 5)

const changeKinds: LogEntryView['kind'][] = ['limit', 'station', 'place']

function dueOf({ limits, places, bulletins, now }: SheetFacts): HandOverSheet['due'] {
  const due: HandOverSheet['due'] = []
  for (const { shelf, title } of limits) if (shelf) due.push({ at: shelf.endsAt, text: `Shelf ends: ${title}` })
  for (const { name, notices, outlook } of places) {
    for (const { expiresAt, kind, state } of notices) {
      if (expiresAt !== null && state !== 'expired') due.push({ at: expiresAt, text: `${kind} ends at ${name}` })
    }
    const tide = outlook?.tide
    if (tide?.highWater) due.push({ at: tide.highWater.at, text: 'High water' })
    if (tide?.lowWater) due.push({ at: tide.lowWater.at, text: 'Low water' })
  }
  for (const bulletin of bulletins) {
    const term = termOf(bulletin, now)
    if (bulletin.nextIssueAt !== null && (term === 'inForce' || term === 'toCome')) {
      due.push({ at: bulletin.nextIssueAt, text: `Next bulletin after ${bulletin.number}` })
    }
  }
  const known = new Set<string>()
  return due
    .filter(({ at, text }) => Date.parse(at) > now && !known.has(`${at}${text}`) && known.add(`${at}${text}`))
    .sort((one, other) => Date.parse(one.at) - Date.parse(other.at))
    .slice(0, 20)
}

export function handOverSheet(facts: SheetFacts): HandOverSheet {
  const { watchId, sea, limits, stations, places, messagesNotOut, log, notes, expected, rota, timeZone, now } = facts
  const blank = [
    ...limitItems(limits),
    ...stationItems(stations, now),
    ...noticeItems(places),
    ...messageItems(messagesNotOut),
  ]
  const next = nextRotaWatch(rota, timeZone, now)
  return {
    ...{ watchId, sea, expected },
    carried: blank
      .sort((one, other) => rank(one) - rank(other))
      .map((item) => ({ ...item, note: notes[item.key] ?? '' })),
    changes: log.filter(({ kind }) => changeKinds.includes(kind)).map(({ at, text }) => ({ at, text })),
    due: dueOf(facts),
    next: next && { name: next.name, startsAt: new Date(next.startsAt).toISOString() },
  }
}

/** Items that still need their note. */
export const withoutNote = ({ carried }: Pick<HandOverSheet, 'carried'>): CarriedItem[] =>
  carried.filter(({ note }) => note.trim() === '')
