import { computed, ref, shallowRef } from 'vue'

/** One thing and how it was before; changes of one gesture (a drag, a held key, typing in one field) are undone together. */
export function useUndo<T>(start: T) {
  const now = shallowRef<T>(start)
  const past = shallowRef<T[]>([])
  const future = shallowRef<T[]>([])
  const gesture = ref<string | null>(null)
  const most = 200

  function change(next: T, of: string | null = null): void {
    if (of === null || of !== gesture.value) past.value = [...past.value.slice(1 - most), now.value]
    gesture.value = of
    future.value = []
    now.value = next
  }
  function undo(): void {
    const before = past.value.at(-1)
    if (before === undefined) return
    future.value = [...future.value, now.value]
    past.value = past.value.slice(0, -1)
    now.value = before
    gesture.value = null
  }
  function redo(): void {
    const after = future.value.at(-1)
    if (after === undefined) return
    past.value = [...past.value, now.value]
    future.value = future.value.slice(0, -1)
    now.value = after
    gesture.value = null
  }
  /** A new beginning, from which nothing is undone. */
  function begin(next: T): void {
    now.value = next
    past.value = []
    future.value = []
    gesture.value = null
  }
  const mayUndo = computed(() => past.value.length > 0)
  const mayRedo = computed(() => future.value.length > 0)

  return { now, change, undo, redo, begin, mayUndo, mayRedo }
}
