import { ref, watch } from 'vue'
import type { Ref } from 'vue'
import type { CurrentEstimate } from '../../shared/schemas/station.ts'
import { areEqual } from '../../shared/waveSystemNames.ts'

const needed = 3

/**
 * Whether two systems are shown as equals. Entering and leaving need three estimates in a row, so that the page does
 * not change its form with every window; the first estimate of a station decides at once.
 */
export function useEqualSystems(estimate: Ref<CurrentEstimate | null>): Ref<boolean> {
  const equal = ref(false)
  let stationId: number | null = null
  let window = ''
  let against = 0
  watch(
    estimate,
    (next) => {
      if (!next || next.systems.length === 0) return
      const now = areEqual(next.systems)
      if (next.stationId !== stationId) {
        stationId = next.stationId
        equal.value = now
        against = 0
      } else if (next.windowEndsAt !== window) {
        against = now === equal.value ? 0 : against + 1
        if (against >= needed) {
          equal.value = now
          against = 0
        }
      }
      window = next.windowEndsAt
      // With one system left there is nothing to set beside it.
      if (next.systems.length < 2) equal.value = false
    },
    { immediate: true },
  )
  return equal
}
