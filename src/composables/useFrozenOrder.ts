import { computed, onBeforeUnmount, ref, shallowRef, watch } from 'vue'
import type { ComputedRef, Ref } from 'vue'

/** Hands leave a list a moment before they are done with it. */
export const thawMs = 2_000

interface Keyed {
  key: string
}

/**
 * Nothing moves under a hand: while the pointer or the focus is inside the list, and two seconds longer, rows keep
 * their places. What is new comes at the end, what has left keeps its place as it was last seen.
 */
export function useFrozenOrder<Row extends Keyed>(
  rows: Readonly<Ref<readonly Row[]>>,
): {
  shown: ComputedRef<Row[]>
  isFrozen: Ref<boolean>
  /** To be bound to the list. */
  listeners: Record<string, (event: Event) => void>
} {
  const isFrozen = ref(false)
  const frozen = shallowRef<readonly Row[]>([])
  let isPointed = false
  let isFocused = false
  let thaw: ReturnType<typeof setTimeout> | undefined

  function settle(): void {
    clearTimeout(thaw)
    if (isPointed || isFocused) {
      if (!isFrozen.value) frozen.value = rows.value
      isFrozen.value = true
    } else if (isFrozen.value) thaw = setTimeout(() => (isFrozen.value = false), thawMs)
  }

  const shown = computed(() => {
    if (!isFrozen.value) return [...rows.value]
    const now = new Map(rows.value.map((row) => [row.key, row]))
    const places = new Set(frozen.value.map((row) => row.key))
    return [...frozen.value.map((row) => now.get(row.key) ?? row), ...rows.value.filter((row) => !places.has(row.key))]
  })
  // Newcomers keep the place at the end that they were first given.
  watch(shown, (next) => {
    if (isFrozen.value && next.length !== frozen.value.length) frozen.value = next
  })

  onBeforeUnmount(() => clearTimeout(thaw))
  return {
    shown,
    isFrozen,
    listeners: {
      pointerenter: () => ((isPointed = true), settle()),
      pointerleave: () => ((isPointed = false), settle()),
      focusin: () => ((isFocused = true), settle()),
      focusout: (event) => {
        const { currentTarget, relatedTarget } = event as FocusEvent
        if (currentTarget instanceof Element && relatedTarget instanceof Node && currentTarget.contains(relatedTarget))
          return
        isFocused = false
        settle()
      },
    },
  }
}
