import { mount } from '@vue/test-utils'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { defineComponent, h, nextTick, shallowRef } from 'vue'
import { thawMs, useFrozenOrder } from '../../../src/composables/useFrozenOrder.ts'

const rows = shallowRef([{ key: 'a' }, { key: 'b' }])
const List = defineComponent({
  setup() {
    const { shown, listeners } = useFrozenOrder(rows)
    const on = Object.fromEntries(
      Object.entries(listeners).map(([name, does]) => [`on${name[0].toUpperCase()}${name.slice(1)}`, does]),
    )
    return () => h('ul', on, [...shown.value.map((row) => h('li', row.key)), h('button', 'act')])
  },
})
const order = (list: ReturnType<typeof mount>) => list.findAll('li').map((row) => row.text())

beforeEach(() => {
  vi.useFakeTimers()
  rows.value = [{ key: 'a' }, { key: 'b' }]
})
afterEach(() => vi.useRealTimers())

describe('the order of a list', () => {
  it('stands still while the pointer is inside and two seconds longer', async () => {
    const list = mount(List)
    await list.trigger('pointerenter')
    rows.value = [{ key: 'c' }, { key: 'b' }, { key: 'a' }]
    await nextTick()
    expect(order(list)).toEqual(['a', 'b', 'c'])
    await list.trigger('pointerleave')
    vi.advanceTimersByTime(thawMs - 1)
    await nextTick()
    expect(order(list)).toEqual(['a', 'b', 'c'])
    vi.advanceTimersByTime(2)
    await nextTick()
    expect(order(list)).toEqual(['c', 'b', 'a'])
  })

  it('keeps the place of a row that has left while the focus is inside', async () => {
    const list = mount(List, { attachTo: document.body })
    await list.find('button').trigger('focusin')
    rows.value = [{ key: 'b' }]
    await nextTick()
    expect(order(list)).toEqual(['a', 'b'])
    list.unmount()
  })

  it('follows at once when no hand is near', async () => {
    const list = mount(List)
    rows.value = [{ key: 'b' }, { key: 'a' }]
    await nextTick()
    expect(order(list)).toEqual(['b', 'a'])
  })
})
