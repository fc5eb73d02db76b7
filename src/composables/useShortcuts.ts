import { onBeforeUnmount, onMounted } from 'vue'
import { useDisplay } from '../stores/display.ts'

/** A first key waits so long for its second. */
const patienceMs = 1_200

/**
 * Keys such as `g w` or `?`, each with what it does. Nothing happens inside fields, with a modifier held, or while a
 * sheet is open; a person can switch them off.
 */
export function useShortcuts(does: Record<string, () => void>): void {
  const display = useDisplay()
  let first = ''
  let firstAt = 0

  function press(event: KeyboardEvent): void {
    if (!display.keys || event.defaultPrevented || event.ctrlKey || event.metaKey || event.altKey) return
    if (isTyping(event.target) || document.querySelector('[role="dialog"]')) return
    const waited = event.timeStamp - firstAt
    const sequence = first && waited < patienceMs ? `${first} ${event.key}` : event.key
    const action = does[sequence] ?? does[event.key]
    first = ''
    if (action) {
      event.preventDefault()
      return action()
    }
    if (Object.keys(does).some((keys) => keys.startsWith(`${event.key} `))) {
      first = event.key
      firstAt = event.timeStamp
    }
  }

  onMounted(() => document.addEventListener('keydown', press))
  onBeforeUnmount(() => document.removeEventListener('keydown', press))
}

function isTyping(target: EventTarget | null): boolean {
  return target instanceof HTMLElement && (target.isContentEditable || /^(INPUT|TEXTAREA|SELECT)$/.test(target.tagName))
}
