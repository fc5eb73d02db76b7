import { ref, watch } from 'vue'
import type { Ref } from 'vue'
import { inWords } from '../api/problem.ts'
import { useDisplay } from '../stores/display.ts'
import { useSession } from '../stores/session.ts'
import type { Preferences, PreferencesChange } from '../../shared/schemas/preferences.ts'

const fault = ref<string | null>(null)

/** Why the last choice is not kept on the server, in words; null: all is kept. */
export const preferencesFault = (): Ref<string | null> => fault

/** What differs from what the server has. */
export function changed(now: Preferences, kept: Preferences): PreferencesChange {
  const names = Object.keys(now) as (keyof Preferences)[]
  return Object.fromEntries(names.filter((name) => now[name] !== kept[name]).map((name) => [name, now[name]]))
}

/** Wherever on the screen something is chosen, the server keeps it with the person. */
export function useKeepPreferences(): void {
  const display = useDisplay()
  const session = useSession()
  let running: Promise<void> = Promise.resolve()

  async function keep(): Promise<void> {
    const kept = session.preferences
    if (!kept || session.state !== 'in' || session.readOnly) return
    const change = changed(display.chosen, kept)
    if (Object.keys(change).length === 0) return
    try {
      await session.keepPreferences(change)
      fault.value = null
    } catch (error) {
      fault.value = inWords(error)
    }
  }

  watch(
    () => display.chosen,
    () => (running = running.then(keep)),
  )
}
