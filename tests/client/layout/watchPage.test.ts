import { mount } from '@vue/test-utils'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import LeadBlock from '../../../src/components/watch/LeadBlock.vue'
import LongWork from '../../../src/components/watch/LongWork.vue'
import StationRow from '../../../src/components/watch/StationRow.vue'
import StationLines from '../../../src/components/watch/StationLines.vue'
import { useJobs } from '../../../src/stores/jobs.ts'
import { useServerClock } from '../../../src/stores/serverClock.ts'
import { livePicture } from '../../../shared/livePicture.ts'
import type { StationView } from '../../../shared/schemas/station.ts'
import { estimate, station, swell } from '../support/views.ts'
import { wordsOf } from '../support/wordsOf.ts'

const serverTime = Date.parse('2026-11-12T14:32:07.000Z')
const global = { stubs: { RouterLink: { template: '<a><slot /></a>' } } }

const lead = (view: StationView) =>
  mount(LeadBlock, { props: { station: view, picture: livePicture(view, serverTime), isLead: true }, global })

const row = (view: StationView) =>
  mount(
    { components: { StationRow }, template: '<table><tbody><StationRow v-bind="$attrs" /></tbody></table>' },
    {
      attrs: {
        station: view,
        picture: livePicture(view, serverTime),
        ribbon: { width: 140, height: 112, scale: 5.6, centre: 240 },
      },
      global,
    },
  )

beforeEach(() => {
  vi.useFakeTimers({ now: serverTime })
  setActivePinia(createPinia())
  useServerClock().hear(serverTime)
})
afterEach(() => {
  vi.useRealTimers()
})

describe('lead block', () => {
  it('gives both senses, speed, own height and period with their ±, quality and age', () => {
    const block = lead(station())
    const text = wordsOf(block.element)
    expect(text).toContain('Outer Ledge, swell lead station')
    expect(text).toContain('Good 2 min old, mean of 20 min')
    expect(text).toContain('from 247° T')
    expect(text).toContain('toward 067° T ± 3°')
    expect(text).toContain('all systems 2.4 m ± 0.1')
    expect(block.find('[role=group]').attributes('aria-label')).toBe(
      'Swell from two four seven degrees true, toward zero six seven degrees true, ± 3°, 11.4 m/s ± 0.3, 2.1 m ± 0.1, 12.4 s',
    )
  })

  it('shows no figure of a stale station, only its last good one in words with its time', () => {
    const old = estimate({ windowEndsAt: '2026-11-12T14:10:00.000Z' })
    const block = lead(station({ estimate: old, lastGood: old }))
    expect(block.find('.fig').exists()).toBe(false)
    expect(block.find('svg').exists()).toBe(false)
    expect(wordsOf(block.element)).toBe(
      'Outer Ledge lead station stale 22 min Withdrawn from the live picture Last good 14:10 UTC: swell 2.1 m, 12.4 s, 11.4 m/s, from 247° T, toward 067° T. Limit 15 min.',
    )
  })

  it('counts the record that fills', () => {
    const filling = station({
      estimate: null,
      lastGood: null,
      link: { state: 'connected', lastReadingAt: null, clockOffsetSeconds: null, recordShare: 0.2 },
    })
    expect(wordsOf(lead(filling).element)).toContain('Record: 4 of 20 min so far')
  })

  it('keeps height and period where no wave can be resolved, without a direction', () => {
    const flat = estimate({
      resolved: false,
      reason: 'no-resolvable-wave',
      systems: [],
      significantWaveHeight: 0.12,
      significantWaveHeightSd: 0.01,
    })
    const text = wordsOf(lead(station({ estimate: flat })).element)
    expect(text).toContain('No resolvable wave')
    expect(text).toContain('all systems 0.12 m ± 0.01 peak period 12.4 s')
    expect(text).not.toContain('toward')
  })

  it('withdraws the figures of a failed window', () => {
    const block = lead(station({ estimate: estimate({ qualityFlag: 4 }) }))
    expect(block.find('.fig').exists()).toBe(false)
    expect(wordsOf(block.element)).toContain('Failed, figures withdrawn')
  })

  it('sets two equal systems side by side in the order they were tracked', () => {
    const second = swell({ key: 2, from: 290, toward: 110, significantWaveHeight: 2.0 })
    const block = lead(station({ estimate: estimate({ systems: [swell({ key: 3 }), second] }) }))
    expect(wordsOf(block.element)).toContain('Two systems, no single leading direction')
    const labels = block.findAll('[role=group]').map((one) => one.attributes('aria-label')?.split(',')[0])
    expect(labels).toEqual([
      'West swell from two nine zero degrees true',
      'South-west swell from two four seven degrees true',
    ])
  })
})

describe('row of a station', () => {
  it('names the system whose height stands beside the vector', () => {
    const text = wordsOf(row(station()).element)
    expect(text).toContain('from 247° T toward 067° T ± 3° 11.4 ± 0.3 m/s')
    expect(text).toContain('swell')
    expect(text).toContain('2.4 m all')
  })

  it('draws no glyph of a stale station', () => {
    const old = estimate({ windowEndsAt: '2026-11-12T14:10:00.000Z' })
    const shown = row(station({ estimate: old, lastGood: old }))
    expect(shown.find('.wave-glyph').exists()).toBe(false)
    expect(wordsOf(shown.element)).toContain('Withdrawn from the live picture')
  })
})

describe('many stations', () => {
  it('scroll in themselves above twelve, and a line counts the stale ones', () => {
    const old = estimate({ windowEndsAt: '2026-11-12T14:10:00.000Z' })
    const seen = Array.from({ length: 13 }, (_, n) => {
      const view = station({ id: n + 1, estimate: n < 2 ? old : estimate() })
      return { station: view, picture: livePicture(view, serverTime) }
    })
    const lines = mount(StationLines, { props: { seen }, global })
    expect(wordsOf(lines.element)).toContain('2 of 13 stale')
    expect(lines.find('[role=region]').attributes('tabindex')).toBe('0')
  })
})

describe('long work', () => {
  it('shows its share while it runs and stays on the page when it failed', async () => {
    const job = {
      id: 1,
      kind: 'past',
      title: 'Computing the past',
      status: 'running' as const,
      progress: 0.19,
      detail: null,
      startedAt: null,
      updatedAt: '2026-11-12T14:32:00Z',
    }
    const jobs = useJobs()
    jobs.apply(job)
    const work = mount(LongWork)
    expect(wordsOf(work.element)).toContain('Computing the past 19 %')
    jobs.apply({ ...job, status: 'failed', detail: 'The database was full.', updatedAt: '2026-11-12T14:33:00Z' })
    await work.vm.$nextTick()
    expect(wordsOf(work.element)).toContain('Failed: Computing the past . The database was full.')
    jobs.apply({ ...job, updatedAt: '2026-11-12T14:32:30Z' })
    expect(jobs.unfinished).toEqual([])
  })
})
