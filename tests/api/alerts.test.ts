import { describe, expect, it, vi } from 'vitest'
import { Alert, Audit, Escalation, LogEntry, Message, Station } from '../../server/models/index.ts'
import { judgeStation } from '../../server/services/alerts.ts'
import { officeOf } from '../../server/presenters/office.ts'
import { at, judgedStation, plainCondition } from '../support/judgedStation.ts'

const held = judgedStation()

describe('a wave limit', () => {
  it('raises after its on-delay, by window ends, with timeline, message, steps, log line and audit', async () => {
    const limitId = await held.setLimit()
    await held.sea(0, 9, { height: 2.8 })
    expect(await held.alerts(limitId)).toEqual([])
    await held.sea(10, 11, { height: 2.8 })
    const [alert] = await held.alerts(limitId)
    expect(alert).toMatchObject({ state: 'unacknowledgedActive', priority: 'high', crossedAt: at(0), raisedAt: at(10) })
    expect(alert?.announcedAt).toEqual(new Date(at(10).getTime() + 10_000))
    expect(await held.events(alert?.id ?? 0)).toEqual(['crossed', 'raised'])
    expect(await held.messages(alert?.id ?? 0)).toEqual(['alert'])
    const steps = await Escalation.findAll({ where: { alertId: alert?.id } })
    expect(steps.map(({ step, sentAt }) => [step, sentAt])).toEqual([[0, alert?.announcedAt]])
    expect(await Audit.count({ where: { action: 'limit.raise', entityId: String(limitId) } })).toBe(1)
    const line = await LogEntry.findOne({ where: { kind: 'alert' }, order: [['id', 'DESC']] })
    expect(line?.text).toContain('Raised: 2.80 m ± 0.05')
  })

  it('clears only when value and its ± are below, after its off-delay, and is then still to be acknowledged', async () => {
    const limitId = await held.setLimit()
    await held.sea(0, 10, { height: 2.8 })
    await held.sea(11, 50, { height: 2.08, sd: 0.05 })
    expect((await held.state(limitId)).state).toBe('unacknowledgedActive')
    await held.sea(51, 81, { height: 2.04, sd: 0.05 })
    expect((await held.state(limitId)).state).toBe('returnedUnacknowledged')
    const [alert] = await held.alerts(limitId)
    expect(await held.messages(alert?.id ?? 0)).toEqual(['alert', 'allClear'])
    await held.desk.post(`/api/alerts/${alert?.id}/acknowledge`).send({}).expect(200)
    expect((await Alert.findByPk(alert?.id))?.closedAt).not.toBeNull()
    expect((await held.state(limitId)).state).toBe('normal')
  })

  it('raises the same alert again from returned, and asks for a new acknowledgement', async () => {
    const limitId = await held.setLimit({ condition: { ...plainCondition, onDelaySeconds: 0, offDelaySeconds: 0 } })
    await held.sea(0, 0, { height: 2.8 })
    await held.sea(1, 1, { height: 1 })
    await held.sea(2, 2, { height: 3 })
    const alerts = await held.alerts(limitId)
    expect(alerts.map(({ state }) => state)).toEqual(['unacknowledgedActive'])
    expect(await held.events(alerts[0]?.id ?? 0)).toEqual(['raised', 'cleared', 'raisedAgain'])
    expect(await held.messages(alerts[0]?.id ?? 0)).toEqual(['alert', 'allClear', 'alert'])
  })

  it('keeps exactly one alert open when many judge at once', async () => {
    const limitId = await held.setLimit({ condition: { ...plainCondition, onDelaySeconds: 0 } })
    await held.estimate(0, { height: 3 })
    held.parts.clock.set(at(1))
    const office = await officeOf(held.parts)
    await Promise.all(Array.from({ length: 8 }, () => judgeStation(held.parts, office, held.station.id)))
    const alerts = await held.alerts(limitId)
    expect(alerts).toHaveLength(1)
    expect(await held.messages(alerts[0]?.id ?? 0)).toEqual(['alert'])
  })

  it('is caught up in order after a restart, and judges no window twice', async () => {
    const limitId = await held.setLimit()
    await held.sea(0, 4, { height: 2.8 })
    await held.job.stop()
    for (let minutes = 5; minutes <= 12; minutes += 1) await held.estimate(minutes, { height: 2.8 })
    held.parts.clock.set(at(13))
    await held.restart()
    await held.judge()
    await held.judge()
    const [alert] = await held.alerts(limitId)
    expect(alert).toMatchObject({ crossedAt: at(0), raisedAt: at(10), windowEndsAt: at(12) })
    expect(await held.messages(alert?.id ?? 0)).toEqual(['alert'])
  })

  it('whose judgement breaks off in the middle leaves nothing half done, and is judged again', async () => {
    const limitId = await held.setLimit({ condition: { ...plainCondition, onDelaySeconds: 0 } })
    const broken = vi.spyOn(Message, 'create').mockRejectedValueOnce(new Error('the server stopped'))
    await held.sea(0, 0, { height: 2.8 })
    expect(broken).toHaveBeenCalledTimes(1)
    broken.mockRestore()
    expect(await held.alerts(limitId)).toEqual([])
    expect(await held.state(limitId)).toMatchObject({ state: 'normal', isActive: false, lastWindowEndsAt: null })
    await held.restart()
    await held.judge()
    const [alert] = await held.alerts(limitId)
    expect(await held.events(alert?.id ?? 0)).toEqual(['raised'])
    expect(await held.messages(alert?.id ?? 0)).toEqual(['alert'])
  })

  it('moved by stale windows tells nobody, and the newest raises and says since when', async () => {
    const limitId = await held.setLimit()
    await held.sea(0, 0, { height: 1 })
    for (let minutes = 1; minutes <= 40; minutes += 1) await held.estimate(minutes, { height: 2.8 })
    held.parts.clock.set(at(60))
    await held.judge()
    expect(await held.alerts(limitId)).toEqual([])
    expect(await held.state(limitId)).toMatchObject({ state: 'normal', isActive: true })
    await held.sea(61, 61, { height: 2.8 })
    const [alert] = await held.alerts(limitId)
    expect(alert).toMatchObject({ crossedAt: at(1), raisedAt: at(61) })
    const { body } = await held.desk.get(`/api/messages?alertId=${alert?.id}`).expect(200)
    const message = await held.desk.get(`/api/messages/${body.messages[0].id}`).expect(200)
    expect(message.body.text).toContain('Exceeded since 12:01 UTC')
  })

  it('neither raises nor clears on failed or missing figures, and shows that it holds', async () => {
    const limitId = await held.setLimit()
    await held.sea(0, 10, { height: 2.8 })
    await held.sea(11, 60, { height: null, flag: 4, reason: 'too-few-sensors' })
    const [alert] = await held.alerts(limitId)
    expect(alert).toMatchObject({ state: 'unacknowledgedActive', value: 2.8 })
    const { body } = await held.desk.get(`/api/alerts/${alert?.id}`).expect(200)
    expect(body).toMatchObject({ isHeld: true, value: 2.8, limit: { notJudged: 'failed' } })
  })

  it('clears by a height that is known though its direction is refused', async () => {
    const limitId = await held.setLimit()
    await held.sea(0, 10, { height: 2.8 })
    await held.sea(11, 41, { height: 0.4, flag: 4, reason: 'no-resolvable-wave' })
    expect((await held.state(limitId)).state).toBe('returnedUnacknowledged')
  })

  it('of a station without figures raises the alert on stale data that came with it', async () => {
    await held.setLimit()
    const limits = (await held.desk.get('/api/limits').expect(200)).body
    const stale = limits.find(({ limitClass }: { limitClass: string }) => limitClass === 'dataHealth')
    expect(stale).toMatchObject({ title: `Data stale, ${held.station.name}`, words: expect.stringContaining('15 min') })
    await held.sea(0, 0)
    held.parts.clock.set(at(16))
    await held.judge()
    const board = (await held.desk.get('/api/alerts').expect(200)).body
    expect(board.alerts).toMatchObject([{ limitId: stale.id, quantity: 'dataAge', state: 'unacknowledgedActive' }])
    expect(board.notJudged).toMatchObject([{ reason: 'its figures are stale' }])
    await held.sea(17, 17)
    expect((await held.state(stale.id)).state).toBe('returnedUnacknowledged')
  })

  it('notes a window that is filled in late, and does not raise it', async () => {
    const limitId = await held.setLimit({ condition: { ...plainCondition, onDelaySeconds: 0 } })
    await held.sea(10, 12, { height: 1 })
    await held.estimate(5, { height: 3.2, origin: 'late' })
    held.parts.clock.set(at(14))
    await held.judge()
    expect(await held.alerts(limitId)).toEqual([])
    const line = await LogEntry.findOne({ where: { kind: 'alert' }, order: [['id', 'DESC']] })
    expect(line?.text).toContain('12:05 UTC: exceeded in 1 window, most 3.20 m. Nobody was told.')
    await held.judge()
    expect((await LogEntry.findOne({ where: { kind: 'alert' }, order: [['id', 'DESC']] }))?.id).toBe(line?.id)
  })

  it('tells of all windows of one back-fill in one line, once no more of them come', async () => {
    await held.setLimit({ condition: { ...plainCondition, onDelaySeconds: 0 } })
    await held.sea(10, 12, { height: 1 })
    const lines = async () =>
      (await LogEntry.findAll({ where: { kind: 'alert' } })).filter(({ text }) => text.includes('Filled in late'))
    const before = (await lines()).length
    for (const [computed, window] of [
      [12, 4],
      [13, 5],
      [14, 6],
    ] as const) {
      // prettier-ignore
      held.parts.clock.set(at(computed))
      await held.estimate(window, { height: 3.2, origin: 'late' })
      held.parts.clock.set(at(computed + 0.5))
      await held.judge()
    }
    expect(await lines()).toHaveLength(before)
    held.parts.clock.set(at(16))
    await held.judge()
    expect((await lines()).slice(before).map(({ text }) => text)).toEqual([
      expect.stringContaining('12:04 to 12:06 UTC: exceeded in 3 windows'),
    ])
  })
})

