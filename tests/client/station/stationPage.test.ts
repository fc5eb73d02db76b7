import { flushPromises, mount } from '@vue/test-utils'
import type { VueWrapper } from '@vue/test-utils'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { createMemoryHistory, createRouter } from 'vue-router'
import type { StationView } from '../../../shared/schemas/station.ts'
import StationPage from '../../../src/pages/StationPage.vue'
import { useServerClock } from '../../../src/stores/serverClock.ts'
import { useSettings } from '../../../src/stores/settings.ts'
import { useStations } from '../../../src/stores/stations.ts'
import { estimate, station, swell } from '../support/views.ts'
import { detail, estimateView } from './views.ts'

const end = Date.parse('2026-11-12T14:30:00.000Z')
const none = { template: '<div />' }
let page: VueWrapper | null = null

beforeEach(() => {
  setActivePinia(createPinia())
  // The stores are filled by hand.
  vi.stubGlobal('fetch', () => Promise.reject(new TypeError('no server')))
})
afterEach(() => {
  page?.unmount()
  page = null
  vi.unstubAllGlobals()
})

/** The page as it stands at a server time, with what the stores hold. */
async function openPage(
  view: StationView,
  nowMs: number,
  shown = view.estimate ? estimateView({ ...view.estimate }) : null,
): Promise<VueWrapper> {
  const router = createRouter({
    history: createMemoryHistory(),
    routes: [
      { path: '/stations', name: 'stations', component: none },
      { path: '/stations/:id', name: 'station', component: StationPage },
    ],
  })
  await router.push('/stations/1')
  useServerClock().nowMs = nowMs
  useSettings().apply({
    portName: 'Marrowick',
    timeZone: 'Etc/GMT-1',
    leadStationId: 1,
    cautions: { figures: 'Figures support.', array: 'One place.', traceSpeeds: 'A trace speed is no component.' },
    coast: null,
  })
  useStations().apply({ kind: 'stations', body: [view] })
  if (shown) useStations().apply({ kind: 'detail', body: shown })
  page = mount({ template: '<RouterView />' }, { global: { plugins: [router] }, attachTo: document.body })
  await flushPromises()
  return page
}

