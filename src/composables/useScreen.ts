import { onBeforeUnmount, ref } from 'vue'
import type { Ref } from 'vue'

/** The forms a page takes: wide from 1400, narrow from 1024, column from 768, phone below; in em, so that large text counts. */
export type Screen = 'wide' | 'narrow' | 'column' | 'phone'

const steps: [Screen, string][] = [
  ['wide', '(min-width: 87.5em)'],
  ['narrow', '(min-width: 64em)'],
  ['column', '(min-width: 48em)'],
]

export function useScreen(): Ref<Screen> {
  const queries = steps.map(([screen, query]) => ({ screen, list: window.matchMedia(query) }))
  const read = (): Screen => queries.find(({ list }) => list.matches)?.screen ?? 'phone'
  const screen = ref(read())
  const listen = () => (screen.value = read())
  for (const { list } of queries) list.addEventListener('change', listen)
  onBeforeUnmount(() => queries.forEach(({ list }) => list.removeEventListener('change', listen)))
  return screen
}
