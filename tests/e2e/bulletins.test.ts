/** A bulletin's whole life at the desk: written, frozen, issued alone with a reason, mailed, printed, replaced, cancelled, read by anybody. */
import AxeBuilder from '@axe-core/playwright'
import type { Page } from 'playwright-core'
import { afterAll, beforeAll, expect, test } from 'vitest'
import { z } from 'zod'
import { bulletinFigure } from '../../shared/schemas/bulletin.ts'
import { caughtMail, caughtMailList } from '../../shared/schemas/caughtMail.ts'
import { settingVersionView } from '../../shared/schemas/settingGroups.ts'
import { until } from '../support/until.ts'
import { ask, newVisitor, order, personOf, programUrl } from '../support/visitor.ts'
import type { Visitor } from '../support/visitor.ts'

const headline = 'Trial swell at the entrance'
let officer: Visitor
let admin: Visitor
let anybody: Visitor
let first = ''

beforeAll(async () => {
  ;[officer, admin, anybody] = [await newVisitor(), await newVisitor(), await newVisitor({ width: 390, height: 844 })]
  for (const [visitor, role] of [
    [officer, 'operator'],
    [admin, 'admin'],
  ] as const) {
    const { email, password } = personOf(role)
    await order(visitor, '/session', { email, password }, z.unknown())
  }
  const hasFigure = async () => {
    const answer = await officer.context.request.get(`${programUrl()}/api/bulletinFigures`)
    // On a busy machine the database may be late: then it is asked again.
    if (!answer.ok()) return false
    const { figures } = z.object({ figures: z.array(bulletinFigure) }).parse(await answer.json())
    return figures.some(({ kind }) => kind === 'station')
  }
  await until('a figure that a bulletin can give', hasFigure, 85_000)
})
afterAll(async () => {
  await showToAnybody(false)
  for (const { context } of [officer, admin, anybody]) await context.close()
})