describe('the page of a station', () => {
  it('gives every figure its unit, sense and ±, with quality, age and caution', async () => {
    const words = (await openPage(station({ estimate: estimate() }), end + 130_000)).text()
    for (const part of [
      '247°',
      '067°',
      '± 3°',
      '11.4',
      'm/s',
      '± 0.3',
      '2.1',
      'Good',
      'ended 2 min ago',
      'mean of 20 min',
    ])
      expect(words).toContain(part)
    expect(words).toContain('Figures support.')
  })

  it('reads its velocity as one sentence with both senses', async () => {
    const block = (await openPage(station({ estimate: estimate() }), end + 130_000)).find('.velocity')
    expect(block.attributes('aria-label')).toBe(
      'Swell from two four seven degrees true, toward zero six seven degrees true, ± 3°, 11.4 m/s ± 0.3, height 2.1 m ± 0.1, peak period 12.4 s, Good, 2 min old, mean of 20 min',
    )
  })

  it('sets measured, corrected and linear speed side by side', async () => {
    const speeds = (await openPage(station({ estimate: estimate() }), end)).find('.speeds').text()
    expect(speeds).toMatch(/Measured\s*11\.6.*Freed of spread\s*11\.4.*Linear theory\s*11\.1/)
  })

  it('shows trace speeds with their warning', async () => {
    const words = (await openPage(station({ estimate: estimate() }), end)).text()
    expect(words).toMatch(/1 to 2\s*20\.0/)
    expect(words).toContain('broadside')
    expect(words).toContain('A trace speed is no component.')
  })

  it('tells how the estimate was made', async () => {
    const words = (await openPage(station({ estimate: estimate() }), end)).find('.how-made').text()
    for (const part of [
      '14:10:00 to 14:30:00 UTC',
      'revision 1',
      'commit 48211',
      'OL-1, OL-2, OL-4, OL-5',
      '0.1.0+4f2a',
    ])
      expect(words).toContain(part)
  })

  it('withdraws vector, crests and figures by the server clock alone once the estimate is stale', async () => {
    const shown = await openPage(station({ estimate: estimate(), lastGood: estimate() }), end + 15 * 60_000)
    expect(shown.find('.velocity').exists()).toBe(true)
    useServerClock().nowMs = end + 22 * 60_000
    await flushPromises()
    expect(shown.find('.velocity').exists()).toBe(false)
    expect(shown.find('.crest-plan').exists()).toBe(false)
    expect(shown.find('.spectrum-chart').exists()).toBe(false)
    expect(shown.text()).toContain('Withdrawn from the live picture')
    expect(shown.text()).toContain('Last good 14:30 UTC: swell 2.1 m, 12.4 s, 11.4 m/s, from 247° T, toward 067° T')
  })

  it('without a resolvable wave gives no direction and no speed, and keeps height and period', async () => {
    const low = { resolved: false, reason: 'no-resolvable-wave' as const, qualityFlag: 4 as const, systems: [] }
    const silent = estimate({ ...low, significantWaveHeight: 0.12, significantWaveHeightSd: 0.02, peakPeriod: 6.9 })
    const tests = [{ test: 'height', flag: 4 as const, value: 0.12, limit: 0.15, detail: 'all sensors' }]
    const shown = await openPage(
      station({ estimate: silent }),
      end,
      estimateView({ ...silent, detail: detail({ ...low, tests }) }),
    )
    expect(shown.find('.velocity').exists()).toBe(false)
    for (const words of ['No resolvable wave', '0.12 m is below 0.15 m', 'Height and period stay valid', '6.9'])
      expect(shown.text()).toContain(words)
  })

  it('with doubtful geometry is frozen and shows what each sub-array finds', async () => {
    const doubt = { resolved: false, reason: 'geometry-doubtful' as const, qualityFlag: 4 as const, systems: [] }
    const frozen = estimate(doubt)
    const shown = await openPage(
      station({ estimate: frozen, lastGood: estimate({ windowEndsAt: '2026-11-12T13:50:00.000Z' }) }),
      end,
      estimateView({ ...frozen, detail: detail(doubt) }),
    )
    for (const words of ['Frozen: geometry doubtful', 'Last good 13:50 UTC', 'OL-1 OL-2 OL-4', 'Lag left over'])
      expect(shown.text()).toContain(words)
    expect(shown.find('.velocity').exists()).toBe(false)
  })

  it('with two systems of about equal height lets none lead', async () => {
    const systems = [
      swell({ key: 2, from: 205, toward: 25, significantWaveHeight: 1.6 }),
      swell({ key: 1, from: 262, toward: 82, significantWaveHeight: 1.4 }),
    ]
    const shown = await openPage(station({ estimate: estimate({ systems }) }), end)
    expect(shown.text()).toContain('Two systems, no single leading direction')
    expect(shown.findAll('.block .name').map((name) => name.text())).toEqual(['West swell', 'South-west swell'])
  })

  it('of a record that has just begun counts its minutes', async () => {
    const link = { state: 'connected' as const, lastReadingAt: null, clockOffsetSeconds: 0, recordShare: 0.2 }
    const words = (await openPage(station({ estimate: null, link }), end)).text()
    expect(words).toContain('Record: 4 of 20 min so far')
  })
})

describe('the figures of a drawing', () => {
  it('open as a table, go to the clipboard as CSV, and give the focus back when closed', async () => {
    const writeText = vi.fn(async (_text: string) => undefined)
    vi.stubGlobal('navigator', { clipboard: { writeText } })
    const shown = await openPage(station({ estimate: estimate() }), end)
    const button = shown.find('button[aria-label="Figures: spectrum"]')
    await button.trigger('click')
    const sheet = document.querySelector('.figures-sheet')
    expect(sheet?.textContent).toContain('Figures: spectrum')
    expect(document.activeElement?.textContent).toContain('Figures: spectrum')
    const [copy, close] = [...(sheet?.querySelectorAll('button') ?? [])]
    copy.click()
    await flushPromises()
    expect(writeText.mock.calls[0][0].split('\r\n').slice(0, 3)).toEqual([
      'wave_frequency_s-1,period_s,sea_surface_wave_variance_spectral_density_m2_s',
      '0.05,20,0.5',
      '0.08,12.5,12.1',
    ])
    close.click()
    await flushPromises()
    expect(document.querySelector('.figures-sheet')).toBeNull()
    expect(document.activeElement).toBe(button.element)
  })

  it('stay readable where the browser keeps the clipboard to itself', async () => {
    vi.stubGlobal('navigator', { clipboard: { writeText: () => Promise.reject(new Error('refused')) } })
    const shown = await openPage(station({ estimate: estimate() }), end)
    await shown.find('button[aria-label="Figures: spectrum"]').trigger('click')
    document.querySelector<HTMLButtonElement>('.figures-sheet button')?.click()
    await flushPromises()
    expect(document.querySelector<HTMLTextAreaElement>('.figures-sheet textarea')?.value).toContain('0.08,12.5,12.1')
  })
})
