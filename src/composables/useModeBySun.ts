import { computed, watch } from 'vue'
import type { SunTimes } from '../../shared/sunTimes.ts'
import type { DisplayMode } from '../stores/display.ts'
import { useDisplay } from '../stores/display.ts'
import { useServerClock } from '../stores/serverClock.ts'
import { useSunTimes } from './useSunTimes.ts'

const afterSunsetMs = 30 * 60_000

/** Day from sunrise to half an hour after sunset. */
export const modeBySun = (nowMs: number, days: readonly SunTimes[]): DisplayMode =>
  days.some(({ riseMs, setMs }) => nowMs >= riseMs && nowMs < setMs + afterSunsetMs) ? 'day' : 'night'

/** Follows the sun for those who asked for it; changes nothing where its times are not known. */
export function useModeBySun(): void {
  const display = useDisplay()
  const clock = useServerClock()
  const days = useSunTimes()
  const wanted = computed(() => (display.bySun && days.value.length > 0 ? modeBySun(clock.nowMs, days.value) : null))
  watch(
    wanted,
    (mode) => {
      if (mode) display.mode = mode
    },
    { immediate: true },
  )
}
