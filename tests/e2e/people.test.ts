/** Somebody is invited, chooses a passphrase and a second factor, reads in feet and knots; an administrator looks after it. */
import AxeBuilder from '@axe-core/playwright'
import type { Page } from 'playwright-core'
import { afterAll, beforeAll, expect, test } from 'vitest'
import { z } from 'zod'
import { codeAt } from '../../server/services/secondFactor/timedCode.ts'
import { accountView } from '../../shared/schemas/account.ts'
import { caughtMail, caughtMailList } from '../../shared/schemas/caughtMail.ts'
import { until } from '../support/until.ts'
import { ask, newVisitor, order, personOf, programUrl } from '../support/visitor.ts'
import type { Visitor } from '../support/visitor.ts'

const name = 'Duty officer C-3'
const email = 'duty.c3@marrowick.example'
const passphrase = 'four slow barges turn'
let admin: Visitor
let guest: Visitor
let secret = ''

beforeAll(async () => {
  admin = await newVisitor()
  guest = await newVisitor()
  const { email: known, password } = personOf('admin')
  await order(admin, '/session', { email: known, password }, z.unknown())
})
afterAll(async () => {
  const { accounts } = await ask(admin, '/accounts', z.object({ accounts: z.array(accountView) }))
  const made = accounts.find((one) => one.email === email)
  if (made) {
    const headers = { 'If-Match': `"${made.version}"` }
    await order(admin, `/accounts/${made.id}/disable`, {}, z.unknown(), { headers })
  }
  for (const { context } of [admin, guest]) await context.close()
})

