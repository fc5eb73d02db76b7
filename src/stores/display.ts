/** How this screen is set: day or night, motion, keys. Kept in the browser, because it belongs to the desk. */
import { defineStore } from 'pinia'
import { computed, ref, watch } from 'vue'
import { z } from 'zod'

const kept = z.object({
  mode: z.enum(['day', 'night']).default('day'),
  still: z.boolean().default(false),
  keys: z.boolean().default(true),
  bySun: z.boolean().default(false),
})
export type DisplayMode = z.infer<typeof kept>['mode']

const place = 'offing.display'

function recall(): z.infer<typeof kept> {
  try {
    return kept.parse(JSON.parse(localStorage.getItem(place) ?? '{}'))
  } catch {
    return kept.parse({})
  }
}

export const useDisplay = defineStore('display', () => {
  const before = recall()
  const mode = ref<DisplayMode>(before.mode)
  /** Night begins half an hour after sunset and ends at sunrise, as long as the person asks for it. */
  const bySun = ref(before.bySun)
  const stillChosen = ref(before.still)
  /** Single-key shortcuts; can be switched off. */
  const keys = ref(before.keys)

  const reduced = window.matchMedia?.('(prefers-reduced-motion: reduce)')
  const reducedBySystem = ref(reduced?.matches ?? false)
  reduced?.addEventListener?.('change', (event) => (reducedBySystem.value = event.matches))

  /** Nothing moves: chosen here, or asked for by the system. */
  const still = computed(() => stillChosen.value || reducedBySystem.value)

  watch(
    [mode, still],
    () => {
      document.documentElement.dataset.mode = mode.value
      document.documentElement.toggleAttribute('data-still', still.value)
    },
    { immediate: true },
  )
  watch([mode, stillChosen, keys, bySun], () => {
    try {
      const now = { mode: mode.value, still: stillChosen.value, keys: keys.value, bySun: bySun.value }
      localStorage.setItem(place, JSON.stringify(now))
    } catch {
      // A browser that keeps nothing still shows what was chosen until the page is closed.
    }
  })

  /** The person's own choice ends the choice by the sun. */
  function choose(chosen: DisplayMode): void {
    bySun.value = false
    mode.value = chosen
  }

  return { mode, bySun, choose, still, stillChosen, reducedBySystem, keys }
})
