/** The daily e-mail and the rules of the watch, as operators and administrators set them. */
import { beforeAll, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { escalate } from '../../server/jobs/escalate.ts'
import { Audit, Delivery, DistributionList, Message } from '../../server/models/index.ts'
import type { Person } from '../../server/models/index.ts'
import { makeList } from '../support/alerts.ts'
import { signedIn } from '../support/browser.ts'
import type { Browser } from '../support/browser.ts'
import { makePerson } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
let operator: Browser
let admin: Browser
let [officer, chief]: Person[] = []

beforeAll(async () => {
  parts = await testParts()
  const app = createApp(parts)
  officer = await makePerson(parts.clock)
  chief = await makePerson(parts.clock, { role: 'admin' })
  operator = await signedIn(app, officer.email)
  admin = await signedIn(app, chief.email)
})

const put = (by: Browser, path: string, version: number, content: object) =>
  by.put(`/api/${path}`).set('If-Match', `"${version}"`).send({ content, reason: 'Agreed in the office' })
const toldByHeartbeat = async (): Promise<number[]> => {
  const message = await Message.findOne({ where: { kind: 'heartbeat' }, order: [['id', 'DESC']] })
  const rows = await Delivery.findAll({ where: { messageId: message?.id ?? 0 }, order: [['personId', 'ASC']] })
  return rows.map(({ personId }) => personId)
}

describe('the rules of the watch', () => {
  test('are read by operators, set by administrators, and leave the rest of their group as it was', async () => {
    const content = { asksSecondPerson: true, longestShelfHours: 6 }
    await put(operator, 'watchRules', 1, content).expect(403)
    await put(admin, 'watchRules', 1, { ...content, longestShelfHours: 48 }).expect(422)
    expect((await put(admin, 'watchRules', 1, content).expect(200)).body).toMatchObject({ version: 2, content })
    expect((await operator.get('/api/watchRules').expect(200)).body.content).toEqual(content)
  })
})

describe('the daily e-mail', () => {
  test.each([
    [{ heartbeatAt: '25:00', heartbeatListId: null }, 'content.heartbeatAt'],
    [{ heartbeatAt: '06:00', heartbeatListId: 999_999 }, 'content.heartbeatListId'],
  ])('is refused as %j, and says where', async (content, path) => {
    const { body } = await put(operator, 'dailyEmail', 1, content).expect(422)
    expect(body.errors.map((one: { path: string }) => one.path)).toEqual([path])
  })

  test('goes by another hour and list from the moment they are set, with author and reason kept', async () => {
    const before = (await operator.get('/api/dailyEmail').expect(200)).body
    expect(before).toMatchObject({ version: 1, content: { heartbeatAt: '07:00', heartbeatListId: null }, by: null })
    const reader = await makePerson(parts.clock, { role: null })
    const listId = await makeList(parts, 'Morning', [reader.id])
    await escalate(parts)
    const content = { heartbeatAt: '05:30', heartbeatListId: listId }
    const { body } = await put(operator, 'dailyEmail', 1, content).expect(200)
    expect(body).toMatchObject({ version: 2, content, by: { id: officer?.id }, reason: 'Agreed in the office' })
    await put(admin, 'dailyEmail', 1, content).expect(412)
    await operator.put('/api/dailyEmail').send({ content, reason: 'Agreed' }).expect(428)
    parts.clock.set('2026-12-02T05:30:00Z')
    await escalate(parts)
    expect(await toldByHeartbeat()).toEqual([reader.id])
    const audit = await Audit.findOne({ where: { action: 'setting.change' }, order: [['id', 'DESC']] })
    expect(audit).toMatchObject({ personId: officer?.id, after: content })
  })

  test('goes to operators and administrators when its list has nobody or is out of use', async () => {
    await DistributionList.update({ retiredAt: parts.clock.now() }, { where: { name: 'Morning' } })
    parts.clock.set('2026-12-03T05:30:00Z')
    await escalate(parts)
    expect(await toldByHeartbeat()).toEqual([officer?.id, chief?.id])
  })
})