describe('acknowledging', () => {
  it('from two desks at once is done by one, and the other is told who and when', async () => {
    const limitId = await held.setLimit()
    await held.sea(0, 10, { height: 2.8 })
    const [alert] = await held.alerts(limitId)
    const path = `/api/alerts/${alert?.id}/acknowledge`
    const answers = await Promise.all([held.desk.post(path).send({}), held.otherDesk.post(path).send({})])
    expect(answers.map(({ status }) => status)).toEqual([200, 200])
    expect(answers.map(({ body }) => body.isFirst).sort()).toEqual([false, true])
    expect(answers[0]?.body.alert.acknowledgedBy).toEqual(answers[1]?.body.alert.acknowledgedBy)
    expect((await held.state(limitId)).state).toBe('acknowledgedActive')
    const again = await held.desk.post(path).send({}).expect(200)
    expect(again.body).toMatchObject({
      isFirst: false,
      alert: { acknowledgedAt: answers[0]?.body.alert.acknowledgedAt },
    })
  })

  it('is refused to partners and administrators, and of an alert that is not there', async () => {
    await held.admin.post('/api/alerts/1/acknowledge').send({}).expect(403)
    await held.partner.post('/api/alerts/1/acknowledge').send({}).expect(403)
    await held.desk.post('/api/alerts/999999/acknowledge').send({}).expect(404)
  })
})

