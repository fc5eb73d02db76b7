import { afterEach, beforeAll, beforeEach, describe, expect, test } from 'vitest'
import { startDeliverMail } from '../../server/jobs/deliverMail.ts'
import type { DeliverMail, DeliverMailOptions } from '../../server/jobs/deliverMail.ts'
import { createTransport } from '../../server/mail/transport.ts'
import { Delivery, LogEntry, Message, Person } from '../../server/models/index.ts'
import { leaseDeliveries, settleDelivery } from '../../server/services/deliveries.ts'
import { queueMessages } from '../../server/services/messages.ts'
import { makeLimit, makeList, raiseAlert, tell } from '../support/alerts.ts'
import { makePerson } from '../support/factories.ts'
import { startSilentServer, startTestMailServer } from '../support/mailCatcher.ts'
import type { TestMailServer } from '../support/mailCatcher.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
let server: TestMailServer
let mail: DeliverMail

beforeAll(async () => {
  parts = await testParts()
})

const from = 'Harbour watch <watch@harbour.example>'
const transportTo = (url: string, patienceMs?: number) =>
  createTransport({ url, from, clientName: 'localhost', patienceMs })
const begin = (options: DeliverMailOptions = {}) =>
  startDeliverMail(parts, { isUntimed: true, transport: transportTo(server.url), ...options })

beforeEach(async () => {
  // Nothing of an earlier test is left waiting.
  await Delivery.update({ nextAttemptAt: null }, { where: {} })
  await Message.update({ queuedAt: parts.clock.now() }, { where: { queuedAt: null } })
  parts.clock.advance(24 * 3600)
  server = await startTestMailServer()
  mail = await begin()
})

afterEach(async () => {
  await mail.stop()
  await server.stop()
})

/** An alert that goes to some new people at once. */
async function raised(count: number) {
  const people = await Promise.all(Array.from({ length: count }, () => makePerson(parts.clock, { role: null })))
  const listId = await makeList(parts, 'Pilots', people.map(({ id }) => id)) // prettier-ignore
  const version = await makeLimit(parts, { steps: [{ afterSeconds: 0, listIds: [listId] }] })
  return { people, version, listId, alert: await raiseAlert(parts, version) }
}

const addressOf = ({ email }: Person): string => email ?? ''
const deliveryTo = async (person: Person) => Delivery.findOne({ where: { personId: person.id }, rejectOnEmpty: true })
const statesOf = async (people: Person[]) => (await Promise.all(people.map(deliveryTo))).map(({ state }) => state)

