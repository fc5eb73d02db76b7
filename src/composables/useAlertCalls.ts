import { computed, onBeforeUnmount, onMounted, watch } from 'vue'
import { valueWithSd } from '../../shared/alerts/describe.ts'
import { quantityOf } from '../../shared/alerts/quantities.ts'
import type { AlertView } from '../../shared/schemas/alert.ts'
import { useAlerts } from '../stores/alerts.ts'
import { useDisplay } from '../stores/display.ts'
import { useLive } from '../stores/live.ts'
import { useNotices } from '../stores/notices.ts'
import { useServerClock } from '../stores/serverClock.ts'
import { useSession } from '../stores/session.ts'
import { useSound } from '../stores/sound.ts'

type Calling = 'urgent' | 'high'
const callings: Calling[] = ['urgent', 'high']

/** Calls a person to the screen: tones for high and urgent until acknowledged, and a notice of the browser if allowed. */
export function useAlertCalls(): void {
  const alerts = useAlerts()
  const clock = useServerClock()
  const live = useLive()
  const sound = useSound()
  const notices = useNotices()
  const session = useSession()
  const display = useDisplay()
  /** Partners are told by e-mail; the tone belongs to the watch. */
  const hears = computed(() => session.allows('limits.read'))
  const calling = computed(() =>
    alerts.rows.flatMap(({ state, alert }) => (state === 'unacknowledgedActive' && alert ? [alert] : [])),
  )
  let seen: Set<number> | null = null

  const call = (tone: Calling): void => {
    if (hears.value && !sound.isSilenced(clock.nowMs)) sound.play(tone, clock.nowMs)
  }

  watch(
    () => (alerts.loaded ? calling.value : null),
    (now) => {
      if (!now) return
      const before = seen
      seen = new Set(now.map((alert) => alert.id))
      // Whoever opens the page hears at once what waits, by the repetition below.
      if (!before) return
      const fresh = now.filter((alert) => !before.has(alert.id))
      for (const tone of callings) if (fresh.some((alert) => alert.priority === tone)) call(tone)
      if (document.visibilityState === 'hidden') for (const alert of fresh) notices.show(alert.id, titleOf(alert))
    },
    { immediate: true },
  )
  watch(
    () => clock.nowMs,
    (nowMs) => {
      for (const tone of callings) {
        if (!display.repeatsTone && sound.wasHeard(tone)) continue
        if (calling.value.some((alert) => alert.priority === tone) && sound.isDue(tone, nowMs)) call(tone)
      }
    },
  )
  watch(
    () => live.figuresHeld,
    (held) => {
      if (held && hears.value) sound.play('noContact', clock.nowMs)
    },
  )

  // The browser lets sound through only after a hand has touched the page.
  const wake = (): void => {
    if (sound.state === 'blocked') void sound.allow()
  }
  onMounted(() => {
    if (!hears.value) return
    void sound.allow()
    document.addEventListener('pointerdown', wake)
    document.addEventListener('keydown', wake)
  })
  onBeforeUnmount(() => {
    document.removeEventListener('pointerdown', wake)
    document.removeEventListener('keydown', wake)
  })
}

const titleOf = (alert: AlertView): string => {
  const value = valueWithSd(quantityOf(alert.quantity), alert.value, alert.valueSd)
  const priority = alert.priority.charAt(0).toUpperCase() + alert.priority.slice(1)
  return `${alert.isExercise ? 'EXERCISE. ' : ''}${priority}: ${alert.title} ${value}`
}