async function faultsOf(page: Page): Promise<string[]> {
  const { violations } = await new AxeBuilder({ page }).analyze()
  return violations.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html.slice(0, 160)).join(' | ')}`)
}
async function showToAnybody(isPublic: boolean): Promise<void> {
  const groups = z.object({ settings: z.array(settingVersionView) })
  const { settings } = await ask(admin, '/settings/groups', groups)
  const held = settings.find(({ group }) => group === 'bulletins')
  const headers = { 'If-Match': `"${held?.number ?? 0}"` }
  const body = { content: { asksSecondPerson: true, isPublic }, reason: 'Trial of the public page' }
  await order(admin, '/settings/groups/bulletins', body, z.unknown(), { method: 'PUT', headers })
}
const mailsSaying = async (words: string) =>
  (await ask(officer, '/caughtMails', caughtMailList)).mails.filter(({ subject }) => subject.includes(words))

test('a draft is kept as it is typed, its figures are frozen, and a draft that is not ready says what it lacks', async () => {
  const { page } = officer
  await page.goto('/bulletins')
  await page.getByRole('button', { name: 'New bulletin' }).click()
  await page.waitForURL(/\/bulletins\/\d+$/)
  await page.getByRole('button', { name: /^Issue to/ }).click()
  await page.getByText('Not ready: ').waitFor()
  await page.getByRole('textbox', { name: /^For/ }).fill('Entrance and beaches')
  await page.getByRole('textbox', { name: /^Headline/ }).fill(headline)
  await page.getByRole('textbox', { name: /^What it means/ }).fill('Cross-sea above 1.0 m is likely at the entrance.')
  await page.getByRole('checkbox', { name: /^Harbour duty/ }).check()
  await page.getByRole('button', { name: 'Freeze again' }).click()
  await page.getByText(/^draft, kept; figures frozen/).waitFor()
  await page.reload()
  await expect.poll(() => page.getByRole('textbox', { name: /^Headline/ }).inputValue()).toBe(headline)
  const sheet = page.getByRole('article', { name: 'Bulletin' })
  await sheet.getByText(/^Measured \d\d:\d\d.* UTC, .* local\. Not a forecast$/).waitFor()
  await page.getByRole('button', { name: 'Read-out' }).click()
  await page.getByText(/^Measured at (\w+ ){4}UTC\. This is not a forecast\.$/).waitFor()
  await page.getByText('INFORMATION. Trial swell at the entrance.').waitFor()
  await page.getByRole('button', { name: 'E-mail' }).click()
  await page.getByText(`INFORMATION: ${headline}`).waitFor()
  await page.getByRole('button', { name: 'Page', exact: true }).click()
})

test('alone it is issued only with a written reason, and goes out as laid-out e-mail and plain text', async () => {
  const { page } = officer
  await page.getByRole('button', { name: /^Issue to 1 list, \d+ (person|people)$/ }).click()
  const sheet = page.getByRole('dialog')
  await sheet.getByRole('radio', { name: 'Alone on watch' }).check()
  await sheet.getByLabel(/^Why alone/).fill('The second officer is out with the pilot boat')
  await sheet.getByRole('button', { name: /^Issue alone to 1 list/ }).click()
  await page
    .getByRole('heading', { name: 'In force' })
    .or(page.getByRole('heading', { name: 'To come' }))
    .waitFor()
  first = /\d{4}-\d+/.exec((await page.getByText(/^bulletin \d{4}-\d+$/).textContent()) ?? '')?.[0] ?? ''
  await until('its e-mail', async () => (await mailsSaying(`Information: ${headline}`)).length > 0, 30_000)
  const [line] = await mailsSaying(`Information: ${headline}`)
  const mail = await ask(officer, `/caughtMails/${line?.id}`, caughtMail)
  expect(mail.subject).toContain('DEMONSTRATION')
  for (const said of [mail.text, mail.html ?? '']) {
    expect(said).toContain(headline)
    expect(said).toMatch(/Measured \d\d:\d\d.*Not a forecast/)
    expect(said).toContain('Figures support and never replace')
    expect(said).toMatch(/± \d/)
  }
  await until('word to the administrators', async () => (await mailsSaying('by one person alone')).length > 0, 30_000)
})

test('it prints as one A4 sheet with figure, ± and caution, and nothing of the desk', async () => {
  const { page } = officer
  await page.emulateMedia({ media: 'print' })
  const words = await page.evaluate(() => document.body.innerText)
  expect(words).toMatch(/\d{3}°\s?T/)
  expect(words).toMatch(/± \d/)
  expect(words).toContain('Figures support and never replace')
  expect(words).toMatch(/printed .* figures measured \d\d:\d\d UTC, not a forecast/)
  expect(words).not.toContain('On watch')
  expect(words).not.toContain('Use as a pattern')
  const paper = (await page.pdf({ preferCSSPageSize: true })).toString('latin1')
  const [, width, height] = /\/MediaBox \[0 0 ([\d.]+) ([\d.]+)\]/.exec(paper) ?? []
  // ISO 216: 210 by 297 mm; points of 1/72 inch.
  expect(Number(width)).toBeCloseTo((210 / 25.4) * 72, 0)
  expect(Number(height)).toBeCloseTo((297 / 25.4) * 72, 0)
  expect(paper.match(/\/Type \/Page\b(?!s)/g)).toHaveLength(1)
  await page.emulateMedia({ media: null })
})

test('it is replaced by the next of its chain, which is cancelled, and its readers are told', async () => {
  const { page } = officer
  await page.getByRole('button', { name: `Replace ${first}` }).click()
  await page.getByRole('heading', { name: `Bulletin to replace ${first}` }).waitFor()
  await page.getByRole('textbox', { name: /^Headline/ }).fill(`${headline}, going down`)
  await page.getByText(/^draft, kept/).waitFor()
  await page.getByRole('button', { name: /^Issue to/ }).click()
  const sheet = page.getByRole('dialog')
  await sheet.getByRole('radio', { name: 'Alone on watch' }).check()
  await sheet.getByLabel(/^Why alone/).fill('The second officer is out with the pilot boat')
  await sheet.getByRole('button', { name: /^Issue alone/ }).click()
  await page.getByText(`Replaces ${first}.`).waitFor()
  await page.getByRole('region', { name: 'Chain' }).getByRole('link', { name: first }).click()
  await page.getByText(/^It was replaced by a later bulletin/).waitFor()
  await page.goBack()
  await page.getByRole('button', { name: 'Cancel it' }).click()
  await page
    .getByRole('dialog')
    .getByLabel(/^Reason/)
    .fill('Figures of one station were wrong')
  await page.getByRole('button', { name: 'Cancel it and tell them' }).click()
  await page.getByText(/^It was cancelled/).waitFor()
  await until('word of it', async () => (await mailsSaying('Cancelled: bulletin')).length > 0, 30_000)
})

test('anybody reads it without signing in once the office has switched the page on, and no name stands there', async () => {
  const { page } = anybody
  const { person } = await ask(officer, '/session', z.object({ person: z.object({ name: z.string() }) }))
  await page.goto('/bulletin')
  await page.getByText('This office shows no bulletins here.').waitFor()
  await showToAnybody(true)
  await page.reload()
  await page.getByText('No bulletin is in force.').waitFor()
  await page.getByText('Figures of one station were wrong', { exact: false }).waitFor()
  expect(await page.evaluate(() => document.body.innerText)).not.toContain(person.name)
  expect(await faultsOf(page)).toEqual([])
})

test('axe finds nothing on list, issue and composer, by day and night, and a telephone shows them in its width', async () => {
  const { page } = officer
  const issue = new URL(page.url()).pathname
  await page.getByRole('button', { name: 'Use as a pattern' }).click()
  await page.getByRole('heading', { name: 'Bulletin', exact: true }).waitFor()
  const draft = new URL(page.url()).pathname
  for (const path of ['/bulletins', issue, draft]) {
    await page.setViewportSize({ width: 1440, height: 900 })
    await page.goto(path)
    await page.getByText(headline, { exact: false }).first().waitFor()
    for (const mode of ['Night', 'Day']) {
      await page.getByRole('button', { name: mode, exact: true }).first().click()
      expect([path, mode, await faultsOf(page)]).toEqual([path, mode, []])
    }
    await page.setViewportSize({ width: 390, height: 844 })
    const isWider = await page.evaluate(() => document.documentElement.scrollWidth > window.innerWidth)
    expect([path, isWider]).toEqual([path, false])
  }
  await page.getByRole('button', { name: 'Throw the draft away' }).click()
  await page.waitForURL(/\/bulletins$/)
  expect(officer.foreign).toEqual([])
  // The page is told "not switched on" by a 404, which every browser notes.
  expect([...officer.complaints, ...anybody.complaints.filter((words) => !words.includes('404'))]).toEqual([])
})
