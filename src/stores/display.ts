/**
 * How this screen is set. Day or night belongs to the desk and is kept in the browser; the rest is the person's, comes
 * with them from the server, and is kept here too for the pages before signing in.
 */
import { defineStore } from 'pinia'
import { computed, ref, watch } from 'vue'
import { z } from 'zod'
import { showIn } from '../figures/shown.ts'
import { preferences } from '../../shared/schemas/preferences.ts'
import type { Preferences } from '../../shared/schemas/preferences.ts'

const kept = preferences.extend({ mode: z.enum(['day', 'night']).default('day') })
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
  const moreContrast = ref(before.moreContrast)
  const textSize = ref(before.textSize)
  /** Single-key shortcuts; can be switched off. */
  const keys = ref(before.keys)
  const spokenDigits = ref(before.spokenDigits)
  const heightUnit = ref(before.heightUnit)
  const speedUnit = ref(before.speedUnit)
  /** Zone of the time beside UTC; null: the port's. */
  const besideUtc = ref(before.besideUtc)
  /** The tone of an alert comes again each minute until somebody acknowledges. */
  const repeatsTone = ref(before.repeatsTone)

  const chosen = computed<Preferences>(() => ({
    heightUnit: heightUnit.value,
    speedUnit: speedUnit.value,
    besideUtc: besideUtc.value,
    bySun: bySun.value,
    still: stillChosen.value,
    moreContrast: moreContrast.value,
    textSize: textSize.value,
    keys: keys.value,
    spokenDigits: spokenDigits.value,
    repeatsTone: repeatsTone.value,
  }))

  /** Those of the person who signed in. */
  function take(theirs: Preferences): void {
    heightUnit.value = theirs.heightUnit
    speedUnit.value = theirs.speedUnit
    besideUtc.value = theirs.besideUtc
    bySun.value = theirs.bySun
    stillChosen.value = theirs.still
    moreContrast.value = theirs.moreContrast
    textSize.value = theirs.textSize
    keys.value = theirs.keys
    spokenDigits.value = theirs.spokenDigits
    repeatsTone.value = theirs.repeatsTone
  }

  const reduced = window.matchMedia?.('(prefers-reduced-motion: reduce)')
  const reducedBySystem = ref(reduced?.matches ?? false)
  reduced?.addEventListener?.('change', (event) => (reducedBySystem.value = event.matches))

  /** Nothing moves: chosen here, or asked for by the system. */
  const still = computed(() => stillChosen.value || reducedBySystem.value)

  watch(
    [mode, still, moreContrast, textSize],
    () => {
      const page = document.documentElement
      page.dataset.mode = mode.value
      page.toggleAttribute('data-still', still.value)
      page.toggleAttribute('data-contrast', moreContrast.value)
      page.style.fontSize = textSize.value === 100 ? '' : `${textSize.value}%`
      page.toggleAttribute('data-large-text', textSize.value >= 150)
    },
    { immediate: true },
  )
  watch(
    chosen,
    () => showIn({ heightUnit: heightUnit.value, speedUnit: speedUnit.value, spokenDigits: spokenDigits.value }),
    { immediate: true, flush: 'sync' },
  )
  watch([mode, chosen], () => {
    try {
      localStorage.setItem(place, JSON.stringify({ ...chosen.value, mode: mode.value }))
    } catch {
      // A browser that keeps nothing still shows what was chosen until the page is closed.
    }
  })

  /** The person's own choice ends the choice by the sun. */
  function choose(wanted: DisplayMode): void {
    bySun.value = false
    mode.value = wanted
  }

  return {
    ...{ mode, bySun, choose, still, stillChosen, reducedBySystem, moreContrast, textSize, keys, spokenDigits },
    ...{ heightUnit, speedUnit, besideUtc, repeatsTone, chosen, take },
  }
})
