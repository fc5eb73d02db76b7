import { computed } from 'vue'
import type { ComputedRef } from 'vue'
import { livePlace } from '../../shared/places/livePlace.ts'
import type { LivePlace } from '../../shared/places/livePlace.ts'
import type { PlaceView } from '../../shared/schemas/place.ts'
import { usePlaces } from '../stores/places.ts'
import { useServerClock } from '../stores/serverClock.ts'
import { useSession } from '../stores/session.ts'

export interface SeenPlace {
  place: PlaceView
  picture: LivePlace
}

/** All places in the office's order, each with what may be shown of it now; stale by the clock alone. */
export function useSeenPlaces(): ComputedRef<SeenPlace[]> {
  const places = usePlaces()
  const clock = useServerClock()
  return computed(() => places.places.map((place) => ({ place, picture: livePlace(place, clock.nowMs) })))
}

/** The places of a partner's team before the others; the office's order for everybody else. */
export function useOwnFirst(seen: ComputedRef<SeenPlace[]>): {
  own: ComputedRef<SeenPlace[]>
  others: ComputedRef<SeenPlace[]>
} {
  const session = useSession()
  const team = computed(() => (session.person?.role === 'partner' ? session.person.team : null))
  const isOwn = ({ place }: SeenPlace): boolean => team.value !== null && place.team === team.value
  return {
    own: computed(() => seen.value.filter(isOwn)),
    others: computed(() => seen.value.filter((one) => !isOwn(one))),
  }
}
