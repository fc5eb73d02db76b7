/** The live picture, told in order: it comes up, it agrees with the sea, it goes stale, contact is lost and found. */
import AxeBuilder from '@axe-core/playwright'
import { afterAll, beforeAll, describe, expect, inject, test } from 'vitest'
import { z } from 'zod'
import { createDatabase } from '../../server/config/database.ts'
import { execute } from '../../server/models/sql.ts'
import { stationView } from '../../shared/schemas/station.ts'
import type { StationView } from '../../shared/schemas/station.ts'
import { until } from '../support/until.ts'
import { ask, control, newVisitor, signIn } from '../support/visitor.ts'
import type { Visitor } from '../support/visitor.ts'

const stationList = z.array(stationView)
const truth = z.object({
  significantWaveHeight: z.number(),
  systems: z.array(z.object({ toward: z.number(), phaseSpeed: z.number() })).min(1),
})
const usualStaleAfter = 900

let operator: Visitor
let stations: StationView[]

const rowOf = (station: StationView) =>
  operator.page.getByRole('row').filter({ has: operator.page.getByRole('link', { name: station.name }) })
const turn = (a: number, b: number) => Math.abs(((a - b + 540) % 360) - 180)

/** The figures of a station's row, as a person reads them. */
async function readRow(station: StationView) {
  const text = (await rowOf(station).first().innerText()).replace(/\s+/g, ' ')
  const figure = (pattern: RegExp) => Number(pattern.exec(text)?.[1] ?? NaN)
  return {
    text,
    from: figure(/from (\d{3})° T/),
    toward: figure(/toward (\d{3})° T/),
    speed: figure(/([\d.]+) ± [\d.]+ m\/s/),
    height: figure(/([\d.]+) m all/),
  }
}

async function askTruth(code: string, at: string) {
  const answer = await fetch(`${inject('truthUrl')}/truth?station=${code}&at=${at}&seconds=1200`)
  return truth.parse(await answer.json())
}

async function setStaleAfter(seconds: number): Promise<void> {
  const sequelize = createDatabase({ url: inject('programDatabaseUrl'), poolSize: 1 })
  await execute(sequelize, 'UPDATE stations SET staleAfterSeconds = :seconds', { seconds })
  await sequelize.close()
}

beforeAll(async () => {
  operator = await newVisitor()
  await signIn(operator, 'operator')
  stations = await ask(operator, '/stations', stationList)
})

afterAll(async () => {
  await operator.context.close()
})

describe('while the sea runs quietly', () => {
  test('every station of the demonstration shows a vector with both senses', async () => {
    expect(stations.map(({ code }) => code).sort()).toEqual(['FW', 'OL', 'PB'])
    for (const station of stations) {
      await until(`a vector of ${station.name}`, async () => !Number.isNaN((await readRow(station)).speed), 85_000)
      const { from, toward } = await readRow(station)
      expect(turn(from + 180, toward)).toBeLessThanOrEqual(1)
    }
  })

  test.each(['OL', 'FW', 'PB'])('the figures of %s agree with the sea that was made', async (code) => {
    const station = stations.find((one) => one.code === code)!
    const read = await readRow(station)
    const { estimate } = (await ask(operator, '/stations', stationList)).find((one) => one.code === code)!
    const sea = await askTruth(code, estimate!.windowEndsAt)
    const swell = sea.systems[0]!
    expect(turn(read.toward, swell.toward)).toBeLessThanOrEqual(5)
    expect(Math.abs(read.speed / swell.phaseSpeed - 1)).toBeLessThanOrEqual(0.05)
    expect(Math.abs(read.height / sea.significantWaveHeight - 1)).toBeLessThanOrEqual(0.15)
  })

  test('the page of a station names it and shows the same vector', async () => {
    for (const station of stations) {
      await operator.page.goto(`/stations/${station.id}`)
      await operator.page.getByRole('heading', { name: station.name }).first().waitFor()
      await operator.page
        .getByText(/toward/)
        .first()
        .waitFor()
    }
  })

  test('no page scrolls sideways at any width, and the vector stays on it', async () => {
    for (const path of ['/watch', '/stations', `/stations/${stations[0]!.id}`]) {
      await operator.page.goto(path)
      for (const width of [1440, 1024, 390]) {
        await operator.page.setViewportSize({ width, height: width === 390 ? 844 : 900 })
        await operator.page
          .getByText(/toward/)
          .first()
          .waitFor()
        const excess = await operator.page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth)
        expect(excess, `${path} at ${width}`).toBeLessThanOrEqual(0)
      }
    }
    await operator.page.setViewportSize({ width: 1440, height: 900 })
  })

  test('axe finds nothing on any page by day and by night', async () => {
    for (const path of ['/watch', '/stations', `/stations/${stations[0]!.id}`]) {
      await operator.page.goto(path)
      await operator.page
        .getByText(/toward/)
        .first()
        .waitFor()
      for (const mode of ['Day', 'Night']) {
        await operator.page.getByRole('button', { name: mode, exact: true }).first().click()
        // A theme changes colours and nothing else.
        const axe = new AxeBuilder({ page: operator.page })
        const { violations } = await (mode === 'Night' ? axe.withRules(['color-contrast']) : axe).analyze()
        const found = violations.map(
          ({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html.slice(0, 160)).join(' | ')}`,
        )
        expect(found, `${path}, ${mode}`).toEqual([])
      }
      await operator.page.getByRole('button', { name: 'Day', exact: true }).first().click()
    }
  })

  test('nothing was asked of any other origin, and no page complained', () => {
    expect(operator.foreign).toEqual([])
    expect(operator.complaints).toEqual([])
  })
})

describe('when the stations fall silent', () => {
  test('past the stale limit the figures leave the screen, and the API says why', async () => {
    await control('simulator/kill')
    await setStaleAfter(20)
    try {
      const stale = async () => {
        const seen = await ask(operator, '/stations', stationList)
        return seen.every(({ estimate }) => Date.now() - Date.parse(estimate!.windowEndsAt) > 20_000)
      }
      await until('every estimate is older than the limit', stale, 85_000)
      const seen = await ask(operator, '/stations', stationList)
      expect(seen.map(({ staleAfterSeconds, link }) => [staleAfterSeconds, link.state])).toEqual(
        seen.map(() => [20, 'silent']),
      )
      await operator.page.goto('/watch')
      for (const station of stations) {
        await rowOf(station)
          .getByText(/^stale/)
          .first()
          .waitFor()
        const { speed, text } = await readRow(station)
        expect(speed).toBeNaN()
        expect(text).toContain('Withdrawn from the live picture')
      }
    } finally {
      await setStaleAfter(usualStaleAfter)
      await control('simulator/start')
    }
  })
})

describe('when the server is lost', () => {
  test('the offing line says so, and says nothing more once the server is back', async () => {
    const band = operator.page.getByText(/No contact since \d\d:\d\d:\d\d UTC, /)
    await control('server/kill')
    try {
      await band.waitFor({ timeout: 60_000 })
    } finally {
      await control('server/start')
    }
    await band.waitFor({ state: 'detached', timeout: 60_000 })
  })
})
