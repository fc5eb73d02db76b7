import { onBeforeUnmount, ref } from 'vue'
import { useSession } from '../stores/session.ts'

const againMs = 5_000

/** Asks what kind of installation this is, again and again until the server answers. */
export function useInstallation() {
  const session = useSession()
  const silent = ref(false)
  let again: ReturnType<typeof setTimeout> | undefined
  let gone = false

  async function ask(): Promise<void> {
    try {
      await session.readInstallation()
      silent.value = false
    } catch {
      silent.value = true
      if (!gone) again = setTimeout(() => void ask(), againMs)
    }
  }

  void ask()
  onBeforeUnmount(() => {
    gone = true
    clearTimeout(again)
  })
  return { silent }
}
