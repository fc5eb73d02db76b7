/** The watch log as far as it was read. REST answers and live events pass through one function, `apply`. */
import { defineStore } from 'pinia'
import { computed, ref, shallowReactive, shallowRef } from 'vue'
import { logEntryView } from '../../shared/schemas/watchLog.ts'
import type { LogEntryDraft, LogEntryView } from '../../shared/schemas/watchLog.ts'
import * as api from '../api/log.ts'
import type { LogFilter } from '../api/log.ts'
import type { FileSending } from '../api/sendFile.ts'
import { useLive } from './live.ts'

export type { LogFilter } from '../api/log.ts'

const isEmpty = (filter: LogFilter): boolean => Object.values(filter).every((value) => value === undefined)

export const useLog = defineStore('log', () => {
  const live = useLive()
  const held = shallowReactive(new Map<number, LogEntryView>())
  /** Of a filter, as the server found them; null: the whole log is shown. */
  const found = shallowRef<number[] | null>(null)
  const filter = shallowRef<LogFilter>({})
  const next = ref<number | null>(null)
  const loaded = ref(false)

  const entries = computed(() => {
    const ids = found.value ?? [...held.keys()]
    return ids.flatMap((id) => held.get(id) ?? []).sort((one, other) => other.id - one.id)
  })

  const apply = (entry: LogEntryView): void => void held.set(entry.id, entry)

  async function read(before?: number): Promise<void> {
    const asked = filter.value
    const answer = await api.readLog(asked, before)
    // Another filter was set while this one was on its way.
    if (asked !== filter.value) return
    // So much was written meanwhile that lines in between were not read: what is older is read again when asked for.
    const isGap = before === undefined && held.size > 0 && !answer.entries.some(({ id }) => held.has(id))
    if (isGap) {
      held.clear()
      loaded.value = false
    }
    for (const entry of answer.entries) apply(entry)
    const ids = answer.entries.map(({ id }) => id)
    found.value = isEmpty(asked) ? null : [...(before === undefined ? [] : (found.value ?? [])), ...ids]
    if (before !== undefined || !loaded.value || !isEmpty(asked)) next.value = answer.next
    loaded.value = true
  }

  function show(wanted: LogFilter): Promise<void> {
    filter.value = wanted
    // Gaps between what was read under filters and the newest would look like a whole log.
    held.clear()
    found.value = null
    loaded.value = false
    return read()
  }

  let leaveRoom: (() => void) | null = null
  function watchAll(): () => void {
    leaveRoom ??= live.join('watch', {
      hydrate: () => read(),
      apply(event) {
        const parsed = logEntryView.safeParse(event.body)
        if (event.kind === 'logEntry' && parsed.success && (isEmpty(filter.value) || held.has(parsed.data.id))) {
          apply(parsed.data)
        }
      },
    })
    return () => {
      leaveRoom?.()
      leaveRoom = null
    }
  }

  async function write(draft: LogEntryDraft): Promise<LogEntryView> {
    const entry = await api.writeEntry(draft)
    apply(entry)
    if (found.value !== null) found.value = [entry.id, ...found.value]
    return entry
  }
  const attach = async (entryId: number, file: File, sending: Pick<FileSending, 'onSent' | 'signal'>): Promise<void> =>
    apply(await api.attach(entryId, file, sending))
  const readOlder = async (): Promise<void> => (next.value === null ? undefined : read(next.value))

  return { entries, filter, next, loaded, apply, show, watchAll, readOlder, write, attach, pathOf: api.attachmentPath }
})
