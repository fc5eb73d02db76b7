/** Limits on the health of the data and of the program itself: each raises, holds while nothing is known, and clears. */
import { afterEach, describe, expect, it } from 'vitest'
import { startJudgeLimits } from '../../server/jobs/judgeLimits.ts'
import { Delivery, Estimate, Message } from '../../server/models/index.ts'
import { officeOf } from '../../server/presenters/office.ts'
import { judgeHealth } from '../../server/services/alerts.ts'
import type { OutsideHealth } from '../../server/services/alerts.ts'
import type { Comparison, DataHealthQuantityKey } from '../../shared/schemas/limit.ts'
import { at, judgedStation, plainCondition } from '../support/judgedStation.ts'

const held = judgedStation()
const usual: OutsideHealth = { clockOffsetOf: () => 0.1, diskFree: 0.6, isSettling: false }

const compare = (kind: 'above' | 'below', quantity: DataHealthQuantityKey, raise: number, clear: number): Comparison =>
  kind === 'below' ? { kind, quantity, raise, clear } : { kind, quantity, raise, clear, riseOverSeconds: null }

async function setLimit(comparison: Comparison, isOfSystem = false): Promise<number> {
  const instant = { onDelaySeconds: 0, offDelaySeconds: 0, clearSigmas: 0 }
  const content = held.contentOf({ condition: { ...plainCondition, ...instant, comparisons: [comparison] } })
  const subject = isOfSystem ? { subjectKind: 'system', subjectId: null } : {}
  const draft = { ...held.draftOf(), content, ...subject }
  return (await held.desk.post('/api/limits').send(draft).expect(201)).body.id
}
/** One moment so many minutes after noon, with what the job knows from outside. */
async function judge(minutes: number, outside: Partial<OutsideHealth> = {}): Promise<void> {
  held.parts.clock.set(at(minutes))
  await judgeHealth(held.parts, await officeOf(held.parts), { ...usual, ...outside })
}
const stateOf = async (limitId: number): Promise<string> => (await held.state(limitId)).state
const raised = 'unacknowledgedActive'
const cleared = 'returnedUnacknowledged'

