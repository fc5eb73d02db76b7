import { afterEach, beforeAll, beforeEach, describe, expect, test } from 'vitest'
import { escalate } from '../../server/jobs/escalate.ts'
import { startDeliverMail } from '../../server/jobs/deliverMail.ts'
import type { DeliverMail } from '../../server/jobs/deliverMail.ts'
import { createTransport } from '../../server/mail/transport.ts'
import { Absence, Escalation, LogEntry, SettingVersion } from '../../server/models/index.ts'
import type { Alert, Person } from '../../server/models/index.ts'
import { confirmReceipt } from '../../server/services/receipts.ts'
import { makeLimit, makeList, raiseAlert } from '../support/alerts.ts'
import { makePerson } from '../support/factories.ts'
import { startTestMailServer } from '../support/mailCatcher.ts'
import type { TestMailServer } from '../support/mailCatcher.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
let server: TestMailServer
let mail: DeliverMail
const zone = 'Europe/Lisbon'

beforeAll(async () => {
  parts = await testParts()
  const content = { portName: 'Harbour', timeZone: zone }
  await SettingVersion.create({ groupName: 'port', content, validFrom: new Date('2020-01-01'), reason: 'test' })
})

beforeEach(async () => {
  parts.clock.set('2026-12-01T12:00:00Z')
  server = await startTestMailServer()
  const from = 'watch@harbour.example'
  const transport = createTransport({ url: server.url, from, clientName: 'localhost' })
  mail = await startDeliverMail(parts, { isUntimed: true, transport, mostAMinute: 10_000 })
})

afterEach(async () => {
  await Escalation.update({ endedAt: parts.clock.now() }, { where: { endedAt: null } })
  await mail.stop()
  await server.stop()
})

/** Some time passes, and both jobs look. */
async function pass(seconds: number): Promise<void> {
  parts.clock.advance(seconds)
  await escalate(parts)
  await mail.run()
}

const makeRecipient = (given: { name?: string } = {}) => makePerson(parts.clock, { role: null, ...given })
const subjects = (person: Person) => server.subjectsTo(person.email ?? '').map((subject) => subject.split(':')[0])
const stepsOf = (alert: Alert) => Escalation.findAll({ where: { alertId: alert.id }, order: [['step', 'ASC']] })

/** Two steps, the second after 16 min; reminders every 8 min. */
async function raisedInSteps() {
  const [pilot, mate, office] = [await makeRecipient(), await makeRecipient(), await makeRecipient()]
  const first = await makeList(parts, 'Pilots', [pilot.id, mate.id])
  const second = await makeList(parts, 'Harbour office', [pilot.id, office.id])
  const steps = [
    { afterSeconds: 0, listIds: [first] },
    { afterSeconds: 960, listIds: [second] },
  ]
  const alert = await raiseAlert(parts, await makeLimit(parts, { steps, remindEverySeconds: 480 }))
  return { pilot, mate, office, alert }
}

const tokenTo = (person: Person): string =>
  /receipt\/([\w.-]+)/.exec(server.caught.find(({ to }) => to === person.email)?.mail.text ?? '')?.[1] ?? ''

const confirm = (person: Person) => confirmReceipt(parts, tokenTo(person))

