/** An administrator's first day: a station, its array, its key, and the first vector; and two administrators at once. */
import { spawn } from 'node:child_process'
import type { ChildProcess } from 'node:child_process'
import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import AxeBuilder from '@axe-core/playwright'
import type { Page } from 'playwright-core'
import { afterAll, afterEach, beforeAll, expect, test } from 'vitest'
import { z } from 'zod'
import { turnBetween } from '../../shared/directions.ts'
import { stationRecord } from '../../shared/schemas/stationSetUp.ts'
import type { StationRecord } from '../../shared/schemas/stationSetUp.ts'
import { stationView } from '../../shared/schemas/station.ts'
import { ask, newVisitor, order, personOf, programUrl } from '../support/visitor.ts'
import type { Visitor } from '../support/visitor.ts'

const root = fileURLToPath(new URL('../..', import.meta.url))
const recorded = join(root, 'tests/reference/cases/o04_swell_square5')
/** Degrees true, as the recording's `truth.json` has it. */
const recordedToward = 118
/** Codes and names are never given twice, not even after a retired station. */
const code = `T${Date.now().toString(36).slice(-4).toUpperCase()}`
const name = `Trial Roads ${code}`
const survey = `Sensor;East;North;Height above bed;One sigma
A;0,00;0,00;10,00;0,05
B;14,00;0,00;10,00;0,05
C;14,00;14,00;10,00;0,05
D;0,00;14,00;10,00;0,05
E;7,00;7,00;10,00;0,05
`
let folder = ''
let visitors: Visitor[] = []
let simulator: ChildProcess | null = null

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'offing-first-day-'))
})
afterEach(async () => {
  for (const { context } of visitors) await context.close()
  visitors = []
})
afterAll(async () => {
  simulator?.kill('SIGKILL')
  const admin = await office()
  for (const { id, code: own, state, version } of await ask(admin, '/stationRecords', z.array(stationRecord)))
    if (own === code && state !== 'retired') await change(admin, `/stations/${id}/retire`, { reason: 'End of the trial' }, version) // prettier-ignore
  await admin.context.close()
  await rm(folder, { recursive: true, force: true })
})

async function office(options?: Parameters<typeof newVisitor>[0]): Promise<Visitor> {
  const made = await newVisitor(options)
  visitors.push(made)
  const { email, password } = personOf('admin')
  await order(made, '/session', { email, password }, z.unknown())
  return made
}
const change = (admin: Visitor, path: string, data: object, version: number, method = 'POST'): Promise<StationRecord> =>
  order(admin, path, data, stationRecord, { method, headers: { 'If-Match': `"${version}"` } })

async function recordOf(admin: Visitor, code: string): Promise<StationRecord> {
  const records = await ask(admin, '/stationRecords', z.array(stationRecord))
  const record = records.find((one) => one.code === code)
  if (!record) throw new Error(`no station ${code}`)
  return record
}

/** By the beginning of its label: unit and help stand in it too. */
const field = (page: Page, label: string) => page.getByLabel(new RegExp(`^${label}`))

async function giveReason(page: Page, act: string | RegExp, reason: string): Promise<void> {
  const sheet = page.getByRole('dialog')
  await sheet.getByLabel('Reason (required, kept)').fill(reason)
  await sheet.getByRole('button', { name: act }).click()
}

/** The last minutes of the recording, enough for one window of five, sent as the new station with its key. */
async function sendRecording(key: string): Promise<void> {
  const rows = (await readFile(join(recorded, 'readings.csv'), 'utf8')).trim().split('\n')
  const readings = join(folder, 'readings.csv')
  const keys = join(folder, 'keys.json')
  await writeFile(readings, [rows[0], ...rows.slice(-5.5 * 60 * 4)].join('\n'))
  await writeFile(keys, JSON.stringify({ [code]: key }))
  const url = `${programUrl().replace('http', 'ws')}/telemetry`
  const own = ['--replay', join(recorded, 'station.json'), readings, '--as', code, '--url', url, '--keys', keys]
  simulator = spawn(process.execPath, ['--import', 'tsx', 'simulator/index.ts', ...own], { cwd: root, stdio: 'ignore' })
}