describe('a limit on', () => {
  it('the age of figures raises when none came, also of a station that never gave one, and clears with the first', async () => {
    const limitId = await setLimit(compare('above', 'dataAge', 900, 900))
    await judge(15)
    expect(await stateOf(limitId)).toBe('normal')
    await judge(16)
    expect(await stateOf(limitId)).toBe(raised)
    await held.estimate(17)
    await judge(17.2)
    expect(await stateOf(limitId)).toBe(cleared)
  })

  it('the age of figures counts failed windows as none, but not those that only have no direction', async () => {
    const limitId = await setLimit(compare('above', 'dataAge', 900, 900))
    await held.estimate(1)
    await held.estimate(16, { height: null, flag: 4, reason: 'too-few-sensors' })
    await judge(17)
    expect(await stateOf(limitId)).toBe(raised)
    await held.estimate(18, { height: 0.4, flag: 4, reason: 'ambiguous' })
    await judge(18.2)
    expect(await stateOf(limitId)).toBe(cleared)
  })

  it('usable sensors raises when too few are left, and holds when no window comes at all', async () => {
    const limitId = await setLimit(compare('below', 'usableSensors', 4, 4))
    await held.estimate(1)
    await judge(1.2)
    expect(await stateOf(limitId)).toBe('normal')
    await held.estimate(2)
    await Estimate.update({ sensorsUsed: 3 }, { where: { windowEndsAt: at(2), stationId: held.station.id } })
    await judge(2.2)
    expect(await stateOf(limitId)).toBe(raised)
    await judge(40)
    expect(await held.state(limitId)).toMatchObject({ state: raised, notJudged: 'noValue' })
    await held.estimate(41)
    await Estimate.update({ sensorsUsed: 4 }, { where: { windowEndsAt: at(41), stationId: held.station.id } })
    await judge(41.2)
    expect(await stateOf(limitId)).toBe(cleared)
  })

  it.each([2, -2])("the station's clock raises at %f s, whichever way it is off", async (offset) => {
    const limitId = await setLimit(compare('above', 'clockOffset', 1, 0.8))
    await judge(1, { clockOffsetOf: () => offset })
    expect(await held.state(limitId)).toMatchObject({ state: raised, value: 2 })
    await judge(2, { clockOffsetOf: () => null })
    expect(await held.state(limitId)).toMatchObject({ state: raised, notJudged: 'noValue' })
    await judge(3, { clockOffsetOf: () => 0.3 })
    expect(await stateOf(limitId)).toBe(cleared)
  })

  it('disagreement raises while parts of the array contradict each other', async () => {
    const limitId = await setLimit(compare('above', 'arrayDisagreement', 0, 0))
    await held.estimate(1, { flag: 4, reason: 'geometry-doubtful' })
    await judge(1.2)
    expect(await stateOf(limitId)).toBe(raised)
    await held.estimate(2)
    await judge(2.2)
    expect(await stateOf(limitId)).toBe(cleared)
  })

  it('waiting e-mails raises by the oldest that is not out, and clears when it is', async () => {
    const limitId = await setLimit(compare('above', 'mailQueueAge', 600, 480), true)
    const createdAt = at(0)
    const message = await Message.create({ kind: 'test', subject: 'T', text: 'T', isExercise: false, createdAt, queuedAt: createdAt }) // prettier-ignore
    const to = { messageId: message.id, personId: held.officer.id, address: 'a@b.example', createdAt }
    const waiting = await Delivery.create({ ...to, messageIdHeader: `<${message.id}@b.example>`, attempts: 4 })
    await judge(9)
    expect(await stateOf(limitId)).toBe('normal')
    await judge(11)
    expect(await held.state(limitId)).toMatchObject({ state: raised, value: 660 })
    await Delivery.update({ state: 'accepted' }, { where: {} })
    await waiting.reload()
    await judge(12)
    expect(await stateOf(limitId)).toBe(cleared)
  })

  it('the disk raises when little of it is free, and holds while that cannot be told', async () => {
    const limitId = await setLimit(compare('below', 'diskFree', 0.1, 0.12), true)
    await judge(1)
    expect(await stateOf(limitId)).toBe('normal')
    await judge(2, { diskFree: 0.05 })
    expect(await stateOf(limitId)).toBe(raised)
    await judge(3, { diskFree: null })
    expect(await held.state(limitId)).toMatchObject({ state: raised, notJudged: 'noValue' })
    await judge(4, { diskFree: 0.11 })
    expect(await stateOf(limitId)).toBe(raised)
    await judge(5, { diskFree: 0.3 })
    expect(await stateOf(limitId)).toBe(cleared)
  })
})

describe('when the program has just begun', () => {
  afterEach(() => held.job.stop())

  it('old figures raise nothing for three minutes, fresh ones count at once, and then silence raises', async () => {
    const limitId = await setLimit(compare('above', 'dataAge', 900, 900))
    await held.estimate(-40)
    held.parts.clock.set(at(0))
    const job = startJudgeLimits(held.parts, { isUnscheduled: true, settlesForMs: 180_000 })
    await job.wake()
    expect(await held.state(limitId)).toMatchObject({ state: 'normal', notJudged: 'settling' })
    const { notJudged } = (await held.desk.get('/api/alerts').expect(200)).body
    expect(notJudged).toMatchObject([{ limitId, reason: expect.stringContaining('the program has just begun') }])
    held.parts.clock.advance(60)
    await held.estimate(0.5)
    await job.wake()
    expect(await held.state(limitId)).toMatchObject({ state: 'normal', notJudged: null, value: 30 })
    await Estimate.destroy({ where: { windowEndsAt: at(0.5) } })
    held.parts.clock.advance(121)
    await job.wake()
    expect(await stateOf(limitId)).toBe(raised)
    await job.stop()
  })

  it('an alert that stood before is held, neither cleared nor told again', async () => {
    const limitId = await setLimit(compare('above', 'dataAge', 900, 900))
    await judge(16)
    const [before] = await held.alerts(limitId)
    const told = await held.messages(before?.id ?? 0)
    held.parts.clock.set(at(20))
    const job = startJudgeLimits(held.parts, { isUnscheduled: true, settlesForMs: 180_000 })
    await job.wake()
    expect(await held.state(limitId)).toMatchObject({ state: raised, notJudged: 'settling' })
    held.parts.clock.advance(181)
    await job.wake()
    expect((await held.alerts(limitId)).map(({ id, state }) => [id, state])).toEqual([[before?.id, raised]])
    expect(await held.messages(before?.id ?? 0)).toEqual(told)
    await job.stop()
  })
})
