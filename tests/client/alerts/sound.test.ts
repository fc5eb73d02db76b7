import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { useSound } from '../../../src/stores/sound.ts'

/** Counts the tones that were begun; runs only when it was allowed to. */
class FakeAudio {
  static allowed = true
  static begun: number[] = []
  state: AudioContextState = 'suspended'
  currentTime = 0
  destination = {}
  onstatechange: (() => void) | null = null
  resume(): Promise<void> {
    if (!FakeAudio.allowed) return new Promise(() => undefined)
    this.state = 'running'
    return Promise.resolve()
  }
  createGain() {
    const gain = { setValueAtTime: () => undefined, linearRampToValueAtTime: () => undefined }
    return { gain, connect: () => undefined }
  }
  createOscillator() {
    const frequency = { value: 0 }
    return {
      frequency,
      type: 'sine',
      connect: (next: unknown) => next,
      start: () => FakeAudio.begun.push(frequency.value),
      stop: () => undefined,
    }
  }
}

const now = Date.parse('2026-11-12T14:32:00.000Z')
beforeEach(() => {
  vi.useFakeTimers({ now })
  FakeAudio.allowed = true
  FakeAudio.begun = []
  vi.stubGlobal('AudioContext', FakeAudio)
  localStorage.clear()
  setActivePinia(createPinia())
})
afterEach(() => {
  vi.unstubAllGlobals()
  vi.useRealTimers()
})

describe('the sound of the watch', () => {
  it('is blocked until the browser lets it through', async () => {
    FakeAudio.allowed = false
    const sound = useSound()
    const asked = sound.allow()
    await vi.advanceTimersByTimeAsync(500)
    expect(await asked).toBe(false)
    expect(sound.state).toBe('blocked')
    expect(sound.play('urgent', now)).toBe(false)
    FakeAudio.allowed = true
    await sound.allow()
    expect(sound.state).toBe('on')
  })

  it('has three tones for urgent and two for high, once for many alerts at one time', async () => {
    const sound = useSound()
    await sound.allow()
    sound.play('urgent', now)
    sound.play('urgent', now + 500)
    sound.play('high', now)
    expect(FakeAudio.begun).toHaveLength(5)
  })

  it('is due again after a minute', async () => {
    const sound = useSound()
    await sound.allow()
    expect(sound.isDue('high', now)).toBe(true)
    sound.play('high', now)
    expect(sound.isDue('high', now + 59_000)).toBe(false)
    expect(sound.isDue('high', now + 60_000)).toBe(true)
  })

  it('is held back by Silence for two minutes', () => {
    const sound = useSound()
    sound.silence(now)
    expect(sound.isSilenced(now + 119_000)).toBe(true)
    expect(sound.isSilenced(now + 120_000)).toBe(false)
  })

  it('is off by choice, and remembers it at this desk', async () => {
    const sound = useSound()
    await sound.allow()
    sound.wanted = false
    await Promise.resolve()
    expect(sound.state).toBe('off')
    setActivePinia(createPinia())
    expect(useSound().state).toBe('off')
  })
})
