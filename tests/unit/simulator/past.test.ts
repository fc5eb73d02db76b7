import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import { pastManifest, pastSeaState, type PastManifest } from '../../../shared/demonstration/past.ts'
import { demonstrationStations } from '../../../shared/demonstration/stations.ts'
import { seaSource } from '../../../simulator/client/seaSource.ts'
import { writePast } from '../../../simulator/past/writePast.ts'
import { demonstration } from '../../../simulator/scenarios/demonstration.ts'
import { truthAt } from '../../../simulator/sea/truth.ts'

const until = Date.parse('2026-11-12T14:30:00Z')
const sea = { scenario: demonstration, seed: 5, anchor: until }
const fairway = demonstrationStations[1]
let directory: string
let manifest: PastManifest

beforeAll(() => {
  directory = mkdtempSync(join(tmpdir(), 'offing-past-'))
  writePast({ sea, stations: [fairway], directory, hours: 1, until, madeAt: until, say: () => {} })
  manifest = pastManifest.parse(JSON.parse(readFileSync(join(directory, 'manifest.json'), 'utf8')))
})
afterAll(() => rmSync(directory, { recursive: true, force: true }))

describe('a past written to a folder', () => {
  it('says where it ends and what sea it was, so that a stream can go on', () => {
    expect(manifest).toMatchObject({
      until: '2026-11-12T14:30:00.000Z',
      scenario: 'demonstration',
      seed: 5,
      anchor: '2026-11-12T14:30:00.000Z',
      stations: [{ code: 'FW', readingsFrom: '2026-11-12T13:30:00.000Z' }],
    })
  })

  it('holds the very numbers that a stream of the same seconds sends', () => {
    const [header, ...rows] = readFileSync(join(directory, manifest.stations[0].readingsFile), 'utf8')
      .trim()
      .split('\n')
    expect(header).toBe('time,FW-1,FW-2,FW-3,FW-4')
    expect(rows).toHaveLength(7200)
    const live = seaSource(sea, fairway)
    for (let second = 0; second < 3600; second += 7) {
      const values = live.valuesAt(until - 3_600_000 + 1000 * second)
      expect([rows[2 * second], rows[2 * second + 1]]).toEqual(
        [0, 1].map((n) => {
          const time = new Date(until - 3_600_000 + 1000 * second + 500 * n).toISOString()
          return [time, ...values.map((series) => JSON.stringify(series[n]))].join(',')
        }),
      )
    }
  })

  it('holds a year of sea states that end where the readings begin', () => {
    const states = manifest.stations[0].seaStates.map(({ file, stepSeconds }) => ({
      stepSeconds,
      states: z.array(pastSeaState).parse(JSON.parse(readFileSync(join(directory, file), 'utf8'))),
    }))
    const times = (step: number) =>
      states
        .filter(({ stepSeconds }) => stepSeconds === step)
        .flatMap((one) => one.states.map(({ at }) => Date.parse(at)))
        .sort((a, b) => a - b)
    const minutes = times(60)
    expect(minutes).toHaveLength(30 * 1440)
    expect(new Date(minutes[minutes.length - 1]).toISOString()).toBe('2026-11-12T13:30:00.000Z')
    expect(minutes.every((time, n) => n === 0 || time - minutes[n - 1] === 60_000)).toBe(true)
    const tens = times(600)
    expect(tens).toHaveLength(335 * 144)
    expect(tens[tens.length - 1]).toBeLessThanOrEqual(minutes[0])
    const last = states[0].states[states[0].states.length - 1]
    const truth = truthAt({ scenario: demonstration, anchor: until, site: fairway }, until - 3_600_000, 1200)
    expect(last.systems[0].toward).toBeCloseTo(truth.systems[0].toward, 0)
    expect(last.systems[0].significantWaveHeight).toBeCloseTo(truth.systems[0].significantWaveHeight, 2)
  })
})
