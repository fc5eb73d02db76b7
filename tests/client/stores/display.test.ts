import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { nextTick } from 'vue'
import { useDisplay } from '../../../src/stores/display.ts'

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
