import { onBeforeUnmount, ref } from 'vue'
import type { Ref } from 'vue'

export function useWindowHeight(): Ref<number> {
  const height = ref(window.innerHeight)
  const listen = () => (height.value = window.innerHeight)
  window.addEventListener('resize', listen)
  onBeforeUnmount(() => window.removeEventListener('resize', listen))
  return height
}
