/** What the plan of the coast says of a place: its short name, its lead figure in a few words, its mark. Pure. */
import { livePlace } from '../../../shared/places/livePlace.ts'
import { placeQuantityOf } from '../../../shared/places/quantities.ts'
import type { PlaceView } from '../../../shared/schemas/place.ts'
import type { PlanPlace } from '../drawings/geometry/planPlaces.ts'
import { isNonePredicted, uncertaintyOf, wordsOf, numberOf, unitOf } from './placeFigures.ts'
import { limitOf, placeMark } from './placeMark.ts'

export interface MarkedPlace extends PlanPlace {
  mark: ReturnType<typeof placeMark>
}

export function planPlace(place: PlaceView, nowMs: number): MarkedPlace {
  const { id, shortName, latitude, longitude } = place
  const mark = placeMark(place)
  return { id, name: shortName, latitude, longitude, words: figureOnPlan(place, nowMs), mark, hasMark: mark !== null }
}

function figureOnPlan(place: PlaceView, nowMs: number): string {
  const picture = livePlace(place, nowMs)
  const key = place.settings.content.leadQuantity
  if (picture.kind !== 'live') return picture.kind === 'empty' ? 'no figure yet' : 'not judged'
  const { figure, qualityFlag } = picture.lead
  if (isNonePredicted(figure)) return 'no overtopping predicted'
  const limit = limitOf(place, key)
  if (limit?.state === 'shelved') return `${wordsOf(key, figure.value)}, ${limit.isActive ? 'above, ' : ''}shelved`
  const doubt = qualityFlag === 1 ? '' : ', Suspect'
  if (figure.likely)
    return doubt
      ? `${wordsOf(key, figure.value)}, ${uncertaintyOf(key, figure).replace('likely ', '')}${doubt}`
      : `${numberOf(key, figure.value)}, ${uncertaintyOf(key, figure)} ${unitOf(key)}`
  if (doubt) return `${wordsOf(key, figure.value)} ${uncertaintyOf(key, figure)}${doubt}`
  const name = placeQuantityOf(key).name.replace(/,.*$/, '').toLowerCase()
  return `${name} ${wordsOf(key, figure.value)} ${uncertaintyOf(key, figure)}`
}
