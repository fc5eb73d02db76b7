/**
 * A hard night at one desk: a flood, an urgent alert that needs a second person to be shelved, an e-mail that is not
 * out, a colleague who falls ill, a notice while the page is out of sight.
 */
import AxeBuilder from '@axe-core/playwright'
import { afterAll, beforeAll, expect, inject, test } from 'vitest'
import { z } from 'zod'
import { createDatabase } from '../../server/config/database.ts'
import { execute, select } from '../../server/models/sql.ts'
import { alertBoard, alertView } from '../../shared/schemas/alert.ts'
import { limitView } from '../../shared/schemas/limit.ts'
import { messageDetail } from '../../shared/schemas/message.ts'
import { personView } from '../../shared/schemas/person.ts'
import { dailyEmailView } from '../../shared/schemas/watchRules.ts'
import { ask, newVisitor, order } from '../support/visitor.ts'
import type { Visitor } from '../support/visitor.ts'

const flood = 13
const sequelize = createDatabase({ url: inject('programDatabaseUrl'), poolSize: 1 })
const [officer, colleague] = inject('people').filter(({ role }) => role === 'operator')
let desk: Visitor
let limitIds: number[] = []
let alertIds: number[] = []
const opened: Visitor[] = []

async function visitor(size?: { width: number; height: number }): Promise<Visitor> {
  const made = await newVisitor(size)
  opened.push(made)
  await order(made, '/session', { email: officer?.email, password: officer?.password }, z.unknown())
  return made
}

/** Limits of Fairway with an alert each, as the judge leaves them: the sea of the browser tests is too quiet for a flood. */
async function raiseFlood(): Promise<void> {
  const limits = await ask(desk, '/limits', z.array(limitView))
  const pattern = limits.find(({ limitClass, subject }) => limitClass === 'wave' && subject.code === 'FW')
  if (!pattern) throw new Error('the demonstration has no limit on the waves of FW')
  const { subject, current } = pattern
  for (let n = 1; n <= flood; n += 1) {
    const priority = n === 1 ? 'urgent' : n <= 3 ? 'high' : 'low'
    const recipients = { steps: [], remindEverySeconds: null }
    const content = { ...current.content, title: `Night ${n}`, priority, recipients, isPublished: false }
    const draft = { subjectKind: 'station', subjectId: subject.id, content, reason: 'Trial of the browser tests' }
    const alone = priority === 'urgent' ? { aloneReason: 'The trial has one officer' } : {}
    const { id, current: made } = await order(desk, '/limits', { ...draft, ...alone }, limitView)
    limitIds.push(id)
    await execute(
      sequelize,
      `INSERT INTO alerts (limitId, limitVersionId, state, priority, crossedAt, raisedAt, announcedAt, windowEndsAt, revision, value, extremeValue)
       VALUES (:id, :versionId, 'unacknowledgedActive', :priority, NOW(3), NOW(3), NOW(3), NOW(3), 1, 3.2, 3.2)`,
      { id, versionId: made.id, priority },
    )
    await execute(
      sequelize,
      `UPDATE limitStates SET state = 'unacknowledgedActive', isActive = 1, activeSince = NOW(3), crossedAt = NOW(3),
         lastWindowEndsAt = NOW(3) + INTERVAL 1 HOUR WHERE limitId = :id`,
      { id },
    )
  }
  const rows = await select<{ id: number }>(sequelize, 'SELECT id FROM alerts WHERE limitId IN (:limitIds) ORDER BY id', { limitIds }) // prettier-ignore
  alertIds = rows.map(({ id }) => Number(id))
}

beforeAll(async () => {
  desk = await visitor()
  await raiseFlood()
})
afterAll(async () => {
  await execute(sequelize, 'UPDATE alerts SET announcedAt = NULL WHERE id IN (:alertIds)', { alertIds })
  for (const id of limitIds) {
    const { version } = await ask(desk, `/limits/${id}`, limitView)
    const how = { method: 'DELETE', headers: { 'If-Match': `"${version}"` } }
    const alone = { aloneReason: 'The trial has one officer' }
    await order(desk, `/limits/${id}`, { reason: 'The trial is over', ...alone }, z.unknown(), how)
  }
  limitIds = []
  await sequelize.close()
  for (const { context } of opened) await context.close()
})

test('in a flood the line counts by priority and names the cause, urgent and high keep rows of their own', async () => {
  const { page } = desk
  await page.goto('/alerts')
  await page
    .locator('.alert-line')
    .getByText(/1[3-9] open: 1 urgent/)
    .waitFor()
  await page
    .locator('.alert-line')
    .getByText(/\d+ from Fairway/)
    .waitFor()
  const { flood: told } = await ask(desk, '/alerts', alertBoard)
  expect(told?.causes[0]?.count).toBeGreaterThanOrEqual(flood)
  for (const title of ['Night 1', 'Night 2', 'Night 3'])
    await page.getByRole('link', { name: new RegExp(`${title}, Fairway`) }).first().waitFor() // prettier-ignore
  expect(await page.getByRole('link', { name: /Night 9, Fairway/ }).count()).toBe(0)
  await page.getByRole('button', { name: /^List \d+$/ }).first().click() // prettier-ignore
  await page.getByRole('link', { name: /Night 9, Fairway/ }).first().waitFor() // prettier-ignore
  const { violations } = await new AxeBuilder({ page }).analyze()
  expect(violations.map(({ id }) => id)).toEqual([])
})

