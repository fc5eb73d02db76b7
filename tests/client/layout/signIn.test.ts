import { flushPromises, mount } from '@vue/test-utils'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import CredentialsForm from '../../../src/components/session/CredentialsForm.vue'
import { firstAdministratorFaults } from '../../../src/components/session/firstAdministratorFaults.ts'
import { FakeServer } from '../support/fakeServer.ts'
import { session } from '../support/views.ts'

let server: FakeServer

beforeEach(() => {
  setActivePinia(createPinia())
  server = new FakeServer().install()
})
afterEach(() => {
  vi.unstubAllGlobals()
})

describe('sign-in form', () => {
  it('asks for what is missing in words, without asking the server', async () => {
    const form = mount(CredentialsForm)
    await form.find('form').trigger('submit')
    expect(form.text()).toContain('Write your name or e-mail address.')
    expect(form.text()).toContain('Write your passphrase.')
    expect(form.findAll('input[aria-invalid=true]')).toHaveLength(2)
    expect(server.requests).toEqual([])
  })

  it('tells a refusal under the passphrase and keeps what was written', async () => {
    server.on('/api/session', {
      status: 429,
      body: {
        type: 'about:blank',
        title: 'Wait',
        status: 429,
        code: 'session.throttled',
        detail: 'Try again in 30 s.',
      },
    })
    const form = mount(CredentialsForm)
    const [name, passphrase] = form.findAll('input')
    await name?.setValue('b2@marrowick.example')
    await passphrase?.setValue('wrong')
    await form.find('form').trigger('submit')
    await flushPromises()
    expect(form.text()).toContain('Try again in 30 s.')
    expect(form.emitted('done')).toBeUndefined()
    expect(passphrase?.element.value).toBe('wrong')
  })

  it('shows the passphrase when asked, and signs in', async () => {
    server.on('/api/session', { body: session() })
    const form = mount(CredentialsForm, { props: { email: 'b2@marrowick.example', fixedEmail: true } })
    const passphrase = form.find('input')
    await passphrase.setValue('lead line and hand lamp')
    await form.find('button[aria-label="Show the passphrase"]').trigger('click')
    expect(passphrase.attributes('type')).toBe('text')
    await form.find('form').trigger('submit')
    await flushPromises()
    expect(form.emitted('done')).toHaveLength(1)
  })
})

describe('details of the first administrator', () => {
  const good = { token: 'x'.repeat(24), name: 'Ada', email: 'ada@port.example', password: 'four plain words here' }

  it('are free of faults when whole', () => {
    expect(firstAdministratorFaults(good)).toEqual({})
  })

  it('are refused field by field', () => {
    expect(Object.keys(firstAdministratorFaults({ token: 'x', name: ' ', email: 'ada', password: 'short' }))).toEqual([
      'token',
      'name',
      'email',
      'password',
    ])
  })

  it('count a passphrase in bytes at its upper end', () => {
    expect(firstAdministratorFaults({ ...good, password: 'ä'.repeat(36) })).toEqual({})
    expect(firstAdministratorFaults({ ...good, password: 'ä'.repeat(37) }).password).toContain('72 bytes')
  })
})
