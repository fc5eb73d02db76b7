/** In and out at the door. */
import AxeBuilder from '@axe-core/playwright'
import { afterEach, beforeEach, expect, test } from 'vitest'
import { newVisitor, personOf, programUrl, signIn } from '../support/visitor.ts'
import type { Visitor } from '../support/visitor.ts'

let visitor: Visitor
beforeEach(async () => {
  visitor = await newVisitor()
})
afterEach(async () => {
  await visitor.context.close()
})

const sessionStatus = async () => (await visitor.context.request.get(`${programUrl()}/api/session`)).status()

test('a page asked for before signing in is shown after it', async () => {
  const { page } = visitor
  await page.goto('/stations')
  await page.waitForURL(/\/sign-in/)
  const { email, password } = personOf('partner')
  await page.getByLabel('Name or e-mail').fill(email)
  await page.getByLabel('Passphrase', { exact: true }).fill(password)
  await page.getByRole('button', { name: 'Sign in', exact: true }).click()
  await page.waitForURL(/\/stations$/)
})

test('a wrong passphrase is told in words and opens nothing', async () => {
  const { page } = visitor
  await page.goto('/sign-in')
  await page.getByLabel('Name or e-mail').fill('nobody@marrowick.example')
  await page.getByLabel('Passphrase', { exact: true }).fill('not the passphrase of anybody')
  await page.getByRole('button', { name: 'Sign in', exact: true }).click()
  await page.locator('[aria-invalid=true]').waitFor()
  expect(page.url()).toContain('/sign-in')
  expect(await sessionStatus()).toBe(401)
})

test('after signing out the session is over for the browser and for its cookie', async () => {
  const { page, context } = visitor
  await signIn(visitor, 'operator')
  expect(await sessionStatus()).toBe(200)
  const cookies = await context.cookies()
  await page.locator('button[aria-haspopup=dialog]').first().click()
  await page.getByRole('button', { name: 'Sign out' }).click()
  await page.waitForURL(/\/sign-in/)
  await context.addCookies(cookies)
  expect(await sessionStatus()).toBe(401)
  await page.goto('/watch')
  await page.waitForURL(/\/sign-in/)
})

test('axe finds nothing on the sign-in page by day and by night, and nothing is asked of another origin', async () => {
  const { page } = visitor
  await page.goto('/sign-in')
  await page.getByRole('heading', { name: 'Sign in for the watch' }).waitFor()
  for (const mode of ['Day', 'Night']) {
    await page.getByRole('button', { name: mode, exact: true }).first().click()
    const { violations } = await new AxeBuilder({ page }).analyze()
    expect(
      violations.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html.slice(0, 160)).join(' | ')}`),
    ).toEqual([])
  }
  expect(visitor.foreign).toEqual([])
})
