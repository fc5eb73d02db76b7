import { flushPromises, mount } from '@vue/test-utils'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest'
import { createMemoryHistory } from 'vue-router'
import App from '../../../src/App.vue'
import { createOffingRouter } from '../../../src/router/index.ts'
import { useSession } from '../../../src/stores/session.ts'
import { FakeServer, FakeWebSocket } from '../support/fakeServer.ts'
import { session, station } from '../support/views.ts'

const nobody = { type: 'about:blank', title: 'Not signed in', status: 401, code: 'session.none' }
let server: FakeServer
let mounted: ReturnType<typeof mount> | null = null

async function openAt(path: string) {
  const pinia = createPinia()
  setActivePinia(pinia)
  const router = createOffingRouter(createMemoryHistory())
  void router.push(path)
  await router.isReady()
  mounted = mount(App, { attachTo: document.body, global: { plugins: [pinia, router] } })
  await flushPromises()
  return router
}

// Pages are fetched when they are first opened; on a busy machine that is the longest part of a test.
beforeAll(async () => {
  await Promise.all([import('../../../src/pages/WatchPage.vue'), import('../../../src/pages/SignInPage.vue')])
}, 60_000)
beforeEach(() => {
  server = new FakeServer()
    .install()
    .on('/api/session', { body: session() })
    .on('/api/installation', {
      body: {
        kind: 'demonstration',
        portName: 'Marrowick',
        timeZone: 'Etc/GMT-1',
        serverTime: '2026-11-12T14:32:07.000Z',
        needsSetUp: false,
      },
    })
    .on('/api/settings', {
      body: {
        portName: 'Marrowick',
        timeZone: 'Etc/GMT-1',
        leadStationId: 1,
        cautions: { figures: 'Figures support.', array: 'Where it stands.', traceSpeeds: 'Never a component.' },
        coast: null,
      },
    })
    .on('/api/stations', { body: [station()] })
    .on('/api/jobs', { body: [] })
})
afterEach(() => {
  mounted?.unmount()
  mounted = null
  vi.unstubAllGlobals()
})

describe('whoever is not signed in', () => {
  it('comes to the sign-in page first, and the page asked for is kept', async () => {
    server.on('/api/session', { status: 401, body: nobody })
    const router = await openAt('/stations/1')
    expect(router.currentRoute.value.name).toBe('signIn')
    expect(router.currentRoute.value.query).toEqual({ to: '/stations/1' })
    expect(document.title).toBe('Sign in – Offing')
  })

  it('is led to the first administrator while there is none', async () => {
    server.on('/api/session', { status: 401, body: nobody }).on('/api/installation', {
      body: {
        kind: 'real',
        portName: 'Harbour',
        timeZone: 'UTC',
        serverTime: '2026-11-12T14:32:07.000Z',
        needsSetUp: true,
      },
    })
    const router = await openAt('/')
    await vi.waitFor(() => expect(router.currentRoute.value.name).toBe('firstAdministrator'))
  })
})

describe('the frame of a signed-in person', () => {
  it('offers the pages that exist, marks the demonstration, and shows what is live', async () => {
    await openAt('/')
    const pages = [...document.querySelectorAll('nav[aria-label="Pages"] a')].map((link) => link.textContent?.trim())
    expect(pages.slice(0, 5)).toEqual(['Watch', 'Stations', 'Places', 'Alerts', 'Limits'])
    expect(pages).not.toContain('Set-up')
    expect(document.querySelector('.demo')?.textContent).toContain('Demonstration data')
    expect(document.title).toBe('Watch – Offing')
    FakeWebSocket.last.accept()
    FakeWebSocket.last.say({
      type: 'subscribed',
      rooms: [
        { room: 'stations', seq: 0 },
        { room: 'system', seq: 0 },
      ],
      refused: [],
    })
    await flushPromises()
    expect(document.querySelector('.strip')?.textContent).toContain('1 of 1 live')
  })

  it('says read-only under the offing line and stays live', async () => {
    server.on('/api/session', { body: session({ readOnly: true }) })
    await openAt('/watch')
    expect(document.querySelector('[aria-label="Read only"]')?.textContent).toContain('Figures stay live')
    expect(FakeWebSocket.opened).toHaveLength(1)
  })

  it('asks on the page to sign in again when the session has ended, and connects anew after that', async () => {
    await openAt('/watch')
    FakeWebSocket.last.accept()
    FakeWebSocket.last.end(4401)
    await flushPromises()
    const dialog = document.querySelector('[role="dialog"]')
    expect(dialog?.textContent).toContain('The session has ended on the server')
    expect(document.querySelector('#content')).not.toBeNull()
    const passphrase = dialog?.querySelector('input')
    if (!passphrase) throw new Error('no field for the passphrase')
    passphrase.value = 'lead line and hand lamp'
    passphrase.dispatchEvent(new Event('input'))
    dialog?.querySelector('form')?.dispatchEvent(new Event('submit', { cancelable: true }))
    await flushPromises()
    expect(useSession().state).toBe('in')
    expect(FakeWebSocket.opened).toHaveLength(2)
  })

  it('does not let a person believe to be signed out when no answer came', async () => {
    await openAt('/watch')
    server.on('/api/session', () => Promise.reject(new TypeError('no route to the server')))
    document.querySelector<HTMLButtonElement>('button.account')?.click()
    await flushPromises()
    const signOut = [...document.querySelectorAll('button')].find((button) => button.textContent === 'Sign out')
    signOut?.click()
    await flushPromises()
    expect(document.body.textContent).toContain('Not signed out')
    expect(useSession().state).toBe('in')
  })

  it('says so where an address leads nowhere', async () => {
    await openAt('/somewhere/else')
    expect(document.querySelector('main')?.textContent).toContain('The address leads to nothing that Offing has.')
  })
})
