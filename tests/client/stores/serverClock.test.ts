import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { useServerClock } from '../../../src/stores/serverClock.ts'

const serverSays = Date.parse('2026-11-12T14:32:07.000Z')

describe('server clock', () => {
  beforeEach(() => {
    // The browser is an hour and some seconds ahead of the server.
    vi.useFakeTimers({ now: serverSays + 3_612_000, toFake: ['Date', 'performance', 'setInterval', 'clearInterval'] })
    setActivePinia(createPinia())
  })
  afterEach(() => {
    vi.useRealTimers()
  })

  it('counts on from what the server said, whatever the browser believes', () => {
    const clock = useServerClock()
    clock.start()
    clock.hear(serverSays)
    vi.advanceTimersByTime(5_000)
    expect(clock.nowMs).toBe(serverSays + 5_000)
    clock.stop()
  })

  it('is not known before the server was heard', () => {
    expect(useServerClock().known).toBe(false)
  })

  it('takes a Date header, which counts whole seconds, only while it knows nothing better', () => {
    const clock = useServerClock()
    clock.answered(serverSays)
    expect(clock.nowMs).toBe(serverSays + 500)
    clock.hear(serverSays + 900)
    clock.answered(serverSays)
    expect(clock.nowMs).toBe(serverSays + 900)
  })

  it('moves by a Date header that differs by more than its own coarseness', () => {
    const clock = useServerClock()
    clock.hear(serverSays)
    clock.answered(serverSays + 60_000)
    expect(clock.nowMs).toBe(serverSays + 60_500)
  })

  it('makes ages too old rather than too young when the machine has slept', () => {
    const clock = useServerClock()
    clock.hear(serverSays)
    // Asleep for ten minutes: the wall clock has moved on, the monotonic clock has not.
    vi.setSystemTime(Date.now() + 600_000)
    expect(clock.read()).toBe(serverSays + 600_000)
  })
})
