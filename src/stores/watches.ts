/** Who is on watch, and the sheet of the next hand-over. REST answers and live events pass through `apply`. */
import { defineStore } from 'pinia'
import { computed, shallowRef } from 'vue'
import { watchNow } from '../../shared/schemas/watch.ts'
import type { HandOverSheet, WatchNow } from '../../shared/schemas/watch.ts'
import * as api from '../api/watches.ts'
import type { Signing } from '../api/watches.ts'
import { useLive } from './live.ts'
import { useSession } from './session.ts'

export const useWatches = defineStore('watches', () => {
  const live = useLive()
  const session = useSession()
  const now = shallowRef<WatchNow | null>(null)
  const sheet = shallowRef<HandOverSheet | null>(null)

  const watch = computed(() => now.value?.watch ?? null)
  const isMine = computed(() => watch.value !== null && watch.value.person.id === session.person?.id)
  /** Hand-overs whose notes this person owes. */
  const owedByMe = computed(() => now.value?.owed.filter(({ from }) => from.person.id === session.person?.id) ?? [])

  const apply = (answer: WatchNow): void => void (now.value = answer)
  const readNow = async (): Promise<void> => apply(await api.readWatchNow())
  const readSheet = async (): Promise<void> => void (sheet.value = await api.readSheet())

  let leaveRoom: (() => void) | null = null
  function watchAll(): void {
    leaveRoom ??= live.join('onWatch', {
      hydrate: readNow,
      apply(event) {
        const parsed = watchNow.safeParse(event.body)
        if (event.kind === 'watch' && parsed.success) apply(parsed.data)
      },
    })
  }
  function leave(): void {
    leaveRoom?.()
    leaveRoom = null
  }

  const start = async (name: string): Promise<void> => apply(await api.startWatch(name))
  const end = async (reason: string): Promise<void> => apply(await api.endWatch(reason))
  const sign = async (signing: Signing): Promise<void> => apply(await api.signHandOver(signing))
  const takeOver = async (reason: string, name: string): Promise<void> => apply(await api.takeOver(reason, name))
  const writeOwed = async (id: number, notes: Record<string, string>): Promise<void> =>
    apply(await api.writeOwed(id, notes))
  const keepNotes = async (notes: Record<string, string>, expected: string): Promise<void> =>
    void (sheet.value = await api.keepNotes(notes, expected))

  return {
    ...{ now, watch, sheet, isMine, owedByMe, apply, readNow, readSheet, watchAll, leave },
    ...{ start, end, sign, takeOver, writeOwed, keepNotes },
  }
})
