/** A second operator's consent to what is urgent: proven at the desk, or a written reason of who is alone. */
import { describe, expect, it } from 'vitest'
import { startDeliverMail } from '../../server/jobs/deliverMail.ts'
import { Audit, Delivery, LimitVersion, LogEntry, Message, Person, Shelving } from '../../server/models/index.ts'
import { usualPassword } from '../support/factories.ts'
import { at, judgedStation } from '../support/judgedStation.ts'

const held = judgedStation()
const alone = { aloneReason: 'Nobody else on watch tonight' }
const shelf = (minutes: number) => ({ reason: 'Tug alongside the array', endsAt: at(minutes).toISOString() })
const consentOf = (person: Pick<Person, 'email'>, password = usualPassword) => ({
  consent: { email: person.email, password },
})
const setUrgent = async (given: object): Promise<number> => {
  const draft = { ...held.draftOf({ priority: 'urgent' }), ...given }
  return (await held.desk.post('/api/limits').send(draft).expect(201)).body.id
}
const faultOf = (body: { errors?: { path: string }[] }) => body.errors?.map(({ path }) => path)

describe('an urgent limit', () => {
  it('is set with the passphrase of another operator, and both names are kept', async () => {
    const limitId = await setUrgent(consentOf(held.otherOfficer))
    const version = await LimitVersion.findOne({ where: { limitId } })
    expect(version).toMatchObject({ authorId: held.officer.id, consentById: held.otherOfficer.id, aloneReason: null })
    const audit = await Audit.findOne({ where: { action: 'limit.consent', entityId: String(limitId) } })
    expect(audit).toMatchObject({ personId: held.otherOfficer.id, after: { done: 'set', byPersonId: held.officer.id } })
  })

  it.each([
    ['no consent at all', () => ({}), 'consent'],
    [
      "a wrong passphrase of another operator's",
      () => consentOf(held.otherOfficer, 'not this one at all'),
      'consent.password',
    ],
    ['a name that nobody bears', () => consentOf({ email: 'nobody@harbour.example' }), 'consent.password'],
    ['the own passphrase', () => consentOf(held.officer), 'consent.email'],
    ['a reason of three letters', () => ({ aloneReason: 'Yes' }), 'aloneReason'],
  ])('is not set with %s', async (_, given, path) => {
    const { body } = await held.desk
      .post('/api/limits')
      .send({ ...held.draftOf({ priority: 'urgent' }), ...given() })
      .expect(422)
    expect(faultOf(body)).toEqual([path])
  })

  it('is not set with the consent of an administrator or of somebody disabled', async () => {
    const send = (given: object) =>
      held.desk.post('/api/limits').send({ ...held.draftOf({ priority: 'urgent' }), ...given })
    const [admin] = await Person.findAll({ where: { role: 'admin' } })
    expect(faultOf((await send(consentOf(admin!)).expect(422)).body)).toEqual(['consent.email'])
    await held.otherOfficer.update({ disabledAt: at(0) })
    expect(faultOf((await send(consentOf(held.otherOfficer)).expect(422)).body)).toEqual(['consent.password'])
    await held.otherOfficer.update({ disabledAt: null })
  })

  it('asks for consent again when it is lowered, taken out of service or retired, for each silences it', async () => {
    const limitId = await setUrgent(alone)
    const lower = { content: held.contentOf({ priority: 'low' }), reason: 'Not that bad' }
    const put = (body: object) => held.desk.put(`/api/limits/${limitId}`).set('If-Match', '"1"').send(body)
    expect(faultOf((await put(lower).expect(422)).body)).toEqual(['consent'])
    const out = (body: object) => held.desk.post(`/api/limits/${limitId}/takeOutOfService`).send(body)
    expect(faultOf((await out({ reason: 'Array lifted' }).expect(422)).body)).toEqual(['consent'])
    await out({ reason: 'Array lifted', ...consentOf(held.otherOfficer) }).expect(200)
    const retire = (body: object) => held.desk.delete(`/api/limits/${limitId}`).set('If-Match', '"1"').send(body)
    expect(faultOf((await retire({ reason: 'Berth closed' }).expect(422)).body)).toEqual(['consent'])
    await retire({ reason: 'Berth closed', ...alone }).expect(200)
  })

  it('is shelved with the second person named on the shelf, and not by naming alone', async () => {
    const limitId = await setUrgent(alone)
    const post = (body: object) => held.desk.post(`/api/limits/${limitId}/shelve`).send(body)
    expect(faultOf((await post(shelf(60)).expect(422)).body)).toEqual(['consent'])
    await post({ ...shelf(60), secondPersonId: held.otherOfficer.id }).expect(422)
    const { body } = await post({ ...shelf(60), ...consentOf(held.otherOfficer) }).expect(200)
    expect(body.shelf).toMatchObject({ by: { name: 'Duty officer A' }, secondPerson: { name: 'Duty officer B' } })
    expect(await Shelving.findOne({ where: { limitId } })).toMatchObject({ secondPersonId: held.otherOfficer.id })
  })

  it('done alone goes into the watch log and to every administrator by e-mail', async () => {
    const limitId = await setUrgent(alone)
    const lines = await LogEntry.findAll({ where: { kind: 'limit' } })
    const mine = lines.filter(({ links }) => JSON.stringify(links).includes(`"limitId":${limitId}`))
    expect(mine.map(({ text }) => text).join('\n')).toContain(
      'Alone on watch: Duty officer A. Urgent limit set: Total height,',
    )
    const [message] = await Message.findAll({ where: { kind: 'alone' }, order: [['id', 'DESC']] })
    expect(message?.text).toContain('Why alone: Nobody else on watch tonight')
    const mail = await startDeliverMail(held.parts, {
      isUntimed: true,
      transport: { send: async () => ({ kind: 'accepted', reply: '250 taken' }) },
    })
    await mail.run()
    await mail.stop()
    const admins = await Person.findAll({ where: { role: 'admin' } })
    const sent = await Delivery.findAll({ where: { messageId: message?.id ?? 0 } })
    expect(sent.map(({ personId, state }) => [personId, state])).toEqual(admins.map(({ id }) => [id, 'accepted']))
  })

  it('needs nobody else where the office does not ask for it', async () => {
    const rules = { content: { asksSecondPerson: false, longestShelfHours: 8 }, reason: 'Two are never here' }
    await held.desk.put('/api/watchRules').set('If-Match', '"1"').send(rules).expect(403)
    const { body } = await held.admin.put('/api/watchRules').set('If-Match', '"1"').send(rules).expect(200)
    await setUrgent({})
    const back = { content: { ...rules.content, asksSecondPerson: true }, reason: 'They are' }
    await held.admin.put('/api/watchRules').set('If-Match', '"1"').send(back).expect(412)
    await held.admin.put('/api/watchRules').set('If-Match', `"${body.version}"`).send(back).expect(200)
  })
})

it('guessing at a second person is slowed down like guessing at a sign-in, and counts there too', async () => {
  const wrong = { ...held.draftOf({ priority: 'urgent' }), ...consentOf(held.otherOfficer, 'a guess at a passphrase') }
  const statuses: number[] = []
  for (let tries = 0; tries < 7; tries += 1) statuses.push((await held.desk.post('/api/limits').send(wrong)).status)
  expect(statuses).toEqual([422, 422, 422, 422, 422, 429, 429])
  const signIn = { email: held.otherOfficer.email, password: usualPassword }
  await held.desk.post('/api/session').send(signIn).expect(429)
})
