/**
 * Time as the server has it. The browser's clock may be wrong, so it is used only to count from the last word of
 * the server on.
 */
import { defineStore } from 'pinia'
import { computed, ref } from 'vue'

interface Anchor {
  serverMs: number
  monotonicMs: number
  wallMs: number
}

/** A Date header counts whole seconds; a difference below this is no reason to move the clock. */
const coarseDisagreementMs = 2_000

export const useServerClock = defineStore('serverClock', () => {
  const anchor = ref<Anchor | null>(null)
  /** Milliseconds since 1970 UTC, moved each second; the browser's time until the server was heard. */
  const nowMs = ref(Date.now())
  const known = computed(() => anchor.value !== null)

  /**
   * While a machine sleeps its monotonic clock may stand still and its wall clock may be set: the greater of both
   * makes ages too old rather than too young until the server speaks again.
   */
  function read(): number {
    const from = anchor.value
    if (!from) return Date.now()
    const elapsed = Math.max(performance.now() - from.monotonicMs, Date.now() - from.wallMs, 0)
    return from.serverMs + elapsed
  }

  function tick(): void {
    nowMs.value = read()
  }

  /** The server said its time, to the millisecond. */
  function hear(serverMs: number): void {
    anchor.value = { serverMs, monotonicMs: performance.now(), wallMs: Date.now() }
    tick()
  }

  /** An answer came; its Date header, if any, corrects the clock only where that is clearly off. */
  function answered(coarseServerMs: number | null): void {
    if (coarseServerMs === null) return
    const middle = coarseServerMs + 500
    if (!known.value || Math.abs(middle - read()) > coarseDisagreementMs) hear(middle)
  }

  let timer: ReturnType<typeof setInterval> | undefined
  function start(): void {
    timer ??= setInterval(tick, 1000)
  }
  function stop(): void {
    clearInterval(timer)
    timer = undefined
  }

  return { nowMs, known, read, hear, answered, tick, start, stop }
})
