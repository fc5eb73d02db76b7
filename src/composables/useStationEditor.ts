import { computed, ref, shallowRef } from 'vue'
import { stationRecord } from '../../shared/schemas/stationSetUp.ts'
import type { StationRecord } from '../../shared/schemas/stationSetUp.ts'
import { useStationSetUp } from '../stores/stationSetUp.ts'
import { useAttempt } from './useAttempt.ts'
import { useSaving } from './useSaving.ts'

/**
 * One station under the hands of an administrator. `filled` is the record that the form was last filled from: its
 * version goes with every change, and where the server holds another, that one is in `saving.other`.
 */
export function useStationEditor(stationId: number | null) {
  const records = useStationSetUp()
  const reading = useAttempt()
  const saving = useSaving(stationRecord)
  const filled = shallowRef<StationRecord | null>(null)
  const isReady = ref(stationId === null)
  const record = computed(() => (stationId === null ? undefined : records.byId(stationId)))

  async function open(): Promise<boolean> {
    if (stationId === null) return true
    return reading.attempt(async () => {
      const [found] = await Promise.all([records.open(stationId), records.readHistory(stationId)])
      filled.value = found
      isReady.value = true
    })
  }

  /** The server's words for fields, by the names of the contract without where they stood in the order. */
  const fieldFaults = computed(() =>
    Object.fromEntries(
      Object.entries(saving.fieldFaults.value).map(([path, words]) => [
        path.replaceAll('/', '.').replace(/^(body\.)?(settings\.)?/, ''),
        words,
      ]),
    ),
  )

  /** What the other editor saved becomes the ground; the form is the caller's to fill or to keep. */
  function standOnTheirs(): StationRecord | null {
    const other = saving.other.value
    if (other) {
      records.apply(other)
      filled.value = other
    }
    saving.dismiss()
    return other
  }

  return { records, reading, saving, filled, isReady, record, open, fieldFaults, standOnTheirs }
}
