import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { inWords } from '../../../src/api/problem.ts'
import { useServerClock } from '../../../src/stores/serverClock.ts'
import { useSession } from '../../../src/stores/session.ts'
import { FakeServer } from '../support/fakeServer.ts'
import { session } from '../support/views.ts'

const wrong = {
  type: 'about:blank',
  title: 'Not signed in',
  status: 401,
  code: 'session.wrongPassword',
  detail: 'This name and this passphrase do not belong together.',
}
let server: FakeServer

describe('session', () => {
  beforeEach(() => {
    setActivePinia(createPinia())
    server = new FakeServer().install()
  })
  afterEach(() => {
    vi.unstubAllGlobals()
  })

  it('is out when the server knows nobody', async () => {
    server.on('/api/session', { status: 401, body: { ...wrong, code: 'session.none' } })
    const person = useSession()
    await person.restore()
    expect(person.state).toBe('out')
  })

  it('stays unknown when no answer comes', async () => {
    const person = useSession()
    await expect(person.restore()).rejects.toThrow()
    expect(person.state).toBe('unknown')
  })

  it('holds who signed in and the time of the server', async () => {
    server.on('/api/session', { body: session() })
    const person = useSession()
    await person.signIn({ email: 'b2@marrowick.example', password: 'lead line and hand lamp' })
    expect(person.state).toBe('in')
    expect(person.person?.name).toBe('B-2')
    expect(useServerClock().known).toBe(true)
    expect(server.requests[0]?.body).toEqual({ email: 'b2@marrowick.example', password: 'lead line and hand lamp' })
  })

  it('offers what the role may see, by the table that the server asks too', async () => {
    const person = useSession()
    expect(person.allows('stations.read')).toBe(false)
    person.apply(session())
    expect(person.allows('stations.read')).toBe(true)
    expect(person.allows('audits.read')).toBe(false)
  })

  it('says in words what the server refused, and what no answer means', async () => {
    server.on('/api/session', { status: 401, body: wrong })
    const person = useSession()
    const refused = await person.signIn({ email: 'x', password: 'y' }).catch((error: unknown) => error)
    expect(inWords(refused)).toBe('This name and this passphrase do not belong together.')
    server.answers.clear()
    const silent = await person.signIn({ email: 'x', password: 'y' }).catch((error: unknown) => error)
    expect(inWords(silent)).toContain('No answer from the server')
  })

  it('comes to an end only where somebody was in', () => {
    const person = useSession()
    person.end()
    expect(person.state).toBe('unknown')
    person.apply(session())
    person.end()
    expect(person.state).toBe('ended')
  })
})
