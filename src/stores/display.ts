/** How this screen is set: day or night, motion, keys. Kept in the browser, because it belongs to the desk. */
import { defineStore } from 'pinia'
import { computed, ref, watch } from 'vue'
import { z } from 'zod'

const kept = z.object({
  mode: z.enum(['day', 'night']).default('day'),
  still: z.boolean().default(false),
  keys: z.boolean().default(true),
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
  watch([mode, stillChosen, keys], () => {
    try {
      localStorage.setItem(place, JSON.stringify({ mode: mode.value, still: stillChosen.value, keys: keys.value }))
    } catch {
      // A browser that keeps nothing still shows what was chosen until the page is closed.
    }
  })

  return { mode, still, stillChosen, reducedBySystem, keys }
})