test('an urgent alert is shelved with the passphrase of the other operator, and a wrong one says so at its field', async () => {
  const { page } = desk
  await page.goto(`/alerts/${alertIds[0]}`)
  await page.getByRole('button', { name: 'Shelve, with reason' }).click()
  const sheet = page.getByRole('dialog')
  await sheet.getByLabel(/^Reason/).fill('Divers at the array')
  const shelve = sheet.getByRole('button', { name: /^Shelve until/ })
  expect(await shelve.isDisabled()).toBe(true)
  await sheet.getByLabel('Their name or e-mail').fill(colleague?.email ?? '')
  await sheet.getByLabel('Their passphrase').fill('not theirs at all')
  await shelve.click()
  await sheet.getByText('does not fit this name or e-mail').waitFor()
  await sheet.getByLabel('Their passphrase').fill(colleague?.password ?? '')
  const { violations } = await new AxeBuilder({ page }).analyze()
  expect(violations.map(({ id }) => id)).toEqual([])
  await shelve.click()
  await sheet.waitFor({ state: 'detached' })
  const { shelf, state } = await ask(desk, `/alerts/${alertIds[0]}`, alertView)
  expect([state, shelf?.by?.name, shelf?.secondPerson?.name]).toEqual([
    'shelved',
    'Duty officer A-1',
    'Duty officer B-2',
  ])
})

test('an e-mail that is not out stands in the line, which leads to it alone', async () => {
  const { page } = desk
  const people = await ask(desk, '/people', z.object({ people: z.array(personView) }))
  const person = people.people.find(({ email }) => email === officer?.email)
  const message = await order(desk, '/messages/test', { personId: person?.id }, messageDetail)
  const id = message.id
  await execute(sequelize, "UPDATE deliveries SET state = 'refused', attempts = 1, nextAttemptAt = NULL, smtpReply = '550 no such box' WHERE messageId = :id", { id }) // prettier-ignore
  await page.goto('/watch')
  await page.getByRole('link', { name: /^1 message not out since/ }).click()
  await page.waitForURL(/\/messages\?show=notOut$/)
  const rows = page.getByRole('region', { name: 'Not out' }).getByRole('listitem')
  await rows.first().waitFor()
  expect(await rows.count()).toBe(1)
  await rows.first().getByText('1 not out').waitFor()
  await execute(sequelize, "UPDATE deliveries SET state = 'accepted' WHERE messageId = :id", { id })
})

test('the watch enters an absence with a deputy for somebody else, and another hour of the daily e-mail', async () => {
  const { page } = desk
  await page.goto('/lists')
  await page.getByRole('button', { name: 'Hours, deputy and absences of Head of patrol' }).click()
  const people = page.getByRole('region', { name: 'People' })
  await people.getByLabel('Deputy, told instead').selectOption({ label: 'Breakwater warden' })
  await people.getByLabel('from', { exact: true }).fill('2099-12-24')
  await people.getByLabel('to the end of').fill('2099-12-27')
  await people.getByRole('button', { name: 'Add', exact: true }).click()
  await people.getByRole('button', { name: 'Save for Head of patrol' }).click()
  await people.getByText('absence entered; deputy Breakwater warden').waitFor()
  const daily = page.getByRole('region', { name: 'Daily e-mail' })
  await daily.getByLabel(/^At/).fill('05:45')
  await daily.getByLabel(/^Reason/).fill('Before the morning watch')
  await daily.getByRole('button', { name: 'Save the daily e-mail' }).click()
  await daily.getByText(/Before the morning watch$/).waitFor()
  expect((await ask(desk, '/dailyEmail', dailyEmailView)).content.heartbeatAt).toBe('05:45')
})

test('while the page is out of sight the browser shows a notice of a new alert, asked for with a click before', async () => {
  const away = await visitor()
  await away.context.grantPermissions(['notifications'])
  await away.page.addInitScript(() => {
    const shown: string[] = []
    const Real = window.Notification
    // The browser's own notice, with what it said written down.
    class Noted extends Real {
      constructor(title: string, options?: NotificationOptions) {
        super(title, options)
        shown.push(title)
      }
    }
    Object.assign(window, { Notification: Noted, shown })
    Object.defineProperty(document, 'visibilityState', { get: () => 'hidden' })
  })
  await away.page.goto('/alerts')
  await away.page.getByText('The browser also shows a notice while this page is not in sight.').waitFor()
  const high = { limitId: limitIds[1], value: 3.3, note: 'Trial of the browser tests' }
  const { id } = await order(desk, '/drills', high, alertView)
  const shown = await away.page.waitForFunction(() => {
    const titles: unknown = Reflect.get(window, 'shown')
    return Array.isArray(titles) && titles.length > 0 ? titles.map(String) : null
  })
  expect(await shown.jsonValue()).toEqual([expect.stringMatching(/^EXERCISE\. High: Night 2, Fairway 3\.30 m/)])
  await order(desk, `/drills/${id}/end`, {}, z.unknown())
})

test('nothing was asked of any other origin, and no page complained', () => {
  expect(opened.flatMap(({ foreign }) => foreign)).toEqual([])
  const expected = /422/
  expect(opened.flatMap(({ complaints }) => complaints).filter((one) => !expected.test(one))).toEqual([])
})
