/** What stands on the page of a station beside the vector: directions drawn, tests, a recomputation ordered by the administrator. */
import { afterAll, beforeAll, expect, test } from 'vitest'
import { z } from 'zod'
import { runView } from '../../shared/schemas/run.ts'
import { stationView } from '../../shared/schemas/station.ts'
import { until } from '../support/until.ts'
import { ask, newVisitor, signIn } from '../support/visitor.ts'
import type { Visitor } from '../support/visitor.ts'

let admin: Visitor
let stationId: number

beforeAll(async () => {
  admin = await newVisitor()
  await signIn(admin, 'admin')
  const [station] = await ask(admin, '/stations', z.array(stationView))
  stationId = station!.id
})
afterAll(() => admin.context.close())

test('the directional spectrum is drawn with its key and words, by the method chosen, and every test has its line', async () => {
  const { page } = admin
  await page.goto(`/stations/${stationId}`)
  const disc = page.getByRole('img', { name: /^Directional spectrum by IMLM: highest from/ })
  await disc.waitFor({ timeout: 60_000 })
  await page.getByRole('button', { name: 'Capon', exact: true }).click()
  await page.getByRole('img', { name: /^Directional spectrum by Capon/ }).waitFor()
  await page.getByRole('heading', { name: 'Quality tests' }).waitFor()
  await page.getByRole('row', { name: /Attenuated signal.*water level 10/ }).waitFor()
  await page.getByText('for acoustic instruments only').waitFor()
})

test('an administrator orders a recomputation of the last minutes and compares it with the record', async () => {
  const { page } = admin
  await page.getByRole('button', { name: 'Recompute a span' }).click()
  const to = Math.floor(Date.now() / 60_000) * 60_000
  const minute = (ms: number) => new Date(ms).toISOString().slice(0, 16)
  const sheet = page.getByRole('dialog')
  await sheet.getByLabel('Label').fill('The last two minutes')
  await sheet.getByLabel(/^From/).fill(minute(to - 120_000))
  await sheet.getByLabel(/^To/).fill(minute(to))
  await sheet.getByLabel('Reason (required, kept with it)').fill('to see whether the numbers come again')
  await page.getByRole('button', { name: 'Recompute into a new version' }).click()
  await page.getByRole('button', { name: 'Recompute into a new version' }).waitFor({ state: 'detached' })
  const ended = async () => {
    const [run] = await ask(admin, `/stations/${stationId}/runs`, z.array(runView))
    return run?.status === 'done'
  }
  await until('the recomputation is done', ended, 60_000)
  await page.getByRole('button', { name: 'Compare' }).first().click()
  await page.getByText(/\d windows?, \d of them in the operational record; \d equal bit for bit/).waitFor()
  // The page asked once for the newest estimate before there was one.
  expect(admin.complaints.filter((one) => !one.includes('404'))).toEqual([])
})
