import { mount } from '@vue/test-utils'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { useShortcuts } from '../../../src/composables/useShortcuts.ts'
import { useDisplay } from '../../../src/stores/display.ts'

const done: string[] = []
const page = {
  setup: () => useShortcuts({ 'g w': () => void done.push('watch'), '?': () => void done.push('keys') }),
  template: '<input />',
}
const press = (key: string, more: KeyboardEventInit = {}, target: EventTarget = document.body) =>
  target.dispatchEvent(new KeyboardEvent('keydown', { key, bubbles: true, cancelable: true, ...more }))

let mounted: ReturnType<typeof mount>

describe('shortcuts', () => {
  beforeEach(() => {
    localStorage.clear()
    setActivePinia(createPinia())
    done.length = 0
    mounted = mount(page, { attachTo: document.body })
  })
  afterEach(() => {
    mounted.unmount()
    vi.restoreAllMocks()
  })

  it('are one key, or two in a row', () => {
    press('g')
    press('w')
    press('?')
    expect(done).toEqual(['watch', 'keys'])
  })

  it('forget the first key when another follows', () => {
    press('g')
    press('x')
    press('w')
    expect(done).toEqual([])
  })

  it('do nothing inside a field or with a modifier', () => {
    press('?', {}, mounted.element)
    press('?', { ctrlKey: true })
    expect(done).toEqual([])
  })

  it('do nothing while a sheet is open', () => {
    const sheet = document.createElement('div')
    sheet.setAttribute('role', 'dialog')
    document.body.append(sheet)
    press('?')
    sheet.remove()
    expect(done).toEqual([])
  })

  it('do nothing when a person has switched them off', () => {
    useDisplay().keys = false
    press('?')
    expect(done).toEqual([])
  })
})