describe('without a receipt', () => {
  test('people are reminded at the stored times, and the next step tells those who were not told yet', async () => {
    const { pilot, mate, office, alert } = await raisedInSteps()
    await pass(0)
    expect([subjects(pilot), subjects(mate), subjects(office)]).toEqual([['High'], ['High'], []])
    await pass(479)
    expect(subjects(pilot)).toEqual(['High'])
    await pass(1)
    expect(subjects(pilot)).toEqual(['High', 'High, reminder'])
    await pass(480)
    expect(subjects(office)).toEqual(['High, not confirmed yet'])
    expect(subjects(pilot)).toEqual(['High', 'High, reminder', 'High, reminder'])
    expect((await stepsOf(alert)).map(({ sentAt }) => sentAt?.toISOString())).toEqual([
      '2026-12-01T12:00:00.000Z',
      '2026-12-01T12:16:00.000Z',
    ])
  })

  test('the e-mail itself says when the next one comes and who is told then, in both times', async () => {
    const { pilot } = await raisedInSteps()
    await pass(0)
    const text = server.caught.find(({ to }) => to === pilot.email)?.mail.text ?? ''
    expect(text).toContain(
      'Without a receipt you get the next e-mail at 12:08 UTC (12:08 local); at 12:16 UTC (12:16 local) Harbour office will be told.',
    )
  })

  test('a stop of hours brings one reminder and the step that was due, not one for each time missed', async () => {
    const { pilot, office } = await raisedInSteps()
    await pass(0)
    await pass(6 * 3600)
    await pass(1)
    expect(subjects(pilot)).toEqual(['High', 'High, reminder'])
    expect(subjects(office)).toEqual(['High, not confirmed yet'])
  })

  test('steps end when an operator acknowledges, reminders when the alert is over', async () => {
    const { pilot, office, alert } = await raisedInSteps()
    await pass(0)
    await alert.update({ state: 'acknowledgedActive', acknowledgedAt: parts.clock.now() })
    await pass(961)
    expect([subjects(pilot), subjects(office)]).toEqual([['High', 'High, reminder'], []])
    await alert.update({ state: 'normal', closedAt: parts.clock.now() })
    await pass(961)
    expect(subjects(pilot)).toEqual(['High', 'High, reminder'])
    expect((await stepsOf(alert)).every(({ endedAt }) => endedAt !== null)).toBe(true)
  })

  test('while the alert is shelved nobody is told, and what was due comes when it returns', async () => {
    const { office, alert } = await raisedInSteps()
    await pass(0)
    await alert.update({ state: 'shelved' })
    await pass(961)
    expect(subjects(office)).toEqual([])
    await alert.update({ state: 'unacknowledgedActive' })
    await pass(5)
    expect(subjects(office)).toEqual(['High, not confirmed yet'])
  })
})

describe('in a flood', () => {
  test('one e-mail reminds of all that a person has not confirmed, and of none confirmed meanwhile', async () => {
    const pilot = await makeRecipient()
    const steps = [{ afterSeconds: 0, listIds: [await makeList(parts, 'Pilots', [pilot.id])] }]
    for (let n = 0; n < 24; n += 1) {
      await raiseAlert(parts, await makeLimit(parts, { steps, remindEverySeconds: 480 }), { title: `Limit ${n}` })
    }
    await pass(0)
    expect(subjects(pilot)).toHaveLength(11)
    await confirm(pilot)
    await pass(480)
    const reminders = subjects(pilot).slice(11)
    expect(reminders).toEqual(['23 more alerts without your receipt, first high'])
  })
})

describe('a confirmed receipt', () => {
  test('stops the reminders of that person, not of the other one in the step, and the steps to come', async () => {
    const { pilot, mate, office, alert } = await raisedInSteps()
    await pass(0)
    parts.clock.advance(120)
    await confirm(pilot)
    await pass(960)
    expect([subjects(pilot), subjects(mate), subjects(office)]).toEqual([['High'], ['High', 'High, reminder'], []])
    const [first, second] = await stepsOf(alert)
    expect([first.satisfiedById, first.satisfiedAt?.toISOString()]).toEqual([pilot.id, '2026-12-01T12:02:00.000Z'])
    expect(second.endedAt).not.toBeNull()
    await alert.reload()
    expect([alert.state, alert.acknowledgedAt]).toEqual(['unacknowledgedActive', null])
  })

  test('of everybody ends the reminders', async () => {
    const { pilot, mate, alert } = await raisedInSteps()
    await pass(0)
    await confirm(pilot)
    await confirm(mate)
    await pass(481)
    expect([subjects(pilot), subjects(mate)]).toEqual([['High'], ['High']])
    expect((await stepsOf(alert))[0].endedAt).not.toBeNull()
  })
})

