/** Two desks, one alert: an exercise, so that no sea has to rise for it. */
import AxeBuilder from '@axe-core/playwright'
import { afterEach, expect, inject, test } from 'vitest'
import { z } from 'zod'
import { alertView } from '../../shared/schemas/alert.ts'
import { limitView } from '../../shared/schemas/limit.ts'
import { ask, newVisitor, programUrl, signIn } from '../support/visitor.ts'
import type { Visitor } from '../support/visitor.ts'

let visitors: Visitor[] = []
let begun: { desk: Visitor; id: number } | null = null
const visitor = async (options?: Parameters<typeof newVisitor>[0]): Promise<Visitor> => {
  const made = await newVisitor(options)
  visitors.push(made)
  return made
}
const post = async <T>({ context }: Visitor, path: string, data: unknown, shape: z.ZodType<T>): Promise<T> => {
  const headers = { 'X-Offing': '1', Origin: programUrl() }
  const answer = await context.request.post(`${programUrl()}/api${path}`, { headers, data })
  if (!answer.ok()) throw new Error(`${path}: ${answer.status()} ${await answer.text()}`)
  return shape.parse(await answer.json())
}
afterEach(async () => {
  if (begun) await post(begun.desk, `/drills/${begun.id}/end`, {}, z.unknown()).catch(() => undefined)
  begun = null
  for (const { context } of visitors) await context.close()
  visitors = []
})

/** The demonstration has two operators; each has a desk. */
async function desk(index: number): Promise<Visitor> {
  const made = await visitor()
  const person = inject('people').filter((one) => one.role === 'operator')[index]
  await post(made, '/session', { email: person?.email, password: person?.password }, z.unknown())
  await made.page.goto('/alerts')
  return made
}

async function beginExercise(at: Visitor): Promise<number> {
  const limits = await ask(at, '/limits', z.array(limitView))
  const limit = limits.find((one) => one.limitClass === 'wave' && one.current.content.priority === 'high')
  if (!limit) throw new Error('the demonstration has no high limit on waves')
  const order = { limitId: limit.id, value: 9.9, note: 'Trial of the browser tests' }
  const { id } = await post(at, '/drills', order, alertView)
  begun = { desk: at, id }
  return id
}

test('an alert shows at both desks, is acknowledged once, and the second is told who was first', async () => {
  const [one, other] = [await desk(0), await desk(1)]
  const id = await beginExercise(one)
  const number = String(id).padStart(4, '0')
  for (const { page } of [one, other]) {
    await page.locator('.alert-line').getByText('EXERCISE, high, new').waitFor()
    await page.goto(`/alerts/${id}`)
    await page.getByRole('button', { name: `Acknowledge ${number}` }).click()
    await page.getByRole('dialog').getByText(`${number}, high, second most serious of four`).waitFor()
  }
  expect(await one.page.title()).toMatch(/^\(\d+ active, \d+ new\) Alerts – Offing$/)
  const confirm = new RegExp(`^Acknowledge .*${number}$`)
  await one.page.getByRole('dialog').getByLabel('What is done').fill('Pilot told by VHF')
  await one.page.getByRole('dialog').getByRole('button', { name: confirm }).click()
  await one.page.getByRole('dialog').waitFor({ state: 'detached' })
  await one.page.locator('ol').getByText('Pilot told by VHF').waitFor()
  await other.page.locator('.rows').getByText('EXERCISE, high. Active, acknowledged').waitFor()
  await other.page.getByRole('dialog').getByRole('button', { name: confirm }).click()
  await other.page.getByRole('dialog').getByText('had acknowledged it already').waitFor()
  expect([...one.complaints, ...other.complaints]).toEqual([])
  expect([...one.foreign, ...other.foreign]).toEqual([])
})

test('a partner sees the alert, by night on a phone, and is offered nothing that changes it', async () => {
  const office = await desk(0)
  const id = await beginExercise(office)
  const partner = await visitor({ width: 390, height: 844 })
  await signIn(partner, 'partner')
  const { page } = partner
  await page.evaluate(() => localStorage.setItem('offing.display', JSON.stringify({ mode: 'night' })))
  await page.goto(`/alerts/${id}`)
  await page.getByRole('heading', { name: 'Who was told' }).waitFor()
  expect(await page.getByRole('button', { name: /acknowledge|shelve|service|exercise/i }).count()).toBe(0)
  const wide = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth)
  expect(wide).toBeLessThanOrEqual(0)
  await page.goto('/limits')
  await page.waitForURL(/\/watch$/)
  expect(partner.complaints).toEqual([])
})

test('axe finds nothing on the pages of alerts, limits, messages and lists by day and by night', async () => {
  const { page, complaints } = await desk(0)
  for (const path of ['alerts', 'limits', 'limits/new', 'messages', 'lists', 'performance']) {
    await page.goto(`/${path}`)
    await page.getByRole('heading').nth(1).waitFor()
    for (const mode of ['Day', 'Night']) {
      await page.getByRole('button', { name: mode, exact: true }).first().click()
      // A theme changes colours and nothing else.
      const axe = new AxeBuilder({ page })
      const { violations } = await (mode === 'Night' ? axe.withRules(['color-contrast']) : axe).analyze()
      expect(
        violations.map(({ id, nodes }) => `${path} ${mode} ${id}: ${nodes.map((node) => node.target).join(', ')}`),
      ).toEqual([])
    }
  }
  expect(complaints).toEqual([])
})
