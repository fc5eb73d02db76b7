import { flushPromises, mount } from '@vue/test-utils'
import type { VueWrapper } from '@vue/test-utils'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { aggregateFlag, testLines } from '../../../shared/qartodTests.ts'
import type { RunComparison, RunView } from '../../../shared/schemas/run.ts'
import RunsSection from '../../../src/components/station/RunsSection.vue'
import SensorsSection from '../../../src/components/station/SensorsSection.vue'
import TestsSection from '../../../src/components/station/TestsSection.vue'
import UnresolvedStation from '../../../src/components/station/UnresolvedStation.vue'
import { emptyForm, orderOf } from '../../../src/components/station/recomputeForm.ts'
import { seaFigures } from '../../../src/components/station/seaFigures.ts'
import { useServerClock } from '../../../src/stores/serverClock.ts'
import { useSession } from '../../../src/stores/session.ts'
import { useSettings } from '../../../src/stores/settings.ts'
import { useStations } from '../../../src/stores/stations.ts'
import { FakeServer } from '../support/fakeServer.ts'
import { estimate, station } from '../support/views.ts'
import { detail, estimateView } from './views.ts'

const end = Date.parse('2026-11-12T14:30:00.000Z')
let server: FakeServer
let mounted: VueWrapper | null = null

beforeEach(() => {
  setActivePinia(createPinia())
  server = new FakeServer().install()
  server.on('/api/stations/1/clockOffsets', { body: [] }).on('/api/stations/1/levelDrift', { body: [] })
  useServerClock().nowMs = end + 60_000
})
afterEach(() => {
  mounted?.unmount()
  mounted = null
  vi.unstubAllGlobals()
})

function show(component: object, props: object): VueWrapper {
  mounted = mount(component, { props, attachTo: document.body, global: { stubs: { Teleport: false } } })
  return mounted
}
const asAdmin = (): void => {
  vi.spyOn(useSession(), 'allows').mockReturnValue(true)
}
const input = (label: string): HTMLInputElement => {
  const box = [...document.querySelectorAll('label')].find((one) => one.textContent?.includes(label))
  const field = box?.querySelector('input') ?? document.getElementById(box?.getAttribute('for') ?? '')
  return field as HTMLInputElement
}
const type = async (label: string, value: string): Promise<void> => {
  const field = input(label)
  field.value = value
  field.dispatchEvent(new Event('input'))
  await flushPromises()
}

describe('the quality tests of a window', () => {
  const tests = [
    { test: 'spike', flag: 1 as const, value: 0, limit: 0, detail: 'OL-1: 0 samples' },
    { test: 'spike', flag: 3 as const, value: 4, limit: 0, detail: 'OL-2: 4 samples' },
    { test: 'spike', flag: 3 as const, value: 9, limit: 0, detail: 'OL-3: 9 samples' },
    { test: 'climatology', flag: 2 as const, value: null, limit: null, detail: 'no span is set' },
    { test: 'dispersion ratio', flag: 1 as const, value: 1.03, limit: 1.2, detail: 'swell' },
  ]

  it('are one line each with the worst sensor, value and limit, in the order of the manuals', () => {
    const lines = testLines(tests)
    expect(lines.map(({ test, flag, good, run }) => [test, flag, good, run])).toEqual([
      ['climatology', 2, 0, 1],
      ['spike', 3, 1, 3],
      ['dispersion ratio', 1, 1, 1],
    ])
    expect(lines[1].worst.detail).toBe('OL-3: 9 samples')
    expect([[1, 3, 4], [1, 3], [1, 1], [2], [9, 1]].map((flags) => aggregateFlag(flags as (1 | 2 | 3 | 4 | 9)[]))).toEqual([4, 3, 1, 2, 9]) // prettier-ignore
  })

  it('show what failed in words, and why a test was not run', () => {
    const words = show(TestsSection, { detail: detail({ tests }) }).text()
    for (const part of [
      'all together Suspect',
      'OL-3: 9 samples',
      '1 of 3',
      'acoustic instruments only',
      'stay as they are',
    ])
      expect(words).toContain(part)
  })
})

