/** Places: each kind by day, by night and on a phone; a substitute that says so; figures that leave by the clock. */
import AxeBuilder from '@axe-core/playwright'
import { afterAll, beforeAll, describe, expect, inject, test } from 'vitest'
import { z } from 'zod'
import { createDatabase } from '../../server/config/database.ts'
import { execute } from '../../server/models/sql.ts'
import { placeView } from '../../shared/schemas/place.ts'
import type { PlaceView } from '../../shared/schemas/place.ts'
import { noticeView } from '../../shared/schemas/placeNotice.ts'
import { stationRecord } from '../../shared/schemas/stationSetUp.ts'
import { stationDraft } from '../support/stationSetUp.ts'
import { until } from '../support/until.ts'
import { ask, newVisitor, order, signIn } from '../support/visitor.ts'
import type { Visitor } from '../support/visitor.ts'

const placeList = z.object({ places: z.array(placeView) })
const people = inject('people')

let operator: Visitor
let places: PlaceView[]

const readPlaces = async (at: Visitor): Promise<PlaceView[]> => (await ask(at, '/places', placeList)).places
const byKind = (kind: PlaceView['kind']): PlaceView => {
  const found = places.find((place) => place.kind === kind)
  if (!found) throw new Error(`the demonstration has no place of kind ${kind}`)
  return found
}
const hasLead = ({ outlook, settings }: PlaceView): boolean =>
  outlook?.figures.some((one) => one.quantity === settings.content.leadQuantity && one.figure.value !== null) ?? false

/** The demonstration's partner of the beach. */
async function patrol(): Promise<Visitor> {
  const visitor = await newVisitor({ width: 390, height: 844 })
  const person = people.find(({ email }) => email.startsWith('patrol'))
  await order(visitor, '/session', { email: person?.email, password: person?.password }, z.unknown())
  return visitor
}

async function setStaleAfter(seconds: number): Promise<void> {
  const sequelize = createDatabase({ url: inject('programDatabaseUrl'), poolSize: 1 })
  await execute(sequelize, 'UPDATE stations SET staleAfterSeconds = :seconds', { seconds })
  await sequelize.close()
}

beforeAll(async () => {
  operator = await newVisitor()
  await signIn(operator, 'operator')
  // While the demonstration's past is being taken in, a question may find the database busy.
  const seen = () =>
    readPlaces(operator).catch((error: unknown) => {
      if (String(error).includes('database.unavailable')) return []
      throw error
    })
  const fed = async () => {
    const found = (await seen()).filter(({ kind }) => kind !== 'berth')
    return found.length > 0 && found.every(hasLead)
  }
  await until('a lead figure at every place but the berths, which need an hour', fed, 140_000)
  places = await readPlaces(operator)
}, 160_000)

afterAll(async () => {
  await operator.context.close()
})

