import { computed } from 'vue'
import type { ComputedRef } from 'vue'
import { sunTimes } from '../../shared/sunTimes.ts'
import type { SunTimes } from '../../shared/sunTimes.ts'
import { useServerClock } from '../stores/serverClock.ts'
import { useStations } from '../stores/stations.ts'

const dayMs = 86_400_000

/** Sunrise and sunset of yesterday, today and tomorrow at the lead station, or the first; none without a station. */
export function useSunTimes(): ComputedRef<SunTimes[]> {
  const clock = useServerClock()
  const stations = useStations()
  const minute = computed(() => Math.floor(clock.nowMs / 60_000) * 60_000)
  const place = computed(() => stations.stations.find((one) => one.isLead) ?? stations.stations[0] ?? null)
  return computed(() => {
    const at = place.value
    if (!at) return []
    return [-dayMs, 0, dayMs].flatMap((shift) => sunTimes(minute.value + shift, at.latitude, at.longitude) ?? [])
  })
}
