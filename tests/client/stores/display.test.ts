import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { nextTick } from 'vue'
import { modeBySun } from '../../../src/composables/useModeBySun.ts'
import { useDisplay } from '../../../src/stores/display.ts'

describe('display by the sun', () => {
  const days = [
    { riseMs: Date.parse('2026-11-12T08:24:00Z'), setMs: Date.parse('2026-11-12T17:52:00Z') },
    { riseMs: Date.parse('2026-11-13T08:25:00Z'), setMs: Date.parse('2026-11-13T17:51:00Z') },
  ]

  it('is day from sunrise to half an hour after sunset, else night', () => {
    const at = (time: string) => modeBySun(Date.parse(`2026-11-${time}:00Z`), days)
    expect(['12T08:23', '12T08:24', '12T18:21', '12T18:22', '13T03:00', '13T09:00'].map(at)).toEqual([
      'night',
      'day',
      'day',
      'night',
      'night',
      'day',
    ])
  })

  it('ends when a person chooses', () => {
    setActivePinia(createPinia())
    const display = useDisplay()
    display.bySun = true
    display.choose('night')
    expect(display).toMatchObject({ mode: 'night', bySun: false })
  })
})

describe('display', () => {
  beforeEach(() => {
    localStorage.clear()
    setActivePinia(createPinia())
  })
  afterEach(() => {
    vi.unstubAllGlobals()
  })

  it('marks the page for day and night', async () => {
    const display = useDisplay()
    expect(document.documentElement.dataset.mode).toBe('day')
    display.mode = 'night'
    await nextTick()
    expect(document.documentElement.dataset.mode).toBe('night')
  })

  it('is found again as it was left', async () => {
    const display = useDisplay()
    display.mode = 'night'
    display.keys = false
    await nextTick()
    setActivePinia(createPinia())
    expect(useDisplay()).toMatchObject({ mode: 'night', keys: false })
  })

  it('begins afresh where what was kept cannot be read', () => {
    localStorage.setItem('offing.display', '{"mode":"purple"}')
    expect(useDisplay().mode).toBe('day')
  })

  it('is still when the computer asks for no motion', () => {
    vi.stubGlobal('matchMedia', () => ({ matches: true, addEventListener: () => undefined }))
    const display = useDisplay()
    expect(display.still).toBe(true)
    expect(display.stillChosen).toBe(false)
  })
})
