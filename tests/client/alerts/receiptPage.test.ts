import { flushPromises, mount } from '@vue/test-utils'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { createMemoryHistory } from 'vue-router'
import App from '../../../src/App.vue'
import { createOffingRouter } from '../../../src/router/index.ts'
import type { ReceiptView } from '../../../shared/schemas/message.ts'
import { FakeServer } from '../support/fakeServer.ts'
import { wordsOf } from '../support/wordsOf.ts'

const receipt = (changes: Partial<ReceiptView> = {}): ReceiptView => ({
  person: 'Pilot station',
  portName: 'Marrowick',
  isExercise: false,
  isDemonstration: true,
  expiresAt: '2026-11-13T14:20:00.000Z',
  isExpired: false,
  emergencyLine: 'In an emergency call the harbour watch, channel 12.',
  confirmedAt: null,
  content: {
    ...{ isExercise: false, isDemonstration: true, portName: 'Marrowick', priority: 'high' },
    priorityWords: 'High, second most serious of four',
    title: 'Total height, Outer Ledge',
    headline: 'Total height above 2.50 m for 10 min',
    subjectName: 'Outer Ledge',
    value: '2.61 m ± 0.14',
    limit: 'Total height above 2.50 m for 10 min.',
    quantity: 'significantWaveHeight',
    waves: 'Swell from 247° T, toward 067° T, 2.1 m, 12.4 s',
    glyph: { toward: 67, height: 2.1, name: 'Swell' },
    when: 'Thu 12 Nov 2026, 14:20 UTC, 15:20 local',
    windowEndsAt: '2026-11-12T14:20:00.000Z',
    ...{ since: null, quality: 'Good', toCheck: '', handling: '' },
    caution: 'Figures support, never replace, judgement.',
    path: '/alerts/418',
  },
  alert: {
    ...{ id: 418, state: 'unacknowledgedActive', stateWords: 'Active, not acknowledged' },
    ...{ acknowledgedAt: null, acknowledgedBy: null, closedAt: null },
  },
  others: [],
  ...changes,
})
const path = '/api/receipts/TOKEN'
let server: FakeServer
let mounted: ReturnType<typeof mount>

async function open() {
  const pinia = createPinia()
  setActivePinia(pinia)
  const router = createOffingRouter(createMemoryHistory())
  void router.push('/receipt/TOKEN')
  await router.isReady()
  mounted = mount(App, { attachTo: document.body, global: { plugins: [pinia, router] } })
  await flushPromises()
  return mounted
}

beforeEach(() => {
  server = new FakeServer().install()
})
afterEach(() => {
  mounted.unmount()
  vi.unstubAllGlobals()
})

describe('the page behind the link of an e-mail', () => {
  it('asks nobody to sign in and only looks: one GET, nothing else', async () => {
    server.on(path, { body: receipt() })
    const text = wordsOf((await open()).element)
    expect(text).toContain('Total height, Outer Ledge: 2.61 m ± 0.14')
    expect(text).toContain('You are Pilot station')
    expect(text).toContain('Opening this page recorded nothing.')
    expect(text).toContain('Not yet acknowledged by the watch.')
    expect(server.requests.map(({ method, path: asked }) => `${method} ${asked}`)).toEqual([`GET ${path}`])
  })

  it('confirms by one press and then says so', async () => {
    server.on(path, (method) => ({
      body: receipt({ confirmedAt: method === 'POST' ? '2026-11-12T14:22:00.000Z' : null }),
    }))
    const page = await open()
    await page.find('button.confirm').trigger('click')
    await flushPromises()
    expect(server.requests.filter(({ method }) => method === 'POST')).toHaveLength(1)
    expect(wordsOf(page.element)).toContain('Receipt confirmed Thu 12 Nov 2026 14:22 UTC.')
    expect(page.find('button.confirm').exists()).toBe(false)
  })

  it('says that an expired link confirms nothing', async () => {
    server.on(path, { body: receipt({ isExpired: true }) })
    const page = await open()
    expect(page.find('button.confirm').exists()).toBe(false)
    expect(wordsOf(page.element)).toContain('This link has expired.')
  })

  it('says that nothing was recorded where the link is unknown', async () => {
    const unknown = { type: 'about:blank', title: 'Nothing here', status: 404, code: 'notFound' }
    server.on(path, { status: 404, body: unknown })
    expect(wordsOf((await open()).element)).toContain('Nothing was recorded.')
  })

  it('says that a receipt was not recorded when no answer came', async () => {
    server.on(path, (method) => {
      if (method === 'POST') throw new TypeError('no route to the server')
      return { body: receipt() }
    })
    const page = await open()
    await page.find('button.confirm').trigger('click')
    await flushPromises()
    expect(wordsOf(page.element)).toContain('Not recorded.')
    expect(page.find('button.confirm').exists()).toBe(true)
  })
})
