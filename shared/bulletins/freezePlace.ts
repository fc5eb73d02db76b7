/** What a bulletin takes of a place, frozen at a moment. */
import { livePlace } from '../places/livePlace.ts'
import type { BulletinFigure } from '../schemas/bulletin.ts'
import { priority } from '../schemas/limit.ts'
import type { PlaceView } from '../schemas/place.ts'
import { clockUtc } from '../times.ts'
import { age } from '../units.ts'

/** Of the limits that are exceeded there. */
function worstPriority({ limits }: PlaceView): BulletinPriority {
  const ranks = priority.options
  const active = limits.filter(({ isActive }) => isActive).map((limit) => ranks.indexOf(limit.priority))
  return active.length === 0 ? null : ranks[Math.max(...active)]
}
type BulletinPriority = Extract<BulletinFigure, { kind: 'place' }>['priority']

const usableFlags = [1, 2, 3]

/** `nowMs`: server time, ms since 1970 UTC. A place without a figure now is missing, with the reason in words. */
export function freezePlace(place: PlaceView, nowMs: number): BulletinFigure {
  const missing = (reason: string): BulletinFigure => ({
    ...{ kind: 'missing', subject: 'place', subjectId: place.id, name: place.name, reason: reason.replace(/\.$/, '') },
  })
  const last = place.lastGood ? `, last good ${clockUtc(Date.parse(place.lastGood.windowEndsAt))} UTC` : ''
  const picture = livePlace(place, nowMs)
  if (picture.kind === 'empty') return missing('no figure was ever made')
  if (picture.kind === 'stale') return missing(`stale ${age(picture.ageSeconds)}${last}`)
  if (picture.kind === 'without') return missing(`${picture.reason}${last}`)
  const { lead, outlook } = picture
  const { value } = lead.figure
  if (value === null || !usableFlags.includes(lead.qualityFlag)) return missing(`a test failed${last}`)
  const [course] = lead.quantity === 'crossSea' ? outlook.courses : []
  return {
    kind: 'place',
    placeId: place.id,
    name: place.name,
    windowEndsAt: outlook.windowEndsAt,
    windowSeconds: (Date.parse(outlook.windowEndsAt) - Date.parse(outlook.windowStartsAt)) / 1000,
    revision: outlook.revision,
    qualityFlag: lead.qualityFlag,
    quantity: lead.quantity,
    value,
    sd: lead.figure.sd,
    likely: lead.figure.likely,
    words: course ? courseWords(course) : lead.figure.words,
    substitute: outlook.source?.isSubstitute ? `estimated from ${outlook.source.name}` : null,
    priority: worstPriority(place),
  }
}

/** `inbound 038° T, from the port quarter, setting to starboard`. */
const courseWords = ({ name, bearing, words }: PlaceCourse): string =>
  [`${name.toLowerCase()} ${String(Math.round(bearing) % 360).padStart(3, '0')}° T`, words]
    .filter((part) => part !== null)
    .join(', ')
type PlaceCourse = NonNullable<PlaceView['outlook']>['courses'][number]
