import { describe, expect, it } from 'vitest'
import { LogEntry } from '../../server/models/index.ts'
import { at, judgedStation, plainCondition } from '../support/judgedStation.ts'

const held = judgedStation()

describe('a flood', () => {
  it('is grouped by cause on the board and goes into the log once', async () => {
    const condition = { ...plainCondition, onDelaySeconds: 0 }
    for (let n = 0; n < 11; n += 1) await held.setLimit({ condition, priority: 'low' })
    await held.sea(0, 0, { height: 2.8 })
    await held.judge()
    const { body } = await held.desk.get('/api/alerts').expect(200)
    expect(body.flood).toMatchObject({ count: 11, causes: [{ subject: { id: held.station.id }, count: 11 }] })
    expect(body.counts).toMatchObject({ open: 11, unacknowledged: 11, byPriority: { low: 11 } })
    expect(await LogEntry.count({ where: { kind: 'flood' } })).toBe(1)
  })
})

describe('a station whose figures stop', () => {
  it('keeps its alert, shown as held, and its limit as not judged', async () => {
    const limitId = await held.setLimit()
    await held.sea(0, 10, { height: 2.8 })
    held.parts.clock.set(at(30))
    await held.judge()
    const { body } = await held.desk.get('/api/alerts').expect(200)
    const own = body.alerts.find((alert: { limitId: number }) => alert.limitId === limitId)
    expect(own).toMatchObject({ state: 'unacknowledgedActive', isHeld: true, value: 2.8 })
    const limit = (await held.desk.get(`/api/limits/${limitId}`).expect(200)).body
    expect(limit.notJudged).toBe('stale')
  })
})

describe('a limit whose value waits out its on-delay', () => {
  it('is told as beyond its line, on the board and by itself, until it is raised', async () => {
    const limitId = await held.setLimit({ condition: { ...plainCondition, onDelaySeconds: 600 } })
    const pendingOnBoard = async () => {
      const { body } = await held.desk.get('/api/alerts').expect(200)
      return body.pending.filter((limit: { limitId: number }) => limit.limitId === limitId)
    }
    held.parts.clock.set(at(60))
    await held.sea(55, 60, { height: 2.8 })
    await held.judge()
    const limit = (await held.desk.get(`/api/limits/${limitId}`).expect(200)).body
    expect(limit).toMatchObject({ isActive: false, pendingSince: new Date(at(55)).toISOString() })
    expect(await pendingOnBoard()).toMatchObject([{ since: limit.pendingSince }])
    await held.sea(61, 66, { height: 2.8 })
    expect((await held.desk.get(`/api/limits/${limitId}`).expect(200)).body).toMatchObject({
      isActive: true,
      pendingSince: null,
    })
    expect(await pendingOnBoard()).toEqual([])
  })
})

describe('a drill', () => {
  it('raises an exercise beside the real one, is acknowledged and ended, and counts in no measure', async () => {
    const limitId = await held.setLimit()
    const countHigh = async () => {
      held.parts.clock.set(at(20))
      const { body } = await held.desk.get('/api/alerts/performance?days=1').expect(200)
      return body.byPriority.find(({ priority }: { priority: string }) => priority === 'high').count
    }
    const before = await countHigh()
    held.parts.clock.set(at(0))
    const order = { limitId, value: 3.4, note: 'Monthly drill' }
    const { body } = await held.desk.post('/api/drills').send(order).expect(201)
    expect(body).toMatchObject({ isExercise: true, state: 'unacknowledgedActive', value: 3.4 })
    await held.desk.post('/api/drills').send(order).expect(409)
    await held.sea(0, 10, { height: 2.8 })
    expect((await held.alerts(limitId)).map(({ isExercise }) => Boolean(isExercise))).toEqual([true, false])
    await held.desk.post(`/api/alerts/${body.id}/acknowledge`).send({}).expect(200)
    await held.desk.post(`/api/drills/${body.id}/end`).send({}).expect(200)
    expect(await countHigh()).toBe(before + 1)
  })
})
