/** A whole watch at one desk: begun, written up, corrected, handed over with notes and two signatures; then taken over in need. */
import AxeBuilder from '@axe-core/playwright'
import { afterAll, beforeAll, expect, inject, test } from 'vitest'
import { z } from 'zod'
import { newVisitor, order } from '../support/visitor.ts'
import type { Visitor } from '../support/visitor.ts'

const [officer, relief] = inject('people').filter(({ role }) => role === 'operator')
let desk: Visitor
let other: Visitor

async function visitor(
  person: { email: string; password: string } | undefined,
  size?: { width: number; height: number },
) {
  const made = await newVisitor(size)
  await order(made, '/session', { email: person?.email, password: person?.password }, z.unknown())
  return made
}

beforeAll(async () => {
  desk = await visitor(officer)
  other = await visitor(relief, { width: 390, height: 844 })
})
afterAll(async () => {
  await Promise.all([desk, other].map(({ context }) => context.close()))
})

test('a watch begins, is shown in the strip, and its entries stand with the sea of their moment', async () => {
  const { page } = desk
  await page.goto('/log')
  await page.getByRole('button', { name: 'Begin the watch' }).click()
  await page.getByText(`watch begun. Nobody was on watch before.`).waitFor()
  await page
    .getByLabel('Watch strip')
    .getByText(/On watch since/)
    .waitFor()
  await page.keyboard.press('Escape')
  await page.getByLabel('New entry').fill('Patrol reports green water over the Long Arm')
  await page.getByRole('button', { name: /^Write at/ }).click()
  const entry = page.getByRole('listitem').filter({ hasText: 'green water' })
  await entry.getByText(/from \d{3}° T|no figure/).waitFor()
  await entry.getByRole('button', { name: /^Correct/ }).click()
  await page.getByLabel('New entry').fill('It was spray, no green water')
  await page.keyboard.press('Control+Enter')
  await entry
    .getByText(/Corrected by/)
    .first()
    .waitFor()
})

test('a draft is still there after a reload', async () => {
  const { page } = desk
  await page.getByLabel('New entry').fill('half a sentence')
  await page.reload()
  await page.getByLabel('New entry').waitFor()
  expect(await page.getByLabel('New entry').inputValue()).toBe('half a sentence')
  await page.getByLabel('New entry').fill('')
})

test('the relief signs at the same desk once every open item has its note', async () => {
  const { page } = desk
  const sheet = page.getByRole('complementary', { name: 'Hand-over' })
  const sign = sheet.getByRole('button', { name: 'Hand over, both sign' })
  await sheet.getByLabel('Relief: name or e-mail').fill(relief?.email ?? '')
  await sheet.getByLabel('Their passphrase').fill(relief?.password ?? '')
  // Other tests of the same server raise alerts meanwhile: each is an item that needs its note.
  await expect
    .poll(
      async () => {
        for (const field of await sheet.getByLabel(/^Note to /).all()) {
          if ((await field.inputValue()) === '') await field.fill('Read, nothing to do')
        }
        return sign.isEnabled()
      },
      { timeout: 20_000 },
    )
    .toBe(true)
  await sheet.getByText('Kept as typed.').waitFor()
  await sign.click()
  await page
    .getByText(/Both signed\./)
    .first()
    .waitFor()
  await page
    .getByLabel('Watch strip')
    .getByText(relief?.email === undefined ? '' : /B-2|A-1/)
    .first()
    .waitFor()
})

test('in need the other officer takes over at once, and the log says so', async () => {
  const { page } = desk
  const sheet = page.getByRole('complementary', { name: 'Hand-over' })
  await sheet.getByLabel('Why it cannot wait').fill('Officer called to the breakwater')
  await sheet.getByRole('button', { name: /^Take over now, \d+ notes? owed$/ }).click()
  await page
    .getByText(/taken over at once from/)
    .first()
    .waitFor()
})

test('axe finds nothing on the log, by day, by night and on a phone', async () => {
  const faults: string[] = []
  await other.page.goto('/log')
  await other.page.getByRole('heading', { name: 'Watch log' }).waitFor()
  for (const { page } of [desk, other]) {
    for (const mode of ['day', 'night']) {
      await page.evaluate((now) => document.documentElement.setAttribute('data-mode', now), mode)
      // A theme changes colours and nothing else.
      const axe = new AxeBuilder({ page })
      const { violations } = await (mode === 'night' ? axe.withRules(['color-contrast']) : axe).analyze()
      faults.push(...violations.map(({ id, nodes }) => `${mode} ${id}: ${nodes[0]?.html.slice(0, 160)}`))
    }
  }
  expect(faults).toEqual([])
  // The phone's page is as wide as the phone.
  const width = await other.page.evaluate(() => document.documentElement.scrollWidth)
  expect(width).toBeLessThanOrEqual(390)
  expect([...desk.foreign, ...other.foreign]).toEqual([])
})
