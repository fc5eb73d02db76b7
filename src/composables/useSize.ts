import { onBeforeUnmount, ref, watch } from 'vue'
import type { Ref } from 'vue'

export interface Size {
  width: number
  height: number
}

/** The size of an element that may come and go, in CSS pixels; zero while it is not there. */
export function useSize(element: Readonly<Ref<HTMLElement | null>>): Ref<Size> {
  const size = ref<Size>({ width: 0, height: 0 })
  const observer = new ResizeObserver(([entry]) => {
    if (!entry) return
    const { width, height } = entry.contentRect
    size.value = { width: Math.ceil(width), height: Math.ceil(height) }
  })
  watch(
    element,
    (now, before) => {
      if (before) observer.unobserve(before)
      if (now) observer.observe(now)
      else size.value = { width: 0, height: 0 }
    },
    { flush: 'post' },
  )
  onBeforeUnmount(() => observer.disconnect())
  return size
}