describe('an e-mail of an alert', () => {
  test('goes once to each person, accepted by the mail server, with links, both times, value and caution', async () => {
    const { people, alert } = await raised(3)
    await mail.run()
    await mail.run()
    expect(server.caught.map(({ to }) => to).sort()).toEqual(people.map(addressOf).sort())
    expect(await statesOf(people)).toEqual(['accepted', 'accepted', 'accepted'])
    const [{ mail: first }] = server.caught
    expect(first.subject).toBe('High: Total height, Outer Ledge 2.61 m ± 0.14')
    for (const body of [first.text ?? '', first.html || '']) {
      expect(body).toContain('2.61 m ± 0.14')
      expect(body).toContain('Figures support and never replace judgement.')
      expect(body).toContain(`${parts.environment.publicUrl}/alerts/${alert.id}`)
      expect(body).toMatch(/\/receipt\/[\w.-]{40,}/)
    }
    const links = server.caught.map((one) => /receipt\/([\w.-]+)/.exec(one.mail.text ?? '')?.[1])
    expect(new Set(links).size).toBe(3)
    expect(await Person.count({ where: { id: people.map(({ id }) => id), mailHealth: 'accepted' } })).toBe(3)
  })

  test('refused for one address for good leaves the others as they are and marks that person', async () => {
    const { people, alert } = await raised(3)
    server.answers.set(addressOf(people[1]), [[550, 'No such mailbox here']])
    await mail.run()
    expect(await statesOf(people)).toEqual(['accepted', 'refused', 'accepted'])
    const dead = await deliveryTo(people[1])
    expect(dead.smtpReply).toContain('550')
    expect((await Person.findByPk(people[1].id))?.mailHealth).toBe('refused')
    const lines = await LogEntry.findAll({ where: { kind: 'message' }, order: [['id', 'DESC']] })
    expect(lines[0].text).toContain(people[1].name)
    expect(lines[0].links).toMatchObject({ alertId: alert.id })
    parts.clock.advance(3600)
    await mail.run()
    expect(server.caught).toHaveLength(2)
  })

  test('put off with 451 is tried again and delivered once, at the second try', async () => {
    const { people } = await raised(1)
    server.answers.set(addressOf(people[0]), [[451, 'Greylisted, come again']])
    await mail.run()
    expect(await statesOf(people)).toEqual(['queued'])
    await mail.run()
    expect(server.asked).toHaveLength(1)
    parts.clock.advance(60)
    await mail.run()
    const delivery = await deliveryTo(people[0])
    expect([delivery.state, delivery.attempts, server.caught.length]).toEqual(['accepted', 2, 1])
  })

  test('taken whole and then cut off is unknown, goes once more with the same Message-ID and says so', async () => {
    const { people } = await raised(1)
    server.dropAfterData = 1
    await mail.run()
    expect(await statesOf(people)).toEqual(['unknown'])
    parts.clock.advance(60)
    await mail.run()
    parts.clock.advance(3600)
    await mail.run()
    expect(await statesOf(people)).toEqual(['accepted'])
    expect(server.caught).toHaveLength(2)
    const [first, second] = server.caught.map(({ mail: one }) => one)
    expect(second.messageId).toBe(first.messageId)
    expect(first.text).not.toContain('twice')
    expect(second.text).toContain('It may reach you twice')
  })

  test('cut off a second time too is sent no third time and stands as unknown', async () => {
    const { people } = await raised(1)
    server.dropAfterData = 5
    for (const seconds of [0, 60, 3600]) {
      parts.clock.advance(seconds)
      await mail.run()
    }
    const delivery = await deliveryTo(people[0])
    expect([delivery.state, delivery.nextAttemptAt, server.caught.length]).toEqual(['unknown', null, 2])
  })

  test('to a server that never greets fails at the end of its patience, and the others wait untried', async () => {
    const silent = await startSilentServer()
    const stalled = await begin({ transport: transportTo(silent.url, 100) })
    const { people } = await raised(5)
    await stalled.run()
    await stalled.stop()
    await silent.stop()
    expect(await statesOf(people)).toEqual(Array(5).fill('queued'))
    const attempts = (await Promise.all(people.map(deliveryTo))).map((one) => one.attempts)
    expect(Math.max(...attempts)).toBe(1)
    expect(Math.min(...attempts)).toBe(0)
    parts.clock.advance(60)
    await mail.run()
    expect(server.caught).toHaveLength(5)
  })

  test('while nothing listens for ten minutes is lost for nobody, in at most 12 tries', async () => {
    const { people } = await raised(4)
    const { port } = server
    await server.stop()
    for (let second = 0; second < 600; second += 5) {
      parts.clock.advance(5)
      await mail.run()
    }
    const tries = (await Promise.all(people.map(deliveryTo))).map(({ attempts }) => attempts)
    expect(Math.max(...tries)).toBeLessThanOrEqual(12)
    server = await startTestMailServer(port)
    parts.clock.advance(16 * 60)
    await mail.run()
    expect(server.caught.map(({ to }) => to).sort()).toEqual(people.map(addressOf).sort())
  })

  test('put off for half a day is given up, and that stands in the watch log', async () => {
    const { people } = await raised(1)
    server.answers.set(addressOf(people[0]), Array(200).fill([451, 'Not now']))
    for (let minute = 0; minute < 13 * 60; minute += 20) {
      parts.clock.advance(1200)
      await mail.run()
    }
    expect(await statesOf(people)).toEqual(['givenUp'])
    const [line] = await LogEntry.findAll({ where: { kind: 'message' }, order: [['id', 'DESC']], limit: 1 })
    expect(line.text).toContain('given up after many tries')
  })
})

describe('a program that ended', () => {
  test('between the alert and its e-mail sends it after the next start', async () => {
    const { people } = await raised(2)
    await mail.stop()
    mail = await begin()
    await mail.run()
    expect(server.caught).toHaveLength(2)
    expect(await statesOf(people)).toEqual(['accepted', 'accepted'])
  })

  test('with e-mails leased and not handed over sends each once', async () => {
    const { people } = await raised(2)
    await queueMessages(parts, 'Etc/UTC')
    expect(await leaseDeliveries(parts, 10)).toHaveLength(2)
    await mail.run()
    expect(server.caught).toHaveLength(0)
    parts.clock.advance(61)
    await mail.run()
    expect(server.caught).toHaveLength(2)
    expect((await Promise.all(people.map(deliveryTo))).map(({ unknownCount }) => unknownCount)).toEqual([0, 0])
  })

  test('after it had handed one over does not know, and sends it once more', async () => {
    const { people } = await raised(1)
    await queueMessages(parts, 'Etc/UTC')
    await leaseDeliveries(parts, 10)
    const delivery = await deliveryTo(people[0])
    await delivery.update({ handedOverAt: parts.clock.now() })
    await mail.stop()
    mail = await begin()
    await mail.run()
    expect(server.caught.map(({ mail: one }) => one.messageId)).toEqual([delivery.messageIdHeader])
    expect((await deliveryTo(people[0])).unknownCount).toBe(1)
  })

  test('and settles late changes nothing but an acceptance', async () => {
    const { people } = await raised(1)
    await queueMessages(parts, 'Etc/UTC')
    const [late] = await leaseDeliveries(parts, 10)
    parts.clock.advance(61)
    await mail.run()
    await settleDelivery(parts, late, { kind: 'refused', reply: '550 No' })
    expect(await statesOf(people)).toEqual(['accepted'])
  })
})

