/**
 * The watch's own tones: for new high and urgent alerts, repeated each minute until somebody acknowledges. Silence
 * holds them back for two minutes and is not an acknowledgement.
 */
import { defineStore } from 'pinia'
import { computed, ref, watch } from 'vue'
import { z } from 'zod'
import { playTones } from './tones.ts'
import type { ToneName } from './tones.ts'

const place = 'offing.sound'
export const repeatMs = 60_000
export const silenceMs = 120_000

/** On and heard; off by choice; blocked by the browser until a hand has touched the page, or because it has no sound. */
export type SoundState = 'on' | 'off' | 'blocked'

function recall(): boolean {
  try {
    return z.boolean().parse(JSON.parse(localStorage.getItem(place) ?? 'true'))
  } catch {
    return true
  }
}

export const useSound = defineStore('sound', () => {
  const wanted = ref(recall())
  const isRunning = ref(false)
  const silentUntilMs = ref(0)
  const testedAtMs = ref<number | null>(null)
  let context: AudioContext | null = null
  const lastPlayed = new Map<ToneName, number>()

  const state = computed<SoundState>(() => (!wanted.value ? 'off' : isRunning.value ? 'on' : 'blocked'))
  const isSilenced = (nowMs: number): boolean => nowMs < silentUntilMs.value

  watch(wanted, (value) => {
    try {
      localStorage.setItem(place, JSON.stringify(value))
    } catch {
      // A browser that keeps nothing still obeys until the page is closed.
    }
  })

  /** Asks the browser for sound; it may refuse until somebody has clicked or pressed a key. */
  async function allow(): Promise<boolean> {
    try {
      context ??= new AudioContext()
      const made = context
      made.onstatechange = () => (isRunning.value = made.state === 'running')
      // A refusal may never answer: what counts is the state after a moment.
      await Promise.race([made.resume(), new Promise((resolve) => setTimeout(resolve, 400))])
      isRunning.value = made.state === 'running'
    } catch {
      isRunning.value = false
    }
    return isRunning.value
  }

  /** At most once in three seconds for each tone, however many alerts come. */
  function play(tone: ToneName, nowMs: number): boolean {
    if (state.value !== 'on' || !context) return false
    if (nowMs - (lastPlayed.get(tone) ?? -Infinity) < 3_000) return false
    lastPlayed.set(tone, nowMs)
    playTones(context, tone)
    return true
  }

  /** True when the minute since the tone was last heard is over. */
  const isDue = (tone: ToneName, nowMs: number): boolean => nowMs - (lastPlayed.get(tone) ?? -Infinity) >= repeatMs

  const wasHeard = (tone: ToneName): boolean => lastPlayed.has(tone)

  async function test(tone: ToneName, nowMs: number): Promise<void> {
    if (!(await allow()) || !context) return
    playTones(context, tone)
    testedAtMs.value = nowMs
  }

  function silence(nowMs: number): void {
    silentUntilMs.value = nowMs + silenceMs
  }

  return { wanted, state, silentUntilMs, testedAtMs, isSilenced, allow, play, isDue, wasHeard, test, silence }
})