describe('a shelved limit', () => {
  const shelf = (minutes: number) => ({ reason: 'Tug on station', endsAt: at(minutes).toISOString() })

  it('is quiet until its time is over, and is then asked afresh', async () => {
    const limitId = await held.setLimit()
    await held.sea(0, 10, { height: 2.8 })
    const [alert] = await held.alerts(limitId)
    const shelved = await held.desk.post(`/api/alerts/${alert?.id}/shelve`).send(shelf(40)).expect(200)
    expect(shelved.body).toMatchObject({ state: 'shelved', shelf: { reason: 'Tug on station' } })
    await held.sea(11, 39, { height: 2.9 })
    expect(await held.messages(alert?.id ?? 0)).toEqual(['alert'])
    await held.sea(40, 40, { height: 2.9 })
    expect((await held.state(limitId)).state).toBe('unacknowledgedActive')
    expect(await held.events(alert?.id ?? 0)).toEqual(['crossed', 'raised', 'shelved', 'shelfExpired'])
    expect(await held.messages(alert?.id ?? 0)).toEqual(['alert', 'alert'])
  })

  it('whose sea went down meanwhile is over when it comes off the shelf', async () => {
    const limitId = await held.setLimit()
    await held.sea(0, 10, { height: 2.8 })
    await held.desk.post(`/api/limits/${limitId}/shelve`).send(shelf(60)).expect(200)
    await held.sea(11, 45, { height: 1 })
    await held.desk.post(`/api/limits/${limitId}/unshelve`).send({ reason: 'Tug gone' }).expect(200)
    expect((await held.state(limitId)).state).toBe('normal')
    expect((await held.alerts(limitId))[0]?.closedAt).not.toBeNull()
  })

  it('for longer than a watch is refused', async () => {
    const limitId = await held.setLimit({ priority: 'high' })
    await held.desk.post(`/api/limits/${limitId}/shelve`).send(shelf(481)).expect(422)
    await held.desk.post(`/api/limits/${limitId}/shelve`).send(shelf(-1)).expect(422)
  })
})

describe('a limit put aside', () => {
  it('is suppressed while its station is in maintenance, and returns by itself', async () => {
    const limitId = await held.setLimit()
    await held.sea(0, 10, { height: 2.8 })
    await Station.update({ state: 'maintenance' }, { where: { id: held.station.id } })
    await held.sea(11, 12, { height: 2.8 })
    expect((await held.state(limitId)).state).toBe('suppressed')
    await Station.update({ state: 'active' }, { where: { id: held.station.id } })
    await held.sea(13, 13, { height: 2.8 })
    expect((await held.state(limitId)).state).toBe('unacknowledgedActive')
  })

  it('out of service is still evaluated, told to nobody, and returns only by an operator', async () => {
    const limitId = await held.setLimit()
    await held.desk.post(`/api/limits/${limitId}/takeOutOfService`).send({ reason: 'Profile survey due' }).expect(200)
    await held.sea(0, 20, { height: 2.8 })
    const [alert] = await held.alerts(limitId)
    expect(alert).toMatchObject({ state: 'outOfService', announcedAt: null })
    expect(await held.messages(alert?.id ?? 0)).toEqual([])
    await held.desk.post(`/api/limits/${limitId}/returnToService`).send({ reason: 'Surveyed' }).expect(200)
    expect((await held.state(limitId)).state).toBe('unacknowledgedActive')
    expect(await held.messages(alert?.id ?? 0)).toEqual(['alert'])
  })
})