describe('a clock that is set back an hour', () => {
  test('keeps no e-mail waiting for an hour', async () => {
    const { people } = await raised(1)
    server.answers.set(addressOf(people[0]), [[451, 'Not now']])
    await mail.run()
    parts.clock.set(new Date(parts.clock.now().getTime() - 3600_000))
    await mail.run()
    expect(await statesOf(people)).toEqual(['accepted'])
  })
})

describe('a rate', () => {
  test('lets no more e-mails out than were allowed, and the rest later', async () => {
    await mail.stop()
    mail = await begin({ mostAMinute: 4 })
    await raised(10)
    await mail.run()
    expect(server.caught).toHaveLength(4)
    parts.clock.advance(60)
    await mail.run()
    expect(server.caught).toHaveLength(8)
  })
})

describe('in a flood', () => {
  test('ten e-mails go by themselves, and one more brings the news of the rest with their count', async () => {
    const { people, listId } = await raised(1)
    for (let n = 0; n < 39; n += 1) {
      const version = await makeLimit(parts, { steps: [{ afterSeconds: 0, listIds: [listId] }], priority: 'medium' })
      await raiseAlert(parts, version, { title: `Limit ${n}` })
    }
    await mail.run()
    const subjects = server.subjectsTo(addressOf(people[0]))
    expect(subjects).toHaveLength(11)
    const root = server.caught.find(({ mail: one }) => one.subject?.startsWith('30 more alerts'))
    expect(root?.mail.text).toContain('Medium: Limit 38, Outer Ledge')
    expect(root?.mail.text).toMatch(/receipt\/[\w.-]+/)
    expect(await Delivery.count({ where: { personId: people[0].id, state: 'merged' } })).toBe(30)
    const message = await Message.findOne({ where: { kind: 'flood' }, order: [['id', 'DESC']], rejectOnEmpty: true })
    expect(await Delivery.count({ where: { rootMessageId: message.id } })).toBe(30)
    expect(await Message.count({ where: { rootMessageId: message.id } })).toBe(30)
  })

  test('what comes after the e-mail that lists the rest waits five minutes for the next one, but an urgent one goes', async () => {
    const { people, listId } = await raised(1)
    const another = async (priority: 'low' | 'urgent') =>
      raiseAlert(parts, await makeLimit(parts, { steps: [{ afterSeconds: 0, listIds: [listId] }], priority }))
    for (let n = 0; n < 11; n += 1) await another('low')
    await mail.run()
    const before = server.caught.length
    await another('low')
    await another('urgent')
    await mail.run()
    expect(server.caught.slice(before).map(({ mail: one }) => one.subject)).toEqual([
      'Urgent: Total height, Outer Ledge 2.61 m ± 0.14',
    ])
    parts.clock.advance(301)
    await mail.run()
    expect(server.subjectsTo(addressOf(people[0])).at(-1)).toMatch(/^1 more alert/)
  })
})

describe('an all-clear', () => {
  test('goes to those who were told, without a link that confirms', async () => {
    const { people, alert } = await raised(2)
    await mail.run()
    await alert.update({ state: 'returnedUnacknowledged', clearedAt: parts.clock.now() })
    await tell(parts, alert, 'allClear')
    await mail.run()
    const clear = server.caught.slice(2)
    expect(clear.map(({ to }) => to).sort()).toEqual(people.map(addressOf).sort())
    expect(clear[0].mail.subject).toContain('cleared')
    expect(clear[0].mail.text).toContain('This does not mean that it is safe')
    expect(clear[0].mail.text).not.toContain('/receipt/')
  })
})

describe('an exercise', () => {
  test('says so in the subject, above and below the text and in the HTML', async () => {
    const { version } = await raised(1)
    await raiseAlert(parts, await makeLimit(parts, { steps: version.steps.steps }), { isExercise: true })
    await mail.run()
    const drill = server.caught.find(({ mail: one }) => one.subject?.startsWith('EXERCISE'))
    expect(drill?.mail.text?.match(/EXERCISE EXERCISE EXERCISE/g)).toHaveLength(2)
    expect(String(drill?.mail.html).match(/EXERCISE EXERCISE EXERCISE/g)).toHaveLength(2)
  })
})
