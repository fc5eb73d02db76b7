import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { startDemonstrationPast } from '../../server/jobs/demonstrationPast.ts'
import {
  Estimate,
  EstimateDetail,
  Import,
  LongJob,
  ReadingBlock,
  SeriesDay,
  Watermark,
} from '../../server/models/index.ts'
import { inventedNote, wholeEstimate } from '../../server/services/estimates.ts'
import type { PastManifest, PastSeaState } from '../../shared/demonstration/past.ts'
import { makeStation } from '../support/factories.ts'
import type { StationMade } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

const until = Date.parse('2026-12-01T06:05:00Z')
const readingsFrom = Date.parse('2026-12-01T05:45:00Z')
const minute = 60_000

let folder: string
let parts: TestParts
let made: StationMade

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'offing-past-'))
  parts = await testParts({ INSTALLATION_KIND: 'demonstration', DEMONSTRATION_PAST_DIR: folder })
  made = await makeStation(parts.clock, { code: 'TT', sampleRate: 2 })
})
afterAll(() => rmSync(folder, { recursive: true, force: true }))
beforeEach(async () => {
  parts.clock.set(new Date(until + 30_000))
  await Promise.all([
    Estimate.destroy({ where: {} }),
    ReadingBlock.destroy({ where: {} }),
    SeriesDay.destroy({ where: {} }),
    Watermark.destroy({ where: {} }),
    LongJob.destroy({ where: {} }),
    Import.destroy({ where: {} }),
  ])
  rmSync(join(folder, 'manifest.json'), { force: true })
})

const iso = (time: number): string => new Date(time).toISOString()

const state = (at: number): PastSeaState => ({
  at: iso(at),
  waterDepth: 12,
  systems: [
    { name: 'swell', significantWaveHeight: 2, peakPeriod: 12, toward: 67, directionalSpread: 14, phaseSpeed: 10.2 },
    { name: 'wind sea', significantWaveHeight: 1, peakPeriod: 6, toward: 110, directionalSpread: 27, phaseSpeed: 8.3 },
  ],
})
const states = (last: number, count: number, step: number) =>
  Array.from({ length: count }, (_, n) => state(last - (count - 1 - n) * step))

/** Twenty minutes of readings over the border of two stretches, before them an hour by minutes and a day by tens of minutes. */
function writeFolder({ madeAt = until, brokenRow = false } = {}): void {
  const rows = ['time,TT-1,TT-2,TT-3']
  for (let time = readingsFrom; time < until; time += 500) {
    const level = 10 + Math.sin(time / 1000)
    rows.push(`${iso(time)},${level.toFixed(4)},${(level + 0.1).toFixed(4)},`)
  }
  if (brokenRow) rows[100] = rows[50] ?? ''
  writeFileSync(join(folder, 'TT.csv'), rows.join('\n'))
  const hourBefore = readingsFrom - 60 * minute
  const tens = Math.floor(hourBefore / (10 * minute)) * 10 * minute
  writeFileSync(join(folder, 'minutes.json'), JSON.stringify(states(readingsFrom, 60, minute)))
  writeFileSync(join(folder, 'tens.json'), JSON.stringify(states(tens, 144, 10 * minute)))
  const manifest: PastManifest = {
    madeAt: iso(madeAt),
    until: iso(until),
    scenario: 'quiet',
    seed: 1,
    anchor: iso(until),
    stations: [
      {
        code: 'TT',
        readingsFile: 'TT.csv',
        readingsFrom: iso(readingsFrom),
        seaStates: [
          { file: 'minutes.json', stepSeconds: 60 },
          { file: 'tens.json', stepSeconds: 600 },
        ],
      },
    ],
  }
  writeFileSync(join(folder, 'manifest.json'), JSON.stringify(manifest))
}

const takeIn = () => startDemonstrationPast(parts, 5).done