describe('figures of the whole sea', () => {
  const waveByWave = {
    ...{ significantHeight: 2.31, greatestHeight: 4.02, greatestAt: 'OL-4', meanPeriod: 7.9 },
    ...{ waves: 61, isReconstructed: true },
  }

  it('tell single waves as reconstructed and few, the cut-off and what a tail would add', () => {
    const spectrum = { ...detail().spectrum!, tail: { exponent: -4, significantWaveHeight: 2.46 } }
    const rows = seaFigures(detail({ waveByWave, spectrum, surgeHeight: 0.08 }))
    expect(rows.map(({ name, figure }) => [name, figure])).toEqual([
      ['H 1/3', '2.3 m'],
      ['Highest wave', '4.0 m'],
      ['T z', '7.9 s'],
      ['Energy flux', '41.0 kW/m'],
      ['Cut-off', '0.30 Hz'],
      ['With a tail', '2.5 m'],
      ['Surge', '0.08 m'],
    ])
    expect(rows[0].help).toBe('of 61 waves, few: 100 are wanted')
  })
})

describe('a station without a single vector', () => {
  const showRefused = (changes: object, lastGood: ReturnType<typeof estimate> | null = null): string => {
    useSettings().apply({
      portName: 'Marrowick',
      timeZone: 'Etc/UTC',
      leadStationId: 1,
      cautions: { figures: 'Figures support.', array: 'One place.', traceSpeeds: 'No component.' },
      coast: null,
    })
    const silent = estimate({ resolved: false, systems: [], ...changes })
    const picture = { kind: 'unresolved', estimate: silent, lastGood }
    const whole = detail({ resolved: false, systems: [], ...changes })
    return show(UnresolvedStation, { station: station(), picture, detail: whole, points: [] }).text()
  }

  it('because it became ambiguous holds the one before, with since when, and tells the other', () => {
    const words = showRefused(
      { reason: 'ambiguous', qualityFlag: 4, runnerUp: { toward: 112, speed: 7.2, ratio: 0.95 } },
      estimate({ windowEndsAt: '2026-11-12T14:10:00.000Z' }),
    )
    expect(words).toContain('Direction ambiguous')
    expect(words).toContain('Held since 14:10 UTC: swell 2.1 m, 12.4 s, 11.4 m/s, from 247° T, toward 067° T')
    expect(words).toContain('The other that fits: from 292° T, toward 112° T, 7.2 m/s, beam 0.95 of the best')
  })

  it('because the sea stands tells both trains', () => {
    const opposedTrains = { toward: 60, opposedToward: 246, period: 9, amplitudeRatio: 0.62, phaseLock: 0.97 }
    const words = showRefused({ reason: 'standing-sea', qualityFlag: 3, opposedTrains })
    expect(words).toContain('Standing or reflected sea')
    expect(words).toContain(
      'Stronger train from 240° T, toward 060° T; against it from 066° T, toward 246° T with 62 %',
    )
    expect(words).toContain('Height and period stay valid')
  })
})

describe('a clock offset that was found', () => {
  const sensors = detail().sensors.map((sensor) =>
    sensor.id === 'OL-3'
      ? { ...sensor, findings: ['clock' as const], clockOffset: -0.31, clockOffsetSd: 0.03 }
      : sensor,
  )

  it('is confirmed by an administrator with a reason, from the estimate that found it', async () => {
    asAdmin()
    useStations().apply({ kind: 'stations', body: [station({ estimate: estimate() })] })
    useStations().apply({ kind: 'detail', body: estimateView({ detail: detail({ sensors }) }) })
    const confirmed = { letter: 'OL-3', offsetSeconds: -0.31, sd: 0.03, confirmedBy: 'Tessa Vorn', reason: 'x' }
    server.on('/api/stations/1/clockOffsets', (method) => ({
      body: method === 'GET' ? [] : { ...confirmed, validFrom: '2026-11-12T14:31:00.000Z' },
      status: method === 'GET' ? 200 : 201,
    }))
    const section = show(SensorsSection, { stationId: 1, sensors })
    await flushPromises()
    await section.find('button').trigger('click')
    await flushPromises()
    expect(document.body.textContent).toContain('− 0.31 s')
    const area = document.querySelector('textarea')!
    area.value = 'the logger lost its time server'
    area.dispatchEvent(new Event('input'))
    await flushPromises()
    document.querySelector('form')!.dispatchEvent(new Event('submit'))
    await flushPromises()
    const { method, body } = server.requests.at(-1)!
    expect([method, body]).toEqual([
      'POST',
      { letter: 'OL-3', windowEndsAt: estimate().windowEndsAt, revision: estimate().revision, reason: 'the logger lost its time server' }, // prettier-ignore
    ])
    expect(section.text()).toContain('OL-3 clock put right by −0.31 s')
  })

  it('stands beside a level that drifts against the others, told with its limit', async () => {
    const drift = {
      test: 'level drift',
      value: 0.14,
      limit: 0.1,
      detail: 'OL-2: level moved by 0.140 m against the others',
    }
    const held = { ...drift, flag: 1 as const, value: 0.01, detail: 'OL-1: level moved by 0.010 m against the others' }
    server.on('/api/stations/1/levelDrift', { body: [held, { ...drift, flag: 3 }] })
    const section = show(SensorsSection, { stationId: 1, sensors })
    await flushPromises()
    expect(section.text()).toContain('OL-2: level moved by 0.140 m against the others, limit 0.10 m')
    expect(section.text()).not.toContain('OL-1: level moved')
  })

  it('offers nothing to confirm to anybody else', () => {
    expect(show(SensorsSection, { stationId: 1, sensors }).find('button').exists()).toBe(false)
  })
})