async function faultsOf(page: Page): Promise<string[]> {
  const { violations } = await new AxeBuilder({ page }).analyze()
  return violations.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html.slice(0, 160)).join(' | ')}`)
}

async function enter(page: Page, code?: string): Promise<void> {
  await page.getByLabel('Name or e-mail').fill(email)
  await page.getByLabel('Passphrase', { exact: true }).fill(passphrase)
  await page.getByRole('button', { name: 'Sign in', exact: true }).click()
  if (code === undefined) return page.waitForURL(/\/watch/)
  await page.getByLabel('Code of the second factor').fill(code)
  await page.getByRole('button', { name: 'Sign in', exact: true }).click()
  await page.waitForURL(/\/watch/)
}

test('an invitation goes out by e-mail, and its link lets the person choose a passphrase and sign in', async () => {
  const { page } = admin
  await page.goto('/people')
  await page.getByRole('button', { name: 'Invite somebody' }).click()
  await page.getByLabel('Name, as others see it').fill(name)
  await page.getByRole('textbox', { name: 'E-mail' }).fill(email)
  await page.getByRole('button', { name: 'Invite by e-mail' }).click()
  await page.getByRole('heading', { name, exact: true }).waitFor()
  await page.getByText(/invited, has not chosen a passphrase yet, link good until/).waitFor()

  const mine = async () => (await ask(admin, '/caughtMails', caughtMailList)).mails.find(({ to }) => to.includes(email))
  await until('the invitation', async () => (await mine()) !== undefined, 20_000)
  const { text } = await ask(admin, `/caughtMails/${(await mine())?.id}`, caughtMail)
  expect(text).toContain('Instrument technician has set up an account for you')
  const path = /\/welcome\/\S+/.exec(text)?.[0] ?? ''
  await guest.page.goto(path)
  await guest.page.getByLabel('Passphrase', { exact: true }).fill('password1234')
  await guest.page.getByLabel('The same again').fill('password1234')
  await guest.page.getByRole('button', { name: 'Set this passphrase' }).click()
  await guest.page.getByText('This is a commonly used password.').waitFor()
  expect(await faultsOf(guest.page)).toEqual([])
  await guest.page.getByLabel('Passphrase', { exact: true }).fill(passphrase)
  await guest.page.getByLabel('The same again').fill(passphrase)
  await guest.page.getByRole('button', { name: 'Set this passphrase' }).click()
  await guest.page.getByText('Your passphrase is set.').waitFor()
  await guest.page.goto(path)
  await guest.page.getByText('This link was used.').waitFor()
  await guest.page.getByRole('link', { name: 'To the sign-in page' }).click()
  await enter(guest.page)
})

test('feet and knots chosen under My settings change the figures on Watch, and stay', async () => {
  const { page } = guest
  await page.getByText('m/s', { exact: true }).first().waitFor()
  await page.goto('/my-settings')
  await page.getByLabel('Heights').selectOption('ft')
  await page.getByLabel('Speeds').selectOption('kn')
  await page.getByText('6.9 ft, 22.2 kn').waitFor()
  for (const mode of ['Day', 'Night']) {
    await page.getByRole('button', { name: mode, exact: true }).first().click()
    expect(await faultsOf(page)).toEqual([])
  }
  await page.goto('/watch')
  await page.getByText('kn', { exact: true }).first().waitFor()
  expect(await page.getByText('m/s', { exact: true }).count()).toBe(0)
  await page.reload()
  await page.getByText('kn', { exact: true }).first().waitFor()
})

test('a second factor set up under My settings is asked for at the next sign-in', async () => {
  const { page } = guest
  await page.goto('/my-settings')
  await page.getByRole('button', { name: 'Set up a second factor' }).click()
  await page.getByLabel('Your passphrase').fill(passphrase)
  await page.getByRole('button', { name: 'Go on' }).click()
  await page.getByRole('img', { name: /QR code/ }).waitFor()
  secret = ((await page.locator('.secret').textContent()) ?? '').replace(/\s/g, '')
  const taken = new Date()
  await page.getByLabel('Code that it shows now').fill(codeAt(secret, taken))
  await page.getByRole('button', { name: 'Put it in force' }).click()
  await page.getByText('Write these down now').waitFor()
  const recovery = (await page.locator('ol li').first().textContent()) ?? ''
  await page.getByRole('button', { name: 'I have written them down' }).click()
  await page.getByText(/10 of 10 recovery codes left/).waitFor()
  await page
    .getByRole('region', { name: 'Signed in on' })
    .getByRole('button', { name: 'Sign out', exact: true })
    .click()
  await page.waitForURL(/\/sign-in/)
  await enter(page, recovery)
  const { context } = guest
  expect((await context.request.get(`${programUrl()}/api/profile/second-factor`)).status()).toBe(200)
})

test('axe finds nothing on the pages of the office, at the desk and on a telephone, and none is wider than its screen', async () => {
  const { page } = admin
  for (const path of ['/people', '/settings', '/audit', '/system']) {
    await page.setViewportSize({ width: 1440, height: 900 })
    await page.goto(path)
    await page.getByRole('heading', { level: 1 }).waitFor()
    await page.getByText('being fetched', { exact: false }).first().waitFor({ state: 'detached' })
    expect([path, await faultsOf(page)]).toEqual([path, []])
    await page.setViewportSize({ width: 390, height: 844 })
    const isWider = await page.evaluate(() => document.documentElement.scrollWidth > window.innerWidth)
    expect([path, isWider]).toEqual([path, false])
  }
  await page.getByRole('link', { name: 'Set-up' }).first().waitFor()
  expect(admin.foreign).toEqual([])
})

test('the chain of the audit is walked from its page and found whole', async () => {
  const { page } = admin
  await page.setViewportSize({ width: 1440, height: 900 })
  await page.goto('/audit')
  await page.getByRole('button', { name: 'Walk it now' }).click()
  await page.getByText('Whole', { exact: true }).waitFor()
  await page.getByRole('combobox', { name: /^Action/ }).selectOption({ label: 'person: choose passphrase' })
  await page
    .getByRole('cell', { name: /choose passphrase/ })
    .first()
    .waitFor()
})
