import { onBeforeUnmount, watch } from 'vue'
import { useAlerts } from '../stores/alerts.ts'
import { useJobs } from '../stores/jobs.ts'
import { useLive } from '../stores/live.ts'
import { usePlaces } from '../stores/places.ts'
import { useSession } from '../stores/session.ts'
import { useSettings } from '../stores/settings.ts'
import { useStations } from '../stores/stations.ts'
import { useWatches } from '../stores/watches.ts'

const againMs = 4_000

/** What every page of a signed-in person needs: settings, the live connection, stations and jobs. */
export function useOffice() {
  const live = useLive()
  const session = useSession()
  const settings = useSettings()
  const stations = useStations()
  const places = usePlaces()
  const jobs = useJobs()
  const alerts = useAlerts()
  const watches = useWatches()
  let again: ReturnType<typeof setTimeout> | undefined

  function open(): void {
    live.connect()
    stations.watchAll()
    places.watchAll()
    jobs.watchAll()
    alerts.watchAll()
    watches.watchAll()
    void readSettings()
  }

  async function readSettings(): Promise<void> {
    clearTimeout(again)
    try {
      if (!session.installation) await session.readInstallation()
      await settings.load()
    } catch {
      again = setTimeout(() => void readSettings(), againMs)
    }
  }

  function close(): void {
    clearTimeout(again)
    stations.leave()
    places.leave()
    jobs.leave()
    alerts.leave()
    watches.leave()
    live.disconnect()
  }

  // Whoever comes back to the tab wants the present at once, not after the pause has run out.
  function look(): void {
    if (document.visibilityState === 'visible' && live.contactLost) live.connect()
  }
  document.addEventListener('visibilitychange', look)
  onBeforeUnmount(() => document.removeEventListener('visibilitychange', look))

  watch(
    () => live.state,
    (state) => {
      if (state === 'open' && !settings.loaded) void readSettings()
    },
  )

  return { open, close }
}