describe('the demonstration’s past', () => {
  it('is waited for until the simulator has written its manifest', async () => {
    const run = startDemonstrationPast(parts, 5)
    writeFolder()
    await run.done
    expect(await LongJob.findAll({ raw: true })).toMatchObject([
      { kind: 'demonstrationPast', status: 'done', progress: 1 },
    ])
  })

  it('becomes readings of its own source, the newest first', async () => {
    writeFolder()
    await takeIn()
    const blocks = await ReadingBlock.findAll({ order: ['startsAt'], raw: true })
    expect(blocks).toHaveLength(20)
    expect(blocks[0]).toMatchObject({ source: 'demonstration', startsAt: new Date(readingsFrom), missingCount: 120 })
    const imports = await Import.findAll({ order: ['id'], raw: true })
    expect(imports.map(({ counts }) => counts?.rows)).toEqual([600, 1800])
  })

  it('becomes estimates that say they are invented, up to where the readings begin', async () => {
    writeFolder()
    await takeIn()
    const rows = await Estimate.findAll({ order: ['windowEndsAt'], raw: true })
    expect(rows).toHaveLength(60 + 144)
    expect(rows.at(-1)?.windowEndsAt).toEqual(new Date(readingsFrom))
    expect(new Set(rows.map(({ origin, qualityFlag, revision }) => `${origin} ${qualityFlag} ${revision}`))).toEqual(
      new Set(['demonstration 1 1']),
    )
    expect(rows[0]).toMatchObject({ settingsId: made.settings.id, deploymentId: made.deployment.id, sensorsUsed: 3 })
    expect(await EstimateDetail.count()).toBe(0)
    const whole = await wholeEstimate(parts, made.station.id, new Date(readingsFrom), null)
    expect(whole).toMatchObject({ note: inventedNote, detail: null, inputCommitId: null, resolved: true })
  })

  it('scatters about the truth as twenty minutes of a random sea do', async () => {
    writeFolder()
    await takeIn()
    const rows = await Estimate.findAll({ raw: true })
    const heights = rows.map(({ height }) => height ?? NaN)
    const mean = heights.reduce((sum, one) => sum + one, 0) / heights.length
    const sd = Math.sqrt(heights.reduce((sum, one) => sum + (one - mean) ** 2, 0) / heights.length)
    // JONSWAP, γ 3.3, 20 min: 5.6 % at 10 s, growing with the root of the period: 6.1 % at 12 s.
    expect(mean).toBeGreaterThan(1.93)
    expect(mean).toBeLessThan(2.07)
    expect(sd / 2).toBeGreaterThan(0.045)
    expect(sd / 2).toBeLessThan(0.078)
    for (const { towardDegrees, speed, measuredSpeed, linearSpeed, slownessEast, slownessNorth } of rows) {
      expect(Math.abs((towardDegrees ?? NaN) - 67)).toBeLessThan(6)
      expect(Math.abs((speed ?? NaN) / 10.2 - 1)).toBeLessThan(0.04)
      expect(linearSpeed).toBe(10.2)
      expect(measuredSpeed ?? NaN).toBeGreaterThan(speed ?? NaN)
      expect(Math.hypot(slownessEast ?? NaN, slownessNorth ?? NaN)).toBeCloseTo(1 / (speed ?? NaN), 9)
    }
  })

  it('fills the days of the series before the day of the readings', async () => {
    writeFolder()
    await takeIn()
    const days = await SeriesDay.findAll({ where: { quantity: 'significantWaveHeight' }, order: ['day'], raw: true })
    expect(days.map(({ day }) => day)).toContain('2026-11-30')
    const mark = await Watermark.findOne({ where: { job: 'seriesDays', subjectId: made.station.id } })
    expect(mark?.doneUpTo).toEqual(new Date('2026-12-01T00:00:00Z'))
  })

  it('is not taken in again at the next start', async () => {
    writeFolder()
    await takeIn()
    await Estimate.destroy({ where: {} })
    await takeIn()
    expect(await Estimate.count()).toBe(0)
    expect(await LongJob.count()).toBe(1)
  })

  it('goes on where a stopped server left it, with nothing twice', async () => {
    writeFolder()
    let stopped: Promise<void> | null = null
    const run = startDemonstrationPast(parts, 5)
    const unsubscribe = parts.bus.subscribe('job.progressed', ({ progress }) => {
      if (progress > 0) stopped ??= run.stop()
    })
    await run.done
    unsubscribe()
    expect(await ReadingBlock.count()).toBe(5)
    expect(await LongJob.findAll({ raw: true })).toMatchObject([{ status: 'running' }])
    await takeIn()
    expect(await ReadingBlock.count()).toBe(20)
    expect(await Estimate.count()).toBe(204)
    expect(await Import.count()).toBe(2)
    expect(await LongJob.findAll({ raw: true })).toMatchObject([{ status: 'done' }])
  })

  it('that cannot be read fails with its row and reason, and is tried again when it was made anew', async () => {
    writeFolder({ brokenRow: true })
    await takeIn()
    const [failed] = await LongJob.findAll({ raw: true })
    expect(failed).toMatchObject({ status: 'failed', detail: expect.stringContaining('TT.csv, row') })
    writeFolder({ madeAt: until + minute })
    await takeIn()
    expect(await ReadingBlock.count()).toBe(20)
  })

  it('is none outside a demonstration', async () => {
    writeFolder()
    const real = { ...parts, environment: { ...parts.environment, installationKind: 'real' as const } }
    await startDemonstrationPast(real, 5).done
    expect(await LongJob.count()).toBe(0)
  })
})