test('an administrator describes a station, draws its array, issues a key, and its first vector comes', async () => {
  const admin = await office()
  const { page } = admin
  await page.goto('/watch')
  await page.getByRole('navigation', { name: 'Pages' }).getByRole('link', { name: 'Set-up' }).click()
  await page.getByRole('link', { name: 'New station' }).click()

  await page.getByRole('button', { name: 'Create this station' }).click()
  await page.getByText('a name is needed').first().waitFor()
  await field(page, 'Full name').fill(name)
  await field(page, 'Short name').fill(name)
  await field(page, 'Code').fill(code)
  await field(page, 'State').selectOption('active')
  await page.locator('svg.position-plan').click({ position: { x: 180, y: 210 } })
  expect(await field(page, 'Latitude').inputValue()).toMatch(/^47\.\d+$/)
  await field(page, 'Window').fill('5')
  await page.getByRole('button', { name: 'Create this station' }).click()
  await giveReason(page, `Create ${name}`, 'First array of the roads')
  await page.waitForURL(/\/set-up\/stations\/\d+\/array$/)
  const stationId = Number(/stations\/(\d+)/.exec(page.url())?.[1])

  const choose = page.locator('input[type=file]')
  const file = (text: string) => ({ name: 'survey.csv', mimeType: 'text/csv', buffer: Buffer.from(text) })
  await choose.setInputFiles(file(survey.replace('14,00;0,00;10,00', 'wide;0,00;10,00')))
  await page
    .getByRole('dialog')
    .getByText(/Line 3/)
    .waitFor()
  expect(await page.getByRole('button', { name: /^Take over/ }).isDisabled()).toBe(true)
  await page.getByRole('dialog').getByRole('button', { name: 'Close' }).click()
  await choose.setInputFiles(file(survey))
  await page.getByRole('button', { name: 'Take over 5 sensors' }).click()

  const sensor = page.getByRole('button', { name: /^E, 7\.00 m east/ })
  await sensor.focus()
  await page.keyboard.press('Shift+ArrowRight')
  await page.getByRole('button', { name: /^E, 8\.00 m east/ }).waitFor()
  expect(await page.getByLabel('E: East, m').inputValue()).toBe('8.00')
  await page.keyboard.press('Control+z')
  await sensor.waitFor()
  await page.getByRole('button', { name: 'Measure', exact: true }).click()
  await page.getByRole('button', { name: /^A, / }).focus()
  await page.keyboard.press('Enter')
  await page.getByRole('button', { name: /^D, / }).focus()
  await page.keyboard.press('Enter')
  await page.getByRole('img', { name: /measured 14\.0 m, bears 000° T/ }).waitFor()

  for (const letter of ['A', 'B', 'C', 'D', 'E']) {
    await page.getByLabel(`Name of sensor ${'ABCDE'.indexOf(letter) + 1} on the wire`).focus()
    await field(page, 'Kind').selectOption('surface')
    await field(page, 'Serial number').fill(`TRS10${letter}`)
  }
  await page.getByText('5 sensors: one may fail, and a wrong one can be found').waitFor()
  await page.getByRole('img', { name: /^Beam response at/ }).waitFor()
  await page.getByRole('button', { name: 'Put deployment 1 in force, with reason' }).click()
  const sheet = page.getByRole('dialog')
  await sheet.getByRole('button', { name: 'From a time' }).click()
  await sheet.getByLabel('Day, UTC').fill(new Date(Date.now() - 86_400_000).toISOString().slice(0, 10))
  for (const box of await sheet.getByLabel(/Why it may stand/).all())
    await box.fill('Small array, accepted for the trial')
  await giveReason(page, 'Put deployment 1 in force', 'First survey')
  await page.getByText('deployment 1, in force').waitFor()

  await page.getByRole('link', { name: 'Keys and link' }).click()
  await page.getByRole('button', { name: 'Issue a key' }).click()
  await page.getByRole('button', { name: 'Issue this key' }).click()
  const key = await page.getByLabel(`Key of ${code}`).inputValue()
  expect(key).toMatch(/^[\w-]+\.[\w-]{20,}$/)
  await page.getByRole('button', { name: 'It is kept, close' }).click()
  expect(await page.content()).not.toContain(key)
  await sendRecording(key)
  await page.getByText(/frames received, all up to number \d+ on disk/).waitFor({ timeout: 30_000 })

  await page.goto(`/stations/${stationId}`)
  await page.getByText(/^toward$/).first().waitFor({ timeout: 120_000 }) // prettier-ignore
  const { estimate } = await ask(admin, `/stations/${stationId}`, stationView)
  expect(estimate?.resolved).toBe(true)
  expect(Math.abs(turnBetween(estimate?.systems[0]?.toward ?? NaN, recordedToward))).toBeLessThan(12)
  // That nothing is computed yet is an answer that a browser writes down.
  expect(admin.complaints.filter((one) => !one.includes('404'))).toEqual([])
  expect(admin.foreign).toEqual([])
}, 180_000)

