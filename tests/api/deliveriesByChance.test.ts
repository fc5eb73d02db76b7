import { beforeAll, expect, test } from 'vitest'
import { startDeliverMail } from '../../server/jobs/deliverMail.ts'
import type { SendResult, Transport } from '../../server/mail/transport.ts'
import { Delivery } from '../../server/models/index.ts'
import { makeLimit, makeList, raiseAlert } from '../support/alerts.ts'
import { makePerson } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { seeded } from '../support/seeded.ts'

let parts: TestParts
beforeAll(async () => {
  parts = await testParts()
})

interface Post {
  transport: Transport
  /** Copies taken whole, by address. */
  taken: Map<string, number>
  /** Tries whose outcome nobody could know. */
  unknown: Map<string, number>
}

const add = (counts: Map<string, number>, key: string) => counts.set(key, (counts.get(key) ?? 0) + 1)

/** A mail server and a program that fail at every place where they can. */
function unrulyPost(chance: () => number): Post {
  const post: Omit<Post, 'transport'> = { taken: new Map(), unknown: new Map() }
  async function send(to: string, beforeData: () => Promise<boolean>): Promise<SendResult> {
    const dice = chance()
    if (dice < 0.15) return { kind: 'later', reply: 'ECONNREFUSED', isServerDown: true }
    if (dice < 0.3) return { kind: 'later', reply: '451 come again', isServerDown: false }
    if (!(await beforeData())) return { kind: 'later', reply: 'lease lost', isServerDown: false }
    if (dice < 0.4) {
      add(post.taken, to)
      add(post.unknown, to)
      return { kind: 'unknown', reply: 'cut after the e-mail' }
    }
    if (dice < 0.45) {
      add(post.unknown, to)
      return { kind: 'unknown', reply: 'cut before it had all' }
    }
    add(post.taken, to)
    return { kind: 'accepted', reply: '250' }
  }
  return { ...post, transport: { send: (_written, { to, beforeData }) => send(to, beforeData) } }
}

test.each([1, 2, 3])(
  'whatever fails (seed %i), nobody is lost, and a second copy goes only to whom the first is not known',
  async (seed) => {
    const chance = seeded(seed)
    const people = await Promise.all(Array.from({ length: 6 }, () => makePerson(parts.clock, { role: null })))
    const listIds = [await makeList(parts, 'Everybody', people.map(({ id }) => id))] // prettier-ignore
    const version = await makeLimit(parts, { steps: [{ afterSeconds: 0, listIds }] })
    await raiseAlert(parts, version)
    const { transport, taken, unknown } = unrulyPost(chance)
    for (let tries = 0; tries < 40; tries += 1) {
      // Half of the time the program ends and begins again, with whatever was leased.
      const mail = await startDeliverMail(parts, { isUntimed: true, transport })
      await mail.run()
      if (chance() < 0.5) parts.clock.advance(30)
      await mail.run()
      await mail.stop()
      parts.clock.advance(900)
    }
    const deliveries = await Delivery.findAll({ where: { personId: people.map(({ id }) => id) } })
    expect(deliveries).toHaveLength(6)
    for (const { address, state, unknownCount } of deliveries) {
      const copies = taken.get(address) ?? 0
      expect(state === 'accepted' || unknownCount === 2).toBe(true)
      if (state === 'accepted') expect(copies).toBeGreaterThanOrEqual(1)
      expect(copies).toBeLessThanOrEqual(1 + (unknown.get(address) ?? 0))
      expect(copies).toBeLessThanOrEqual(2)
    }
  },
)
