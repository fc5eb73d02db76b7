import { onBeforeUnmount, onMounted, ref } from 'vue'
import type { Ref } from 'vue'

/** The width of an element in CSS pixels, followed while it is on the page. */
export function useWidth(element: Ref<HTMLElement | null>, fallback: number): Ref<number> {
  const width = ref(fallback)
  let observer: ResizeObserver | undefined
  onMounted(() => {
    if (!element.value) return
    width.value = element.value.clientWidth || fallback
    observer = new ResizeObserver(([entry]) => {
      const next = Math.round(entry?.contentRect.width ?? 0)
      if (next > 0) width.value = next
    })
    observer.observe(element.value)
  })
  onBeforeUnmount(() => observer?.disconnect())
  return width
}