describe('while the stations send', () => {
  test('Watch shows every place with its figure, uncertainty and quality, and its name on the plan', async () => {
    const { page } = operator
    await page.goto('/watch')
    for (const place of places) {
      const cell = page.getByRole('group', { name: new RegExp(`^${place.name}:`) })
      await cell.waitFor()
      if (place.kind === 'berth') continue
      const words = (await cell.innerText()).replace(/\s+/g, ' ')
      expect(words).toMatch(/± \d|likely \d|predicted/)
      expect(words).toMatch(/Good|Suspect/)
      expect(words).toMatch(/limit|no limit set/)
    }
    const plan = await page.getByRole('img', { name: /^Plan of the coast/ }).getAttribute('aria-label')
    for (const { shortName } of places) expect(plan).toContain(shortName)
  })

  const drawings: Record<PlaceView['kind'], RegExp> = {
    entrance: /^Approach drawing.*inbound zero three eight degrees true/,
    breakwater: /^Breakwater section: free crest/,
    berth: /^Energy of long waves by period/,
    beach: /^Beach section/,
  }
  test.each(['entrance', 'breakwater', 'berth', 'beach'] as const)(
    'the page of the %s has its drawing, its caution, and stays within a phone; axe finds nothing',
    async (kind) => {
      const { page } = operator
      const place = byKind(kind)
      await page.goto(`/places/${place.id}`)
      await page.getByRole('heading', { level: 1, name: place.name }).waitFor()
      await page.getByRole('img', { name: drawings[kind] }).waitFor()
      expect(await page.locator('.place-page .note').count()).toBeGreaterThan(0)
      // Berths and breakwater are made of the same parts: by night two kinds tell.
      for (const mode of kind === 'entrance' || kind === 'beach' ? ['Day', 'Night'] : ['Day']) {
        await page.getByRole('button', { name: mode, exact: true }).first().click()
        const { violations } = await new AxeBuilder({ page }).analyze()
        expect(violations.map(({ id, nodes }) => `${mode} ${id}: ${nodes.map(({ html }) => html.slice(0, 160)).join(' | ')}`)).toEqual([]) // prettier-ignore
      }
      await page.getByRole('button', { name: 'Day', exact: true }).first().click()
      await page.setViewportSize({ width: 390, height: 844 })
      await page.locator('.lead-quantity.phone').waitFor()
      const excess = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth)
      expect(excess).toBeLessThanOrEqual(0)
      await page.setViewportSize({ width: 1440, height: 900 })
    },
  )

  test('one press tells how a figure was made, and another gives the figures of a drawing', async () => {
    const { page } = operator
    await page.goto(`/places/${byKind('entrance').id}`)
    await page.getByRole('button', { name: 'How this figure is made: Cross-sea' }).first().click()
    const sheet = page.getByRole('dialog')
    await sheet.getByText('Longuet-Higgins').waitFor()
    await sheet
      .getByText(/from \d{3}° T, toward \d{3}° T/)
      .first()
      .waitFor()
    await page.keyboard.press('Escape')
    await page.getByRole('button', { name: 'Figures: approach drawing' }).click()
    await page.getByRole('heading', { name: 'Figures: approach drawing' }).waitFor()
    await page.getByLabel('Speed through the water').fill('12')
    await page.getByText(/meets the waves|overtaken by the waves|runs with the waves|overtakes the waves|beam sea/).first().waitFor() // prettier-ignore
  })

  test('nobody said that anything is safe, and no page complained', async () => {
    for (const { id } of places) {
      await operator.page.goto(`/places/${id}`)
      await operator.page.locator('.place-page h1').waitFor()
      const words = (await operator.page.locator('main').innerText()).replace(/does not mean that (it|anybody) is safe/gi, '').replace(/do not mean safe bathing/gi, '') // prettier-ignore
      expect(words).not.toMatch(/\b(is|are|it's|all) safe\b|all clear/i)
    }
    expect(operator.complaints).toEqual([])
    expect(operator.foreign).toEqual([])
  })
})

describe('a beach partner on a phone', () => {
  test('sees own places first, records a closure there and withdraws it, and nothing at the harbour’s places', async () => {
    const partner = await patrol()
    const { page } = partner
    const beach = byKind('beach')
    try {
      await page.goto('/places')
      await page.getByRole('heading', { level: 1, name: 'My places' }).waitFor()
      const first = page.getByRole('region', { name: 'My places' }).getByRole('link').first()
      expect(await first.innerText()).toBe(places.find(({ team }) => team === 'beach safety')?.name)
      await page.goto(`/places/${beach.id}`)
      await page.getByRole('button', { name: 'Record a closure' }).click()
      const sheet = page.getByRole('dialog')
      await sheet.getByLabel('Area').fill('East end below the steps')
      await sheet.getByLabel('Why (required, kept)').fill('Trial of the browser tests')
      await sheet.getByRole('button', { name: 'Record it' }).click()
      await page.getByText('Closure: East end below the steps').first().waitFor()
      await page.getByRole('button', { name: 'Withdraw: Closure: East end below the steps' }).click()
      await page.getByRole('dialog').getByLabel('Reason (required)').fill('Trial is over')
      await page.getByRole('dialog').getByRole('button', { name: 'Withdraw it' }).click()
      await page.getByText('None is recorded here').waitFor()
      const kept = await ask(partner, `/places/${beach.id}/notices`, z.object({ notices: z.array(noticeView) }))
      expect(kept.notices[0]).toMatchObject({ state: 'withdrawn', withdrawReason: 'Trial is over' })
      await page.goto(`/places/${byKind('breakwater').id}`)
      await page.getByText('record these here').waitFor()
      expect(await page.getByRole('button', { name: 'Record a closure' }).count()).toBe(0)
      expect(partner.complaints).toEqual([])
    } finally {
      await partner.context.close()
    }
  })
})

describe('when a station does not send', () => {
  test('a place whose own station is silent says so before the figure, and names who stands in', async () => {
    const admin = await newVisitor()
    await signIn(admin, 'admin')
    const reason = 'Trial of the browser tests'
    const entrance = byKind('entrance')
    const { content } = entrance.settings
    if (content.kind !== 'entrance') throw new Error('not an entrance')
    const silent = await order(admin, '/stations', stationDraft('SIL', { name: 'Silent Rock', shortName: 'Silent Rock' }), stationRecord) // prettier-ignore
    const [feed] = content.stationOrder
    const draft = {
      ...{ code: 'TR', shortName: 'Trial', name: 'Trial entrance', team: null, areaPolygon: null, position: 90 },
      ...{ latitude: entrance.latitude, longitude: entrance.longitude, noticeListIds: [], reason },
      settings: { ...content, stationOrder: [{ ...feed, stationId: silent.id, path: [] }, feed] },
    }
    let place = await order(admin, '/places', draft, placeView)
    try {
      await admin.page.goto(`/places/${place.id}`)
      await admin.page.getByText('Not measured here.').first().waitFor({ timeout: 85_000 })
      const words = (await admin.page.locator('.lead-quantity').innerText()).replace(/\s+/g, ' ')
      expect(words).toMatch(/Not measured here\. Silent Rock has no estimate\. .*figures stand in.*\d\.\d\d ?m ?± \d/)
      expect(words).toContain('Suspect')
      place = await ask(admin, `/places/${place.id}`, placeView)
      const own = (await readPlaces(admin)).find(({ id }) => id === entrance.id)
      const relative = (one: PlaceView | undefined) => {
        const figure = one?.outlook?.figures[0]?.figure
        return (figure?.sd ?? NaN) / (figure?.value ?? NaN)
      }
      expect(relative(place)).toBeGreaterThan(relative(own))
    } finally {
      const gone = await ask(admin, `/places/${place.id}`, placeView)
      await order(admin, `/places/${place.id}`, { reason }, placeView, { method: 'DELETE', headers: { 'If-Match': `"${gone.version}"` } }) // prettier-ignore
      const left = await ask(admin, `/stations/${silent.id}/record`, stationRecord).catch(() => silent)
      await order(admin, `/stations/${silent.id}/retire`, { reason }, z.unknown(), { headers: { 'If-Match': `"${left.version}"` } }) // prettier-ignore
      await admin.context.close()
    }
  })

  test('past the stale limit no figure is left on Watch or on any page of a place', async () => {
    const { page } = operator
    await setStaleAfter(1)
    try {
      await page.goto('/watch')
      for (const { name } of places) {
        const cell = page.getByRole('group', { name: new RegExp(`^${name}: Not judged`) })
        await cell.waitFor()
        expect(await cell.locator('.fig').count()).toBe(0)
      }
      await page.goto(`/places/${byKind('beach').id}`)
      await page.getByText('Not judged.').first().waitFor()
      expect(await page.locator('.place-page .fig').count()).toBe(0)
    } finally {
      await setStaleAfter(900)
    }
  })
})