describe('who is told', () => {
  const told = async (members: Parameters<typeof makeList>[2], priority: 'low' | 'high' = 'high') => {
    const listId = await makeList(parts, 'List', members)
    await raiseAlert(
      parts,
      await makeLimit(parts, { steps: [{ afterSeconds: 0, listIds: [listId, listId] }], priority }),
    )
    const before = server.caught.length
    await pass(0)
    return server.caught.slice(before).map(({ to }) => to)
  }
  const everyDay = [1, 2, 3, 4, 5, 6, 7]

  test('is each person once, however many lists name them', async () => {
    const person = await makeRecipient()
    expect(await told([person.id])).toEqual([person.email])
  })

  test('is only who asked for that priority', async () => {
    const person = await makeRecipient()
    expect(await told([{ personId: person.id, priorities: ['high', 'urgent'] }], 'low')).toEqual([])
  })

  test('follows hours over midnight by the clock of the port, each night belonging to the day it begins', async () => {
    const person = await makeRecipient()
    // 3 July 2026 is a Friday; Lisbon is an hour ahead of UTC in summer.
    const hours = { from: '22:00', to: '06:00', days: [5] }
    for (const [at, isTold] of [
      ['2026-07-03T20:59:00Z', false],
      ['2026-07-03T21:00:00Z', true],
      ['2026-07-04T04:59:00Z', true],
      ['2026-07-04T05:00:00Z', false],
      ['2026-07-04T21:30:00Z', false],
    ] as const) {
      parts.clock.set(at)
      expect([at, (await told([{ personId: person.id, hours }])).length]).toEqual([at, isTold ? 1 : 0])
    }
  })

  test('is the deputy while the person is absent, and the person again afterwards', async () => {
    const [person, deputy] = [await makeRecipient(), await makeRecipient()]
    await person.update({ deputyId: deputy.id })
    const startsAt = new Date(parts.clock.now().getTime() - 1000)
    await Absence.create({ personId: person.id, startsAt, endsAt: new Date(startsAt.getTime() + 3600_000) })
    expect(await told([person.id])).toEqual([deputy.email])
    const text = server.caught.at(-1)?.mail.text
    expect(text).toContain(`You receive this as ${deputy.name}, deputy of ${person.name}, who cannot be reached now.`)
    parts.clock.advance(3600)
    expect(await told([person.id])).toEqual([person.email])
    expect(server.caught.at(-1)?.mail.text).toContain(`You receive this as ${person.name}.`)
  })

  test('is the deputy outside the own hours of the person, once although both are on the list', async () => {
    const [person, deputy] = [await makeRecipient(), await makeRecipient()]
    await person.update({ deputyId: deputy.id, hours: { from: '06:00', to: '11:00', days: everyDay } })
    expect(await told([person.id, deputy.id])).toEqual([deputy.email])
  })

  test('where it is nobody, the watch log says so and the next step comes at once', async () => {
    const [away, office] = [await makeRecipient({ name: 'Away' }), await makeRecipient()]
    const now = parts.clock.now()
    await Absence.create({ personId: away.id, startsAt: now, endsAt: new Date(now.getTime() + 3600_000) })
    const steps = [
      { afterSeconds: 0, listIds: [await makeList(parts, 'A', [away.id])] },
      { afterSeconds: 3600, listIds: [await makeList(parts, 'B', [office.id])] },
    ]
    await raiseAlert(parts, await makeLimit(parts, { steps }))
    await pass(0)
    await pass(5)
    expect(subjects(office)).toEqual(['High, not confirmed yet'])
    const [line] = await LogEntry.findAll({ where: { kind: 'message' }, order: [['id', 'DESC']], limit: 1 })
    expect(line.text).toMatch(/step 1: nobody could be told by e-mail\. Not reachable: Away\./)
  })

  test('waits with a first step that is not to be taken at once', async () => {
    const person = await makeRecipient()
    const listIds = [await makeList(parts, 'A', [person.id])]
    const version = await makeLimit(parts, { steps: [{ afterSeconds: 300, listIds }] })
    await raiseAlert(parts, version)
    await pass(299)
    expect(subjects(person)).toEqual([])
    await pass(1)
    expect(subjects(person)).toEqual(['High'])
  })
})

describe('the daily e-mail', () => {
  test('comes once a day at the hour of the port, in summer and in winter, and once after days without it', async () => {
    const operator = await makePerson(parts.clock, { role: 'operator' })
    const counts: [string, number][] = []
    for (const at of [
      // Many days were missed.
      '2027-10-29T05:00:00Z',
      '2027-10-29T06:00:00Z',
      '2027-10-29T06:00:05Z',
      '2027-10-30T05:59:59Z',
      '2027-10-30T06:00:00Z',
      // The clocks went back in the night.
      '2027-10-31T06:00:00Z',
      '2027-10-31T07:00:00Z',
      '2027-11-04T12:00:00Z',
      '2027-11-04T12:00:05Z',
    ]) {
      parts.clock.set(at)
      await pass(0)
      counts.push([at, server.subjectsTo(operator.email ?? '').length])
    }
    expect(counts.map(([, count]) => count)).toEqual([1, 2, 2, 2, 3, 3, 4, 5, 5])
    const [{ mail: first }] = server.caught.filter(({ to }) => to === operator.email)
    expect(first.text).toContain('silence is news')
    expect(first.text).not.toContain('/receipt/')
  })
})
