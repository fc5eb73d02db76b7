/** The server's clock is set forward by an hour and back again: nothing is told twice, and nothing sleeps for an hour. */
import { describe, expect, it } from 'vitest'
import { startDeliverMail } from '../../server/jobs/deliverMail.ts'
import { escalate } from '../../server/jobs/escalate.ts'
import { Alert, Delivery, Escalation, Message } from '../../server/models/index.ts'
import { makeList } from '../support/alerts.ts'
import { makePerson } from '../support/factories.ts'
import { at, judgedStation } from '../support/judgedStation.ts'

const held = judgedStation()
const accepted = { send: async () => ({ kind: 'accepted' as const, reply: '250 taken' }) }
const kindsOf = async (alertId: number): Promise<string[]> =>
  (await Message.findAll({ where: { alertId }, order: [['id', 'ASC']] })).map(({ kind }) => kind)

/** One turn of every job that alerts hang on. */
async function turn(): Promise<void> {
  await held.judge()
  await escalate(held.parts)
  const mail = await startDeliverMail(held.parts, { isUntimed: true, transport: accepted })
  await mail.run()
  await mail.stop()
}
const staleLimit = async (): Promise<number> => {
  const { body } = await held.desk.get('/api/limits').expect(200)
  return body.find(({ limitClass }: { limitClass: string }) => limitClass === 'dataHealth').id
}

describe('set forward by an hour and back', () => {
  it('the clock calls figures stale once, and takes it back in the first minute after', async () => {
    await held.setLimit()
    const stale = await staleLimit()
    await held.sea(0, 2)
    expect((await held.state(stale)).state).toBe('normal')
    held.parts.clock.set(at(63))
    await turn()
    expect((await held.state(stale)).state).toBe('unacknowledgedActive')
    await held.sea(4, 4)
    expect(await held.state(stale)).toMatchObject({ state: 'returnedUnacknowledged', isActive: false })
    await held.sea(5, 6)
    expect(await held.alerts(stale)).toHaveLength(1)
  })

  it('an alert on waves stays the one it was, raised by no window twice', async () => {
    const limitId = await held.setLimit()
    await held.sea(0, 12, { height: 2.8 })
    const [before] = await held.alerts(limitId)
    const told = await kindsOf(before?.id ?? 0)
    held.parts.clock.set(at(73))
    await turn()
    held.parts.clock.set(at(14))
    await held.sea(14, 16, { height: 2.8 })
    const after = await held.alerts(limitId)
    expect(after.map(({ id, state }) => [id, state])).toEqual([[before?.id, 'unacknowledgedActive']])
    expect((await kindsOf(before?.id ?? 0)).filter((kind) => kind === 'alert')).toEqual(told)
    expect((await held.events(before?.id ?? 0)).filter((kind) => kind === 'raised')).toHaveLength(1)
  })

  it('readings whose windows lie ahead of the clock are judged when the clock has come to them', async () => {
    const limitId = await held.setLimit()
    await held.sea(0, 2)
    held.parts.clock.set(at(-58))
    await held.estimate(3, { height: 2.8 })
    await turn()
    expect((await held.state(limitId)).state).toBe('normal')
    await held.sea(4, 16, { height: 2.8 })
    expect((await held.state(limitId)).state).toBe('unacknowledgedActive')
  })
})

describe('steps and reminders', () => {
  async function raised() {
    // People of their own: in the flood of all these tests nobody else's e-mails would go by themselves.
    const [duty, office] = [await makePerson(held.parts.clock), await makePerson(held.parts.clock, { role: null })]
    const steps = [
      { afterSeconds: 0, listIds: [await makeList(held.parts, 'Duty', [duty.id])] },
      { afterSeconds: 960, listIds: [await makeList(held.parts, 'Office', [office.id])] },
    ]
    const limitId = await held.setLimit({ recipients: { steps, remindEverySeconds: 480 } })
    await held.sea(0, 10, { height: 2.8 })
    await turn()
    const [alert] = await held.alerts(limitId)
    return alert ?? new Alert()
  }

  it('come once each when the clock is set forward, and go on at their distance when it is set back', async () => {
    const alert = await raised()
    expect(await kindsOf(alert.id)).toEqual(['alert'])
    held.parts.clock.set(at(71))
    await turn()
    expect((await kindsOf(alert.id)).sort()).toEqual(['alert', 'escalation', 'reminder'])
    held.parts.clock.set(at(12))
    await turn()
    const first = await Escalation.findOne({ where: { alertId: alert.id, step: 0 } })
    expect(first?.nextReminderAt?.getTime()).toBeLessThanOrEqual(at(20).getTime())
    const count = (await kindsOf(alert.id)).length
    held.parts.clock.set(at(21))
    await turn()
    expect((await kindsOf(alert.id)).length).toBeGreaterThan(count)
  })

  it('stored before the clock was set back do not wait for it: the step comes in the next turn', async () => {
    const alert = await raised()
    held.parts.clock.set(at(-50))
    await turn()
    expect(await kindsOf(alert.id)).toContain('escalation')
  })

  it('no e-mail is lost or sent twice over both jumps', async () => {
    const alert = await raised()
    for (const minutes of [71, 12, 13, 30]) {
      held.parts.clock.set(at(minutes))
      await turn()
    }
    const messages = await Message.findAll({ where: { alertId: alert.id } })
    const deliveries = await Delivery.findAll({ where: { messageId: messages.map(({ id }) => id) } })
    const ends = deliveries.map(({ state, attempts }) => `${state} at try ${attempts}`)
    expect([...new Set(ends)]).toEqual(['accepted at try 1'])
    const keys = deliveries.map(({ messageId, personId }) => `${messageId}/${personId}`)
    expect(new Set(keys).size).toBe(keys.length)
  })
})
