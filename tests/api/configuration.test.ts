import type { Express } from 'express'
import { beforeAll, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { Audit, DistributionList, Person } from '../../server/models/index.ts'
import { settingInForce } from '../../server/services/settings.ts'
import type { Configuration } from '../../shared/schemas/configuration.ts'
import { makeLimit, makeList } from '../support/alerts.ts'
import { signedIn } from '../support/browser.ts'
import type { Browser } from '../support/browser.ts'
import { makePerson, makeStation } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

const applied = '/api/configuration/applied'
let parts: TestParts
let app: Express
let browser: Browser
let admin: Person
let text = ''

beforeAll(async () => {
  parts = await testParts()
  app = createApp(parts)
  admin = await makePerson(parts.clock, { role: 'admin', email: 'technician@harbour.example' })
  const pilot = await makePerson(parts.clock, { role: 'operator', email: 'pilot@harbour.example', name: 'Pilot' })
  await makeStation(parts.clock, { code: 'OL' })
  const listId = await makeList(parts, 'Pilots', [pilot.id])
  await makeLimit(parts, { steps: [{ afterSeconds: 0, listIds: [listId] }] })
  browser = await signedIn(app, admin.email)
})

const exported = async (): Promise<Configuration> => {
  text = (await browser.get('/api/configuration/file').expect(200)).text
  return JSON.parse(text)
}
const compare = async (file: object) =>
  (await browser.post('/api/configuration/comparison').send(file).expect(200)).body
const order = async (file: object, reason = 'From the other office') => {
  const { basis } = await compare(file)
  return browser.post(applied).send({ file, basis, reason })
}

describe('the configuration’s file', () => {
  test('holds settings, people, lists, stations and limits in a stable order, by names and without secrets', async () => {
    const file = await exported()
    const first = text
    parts.clock.advance(60)
    await exported()
    const withoutTime = (one: string) => one.replace(/"exportedAt": "[^"]*"/, '')
    expect(withoutTime(text)).toBe(withoutTime(first))
    expect(Object.keys(file.people)).toEqual(['pilot@harbour.example', 'technician@harbour.example'])
    expect(file.lists.Pilots?.members).toMatchObject([{ person: 'pilot@harbour.example' }])
    expect(file.stations.OL).toMatchObject({ latitude: 47.5, settings: { windowSeconds: 1200 } })
    expect(JSON.stringify(Object.values(file.limits))).toContain('"lists":["Pilots"]')
    const rows = await Person.findAll()
    for (const { passwordHash } of rows) expect(text).not.toContain(passwordHash)
    expect((await compare(file)).changes).toEqual([])
    const operator = await signedIn(app, 'pilot@harbour.example')
    await operator.get('/api/configuration/file').expect(403)
  })

  test('is compared field by field, put in force as a whole, and taken back as a whole', async () => {
    const file = await exported()
    file.settings.port = { portName: 'North Quay', timeZone: 'Atlantic/Azores' }
    file.settings.watch = { leadStation: 'OL' }
    const warden = { name: 'Warden', role: 'partner', team: 'harbour', timeZone: 'Etc/UTC', hours: null } as const
    file.people['warden@harbour.example'] = { ...warden, deputy: 'pilot@harbour.example', isDisabled: false }
    file.lists.Wardens = { purpose: '', isSafety: true, members: [{ person: 'warden@harbour.example', hours: null, priorities: ['high'] }] } // prettier-ignore
    delete file.lists.Pilots
    const { changes } = await compare(file)
    expect(changes.map((one: { kind: string; key: string; what: string }) => [one.what, one.kind, one.key])).toEqual([
      ['change', 'settings', 'port'],
      ['change', 'settings', 'watch'],
      ['add', 'people', 'warden@harbour.example'],
      ['absent', 'lists', 'Pilots'],
      ['add', 'lists', 'Wardens'],
    ])
    expect(changes[0].fields).toContainEqual({ path: 'portName', before: 'Harbour', after: 'North Quay' })
    const done = await order(file)
    expect([done.status, done.body.count]).toEqual([201, 4])
    expect((await settingInForce(parts, 'port')).portName).toBe('North Quay')
    expect((await settingInForce(parts, 'watch')).leadStationId).toBe(1)
    expect(await Person.findOne({ where: { email: 'warden@harbour.example' } })).toMatchObject({ deputyId: 2, passwordHash: null }) // prettier-ignore
    expect(await DistributionList.count({ where: { name: 'Pilots', retiredAt: null } })).toBe(1)

    const back = await browser.post(`${applied}/${done.body.id}/roll-back`).send({ reason: 'It was the wrong file' })
    expect([back.status, back.body.rolledBackAt]).toEqual([200, parts.clock.now().toISOString()])
    expect(await settingInForce(parts, 'port')).toEqual({ portName: 'Harbour', timeZone: 'Etc/UTC' })
    expect((await settingInForce(parts, 'watch')).leadStationId).toBeNull()
    expect((await Person.findOne({ where: { email: 'warden@harbour.example' } }))?.disabledAt).not.toBeNull()
    expect(await DistributionList.count({ where: { name: 'Wardens', retiredAt: null } })).toBe(0)
    await browser.post(`${applied}/${done.body.id}/roll-back`).send({ reason: 'Once more' }).expect(409)
    const actions = (await Audit.findAll({ where: { entity: 'configuration' } })).map(({ action }) => action)
    expect(actions).toEqual(['configuration.apply', 'configuration.rollBack'])
  })

  test.each([
    [
      'a setting that cannot be',
      (file: Configuration) => void (file.settings.port = { portName: '', timeZone: 'X' }),
      422,
    ],
    ['a list of nobody', (file: Configuration) => void (file.lists.Ghosts = { purpose: '', isSafety: false, members: [{ person: 'ghost@harbour.example', hours: null, priorities: ['low'] }] }), 422], // prettier-ignore
    ['an unknown group', (file: Configuration) => void (file.settings.weather = { a: 1 }), 422],
    [
      'a lead station that is not here',
      (file: Configuration) => void (file.settings.watch = { leadStation: 'ZZ' }),
      422,
    ],
    ['one’s own account disabled', (file: Configuration) => void Object.assign(file.people['technician@harbour.example'] ?? {}, { isDisabled: true }), 409], // prettier-ignore
  ])('with %s changes nothing at all', async (_what, spoil, status) => {
    const file = await exported()
    file.settings.contact = { emergencyLine: 'Call the harbour watch' }
    spoil(file)
    expect((await order(file)).status).toBe(status)
    expect((await settingInForce(parts, 'contact')).emergencyLine).toBe('')
    expect(await DistributionList.count({ where: { name: 'Ghosts' } })).toBe(0)
  })

  test('compared before somebody else changed something is not put in force', async () => {
    const file = await exported()
    file.settings.contact = { emergencyLine: 'Call the harbour watch' }
    const { basis } = await compare(file)
    const content = { portName: 'East Quay', timeZone: 'Etc/UTC' }
    const { body } = await browser.get('/api/settings/groups/port').expect(200)
    const version = `"${body.settings[0].number}"`
    await browser
      .put('/api/settings/groups/port')
      .set('If-Match', version)
      .send({ content, reason: 'New name' })
      .expect(200)
    const late = await browser.post(applied).send({ file, basis, reason: 'Too late' }).expect(409)
    expect(late.body.code).toBe('configuration.changedSinceCompared')
    await browser
      .post(applied)
      .send({ file: { ...file, format: 'other' }, basis, reason: 'Other' })
      .expect(422)
  })
})