test('of two administrators the second sees the difference, and nothing of the first is overwritten', async () => {
  const admin = await office()
  const { page } = admin
  const record = await recordOf(admin, 'FW')
  await page.goto(`/set-up/stations/${record.id}`)
  await field(page, 'Notes').fill('Mooring inspected')
  const theirs = { ...record, staleAfterSeconds: 960, reason: 'Longer link breaks expected' }
  const fields = ['code', 'shortName', 'name', 'latitude', 'longitude', 'datumName', 'datumOffset', 'datumSurveyedOn', 'staleAfterSeconds', 'areaPolygon', 'notes', 'state', 'reason'] as const // prettier-ignore
  const body = Object.fromEntries(fields.map((field) => [field, theirs[field]]))
  await change(admin, `/stations/${record.id}`, body, record.version, 'PUT')

  await page.getByRole('button', { name: 'Save station' }).click()
  await giveReason(page, 'Save Fairway', 'Inspection noted')
  const difference = page.getByRole('alert', { name: 'Changed by somebody else' })
  await difference.getByRole('row', { name: /Stale after, min 15 16/ }).waitFor()
  expect((await recordOf(admin, 'FW')).staleAfterSeconds).toBe(960)
  await difference.getByRole('button', { name: 'Take theirs, discard mine' }).click()
  expect(await field(page, 'Stale after').inputValue()).toBe('16')
  expect(await field(page, 'Notes').inputValue()).toBe(record.notes)
  const now = await recordOf(admin, 'FW')
  await change(admin, `/stations/${record.id}`, { ...body, staleAfterSeconds: record.staleAfterSeconds }, now.version, 'PUT') // prettier-ignore
  // The refused change is an answer that a browser writes down.
  expect(admin.complaints.filter((one) => !one.includes('412'))).toEqual([])
})

/** Full rules by day; the night has other colours and nothing else. */
async function isClean(page: Page, name: string, alsoByNight: boolean): Promise<void> {
  for (const mode of alsoByNight ? ['Night', 'Day'] : ['Day']) {
    await page.getByRole('button', { name: mode, exact: true }).first().click()
    const axe = new AxeBuilder({ page }).include('main')
    const { violations } = await (mode === 'Day' ? axe : axe.withRules(['color-contrast'])).analyze()
    expect(
      violations.map(({ id, nodes }) => `${name} ${mode} ${id}: ${nodes.map((node) => node.target).join(', ')}`),
    ).toEqual([])
  }
  await page.setViewportSize({ width: 390, height: 844 })
  await expect
    .poll(() => page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth))
    .toBeLessThanOrEqual(0)
  await page.setViewportSize({ width: 1440, height: 900 })
}

test('axe finds nothing on the pages of set-up by day and by night, and a phone has all of them in its width', async () => {
  const admin = await office()
  const { page } = admin
  const section = (name: string) => page.getByRole('heading', { level: 2, name, exact: true }).waitFor()
  await page.goto('/set-up')
  await page.getByRole('link', { name: 'Outer Ledge', exact: true }).waitFor()
  await isClean(page, 'Set-up', true)
  await page.getByRole('link', { name: 'New station' }).click()
  await section('How it is read')
  await isClean(page, 'New station', false)
  await page.getByRole('link', { name: 'All stations' }).click()
  await page.getByRole('link', { name: 'Outer Ledge', exact: true }).click()
  await section('Versions of how it is read')
  await isClean(page, 'Station', false)
  const pages = { Array: 'Beam response', Sensors: 'Instruments', 'Keys and link': 'Link now', Readings: 'Readings from a file', 'Other inputs': 'Enter one value' } // prettier-ignore
  for (const [title, heading] of Object.entries(pages)) {
    await page.getByRole('navigation', { name: 'Set-up of this station' }).getByRole('link', { name: title }).click()
    await section(heading)
    await isClean(page, title, title === 'Array')
  }
  expect(admin.complaints).toEqual([])
}, 120_000)
