import { computed } from 'vue'
import type { ComputedRef } from 'vue'
import { livePicture } from '../../shared/livePicture.ts'
import type { LivePicture } from '../../shared/livePicture.ts'
import type { StationView } from '../../shared/schemas/station.ts'
import { useServerClock } from '../stores/serverClock.ts'
import { useStations } from '../stores/stations.ts'

export interface SeenStation {
  station: StationView
  picture: LivePicture
}

/** All stations in the office's order, each with what may be drawn of it now; stale by the clock alone. */
export function useLivePictures(): ComputedRef<SeenStation[]> {
  const stations = useStations()
  const clock = useServerClock()
  return computed(() => stations.stations.map((station) => ({ station, picture: livePicture(station, clock.nowMs) })))
}
