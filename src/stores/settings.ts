/** What the office has set for everybody: port, zone, cautions, coast, lead station. */
import { defineStore } from 'pinia'
import { computed, shallowRef } from 'vue'
import type { PublicSettings } from '../../shared/schemas/coast.ts'
import { readSettings } from '../api/settings.ts'

export const useSettings = defineStore('settings', () => {
  const settings = shallowRef<PublicSettings | null>(null)
  const loaded = computed(() => settings.value !== null)
  const portName = computed(() => settings.value?.portName ?? '')
  const timeZone = computed(() => settings.value?.timeZone ?? 'UTC')
  const leadStationId = computed(() => settings.value?.leadStationId ?? null)
  const cautions = computed(() => settings.value?.cautions ?? { figures: '', array: '', traceSpeeds: '' })
  const coast = computed(() => settings.value?.coast ?? null)

  function apply(next: PublicSettings): void {
    settings.value = next
  }

  async function load(): Promise<void> {
    apply(await readSettings())
  }

  return { settings, loaded, portName, timeZone, leadStationId, cautions, coast, apply, load }
})