describe('recomputations', () => {
  const run: RunView = {
    ...{ id: 3, jobId: 9, label: 'Shorter windows', reason: 'to see groups', stepSeconds: 60, settingsId: null },
    ...{ changes: {}, deploymentId: null, status: 'done', progress: 1, detail: '60 windows computed' },
    ...{ startsAt: '2026-11-12T12:00:00.000Z', endsAt: '2026-11-12T13:00:00.000Z', orderedBy: 'Tessa Vorn' },
    createdAt: '2026-11-12T14:00:00.000Z',
  }
  const figures = { resolved: true, significantWaveHeight: 2, toward: 60, speed: 9, period: 10 }
  const window = {
    ...{ windowEndsAt: '2026-11-12T12:31:00.000Z', operational: figures, isSame: false },
    ...{ run: { ...figures, toward: 64 }, height: -0.02, heading: 4, speed: 0.1 },
  }
  const comparison: RunComparison = {
    ...{ runId: 3, windows: 60, compared: 58, same: 40, otherVersions: ['0.1.0+4f2a'] },
    ...{ resolvedInRunOnly: 2, resolvedInRecordOnly: 0, most: [window] },
    largest: { height: window, heading: window, speed: window },
    mean: { height: -0.001, heading: 0.4, speed: 0.02 },
  }

  it('are listed, and compared with the operational record', async () => {
    server.on('/api/stations/1/runs', { body: [run] }).on('/api/stations/1/runs/3/comparison', { body: comparison })
    const section = show(RunsSection, { station: station() })
    await flushPromises()
    expect(section.text()).toContain('Shorter windows')
    expect(section.text()).not.toContain('Recompute a span')
    await section.find('button').trigger('click')
    await flushPromises()
    for (const part of [
      '60 windows, 58 of them',
      '40 equal bit for bit',
      'a vector in the run alone: 2',
      '+4.0 °',
      '−0.020 m',
      'from 244° T, toward 064° T',
      '0.1.0+4f2a',
    ])
      // prettier-ignore
      expect(section.text()).toContain(part)
  })

  it('are ordered by an administrator; a fault stands beside its field and nothing typed is lost', async () => {
    asAdmin()
    const choices = { settings: [], deployments: [], firstWindow: null, lastWindow: null }
    const errors = [{ path: 'startsAt', message: 'must be at most 31 days before the end' }]
    const problem = {
      type: 'about:blank',
      title: 'The input cannot be used',
      status: 422,
      code: 'request.invalid',
      errors,
    }
    server.on('/api/stations/1/runs', (method) => (method === 'GET' ? { body: [] } : { status: 422, body: problem }))
    server.on('/api/stations/1/runs/choices', { body: choices })
    const section = show(RunsSection, { station: station() })
    await flushPromises()
    await section.find('button').trigger('click')
    await flushPromises()
    await type('Label', 'Shorter windows')
    await type('Band to', '0.3')
    const area = document.querySelector('textarea')!
    area.value = 'to see groups'
    area.dispatchEvent(new Event('input'))
    await flushPromises()
    document.querySelector('form')!.dispatchEvent(new Event('submit'))
    await flushPromises()
    expect(server.requests.at(-1)!.body).toMatchObject({ label: 'Shorter windows', reason: 'to see groups', changes: { bandTo: 0.3 } }) // prettier-ignore
    expect(document.body.textContent).toContain('must be at most 31 days before the end')
    expect(input('Label').value).toBe('Shorter windows')
  })

  it('take their times as UTC and leave out what is empty', () => {
    const form = emptyForm(end, 60)
    expect([form.from, form.to]).toEqual(['2026-11-12T12:30', '2026-11-12T13:30'])
    expect(orderOf({ ...form, bandTo: '0,3', settingsId: '7' })).toMatchObject({
      ...{ startsAt: '2026-11-12T12:30:00.000Z', endsAt: '2026-11-12T13:30:00.000Z', settingsId: 7 },
      ...{ deploymentId: null, changes: { bandTo: 0.3 } },
    })
  })
})
