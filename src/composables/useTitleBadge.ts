import { watch } from 'vue'
import { useRoute } from 'vue-router'
import { useAlerts } from '../stores/alerts.ts'

const badge = /^\(\d+ active, \d+ new\) /

/** `(3 active, 1 new) Watch – Offing`: seen while another tab is in front. */
export function useTitleBadge(): void {
  const alerts = useAlerts()
  const route = useRoute()
  watch(
    () => [route.fullPath, alerts.counts.active, alerts.counts.fresh] as const,
    ([, active, fresh]) => {
      const plain = document.title.replace(badge, '')
      document.title = active > 0 ? `(${active} active, ${fresh} new) ${plain}` : plain
    },
    { immediate: true, flush: 'post' },
  )
}
