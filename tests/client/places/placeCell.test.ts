import { mount } from '@vue/test-utils'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { livePlace } from '../../../shared/places/livePlace.ts'
import type { PlaceView } from '../../../shared/schemas/place.ts'
import LeadQuantity from '../../../src/components/places/LeadQuantity.vue'
import PlaceCell from '../../../src/components/places/PlaceCell.vue'
import { useServerClock } from '../../../src/stores/serverClock.ts'
import { placesAt, placeView, seaEstimate } from '../support/placeViews.ts'
import { wordsOf } from '../support/wordsOf.ts'

const now = placesAt + 127_000
const global = { stubs: { RouterLink: { template: '<a><slot /></a>' } } }
const cell = (place: PlaceView, at = now) =>
  mount(PlaceCell, { props: { place, picture: livePlace(place, at) }, global })
const lead = (place: PlaceView, at = now) =>
  mount(LeadQuantity, { props: { place, picture: livePlace(place, at) }, global })
/** Its last window ended 20 minutes ago, beyond the limit of 15. */
const silent = () => seaEstimate({ windowEndsAt: placesAt - 1_200_000, windowStartsAt: placesAt - 2_400_000 })

beforeEach(() => {
  vi.useFakeTimers({ now })
  setActivePinia(createPinia())
  useServerClock().hear(now)
})
afterEach(() => {
  vi.useRealTimers()
})

describe('a place fed by its own station', () => {
  it('shows figure, ±, quality and age, and nothing about a substitute', () => {
    const text = wordsOf(cell(placeView('EN')).element)
    expect(text).toMatch(/Marrowick Entrance Cross-sea, inbound 038° T, from .* \d\.\d\d m ± \d\.\d\d Good 2 min/)
    expect(text).not.toContain('Not measured here')
  })

  it('colours the figure by the priority of the alert that is up, and not of one that is shelved', () => {
    const up = placeView('EN', { limits: [{ state: 'unacknowledgedActive', isActive: true }] })
    expect(cell(up).find('.fig').classes()).toContain('ink-high')
    const shelved = placeView('EN', { limits: [{ state: 'shelved', isActive: true }] })
    expect(cell(shelved).find('.fig').classes()).not.toContain('ink-high')
  })
})

describe('a place whose own station has gone stale', () => {
  const place = () => placeView('PS', { sea: { PB: silent() } })

  it('says so before the figure, names who stands in, is suspect and has a wider ±', () => {
    const text = wordsOf(lead(place()).element)
    expect(text.indexOf('Not measured here.')).toBeLessThan(text.search(/\d\.\d m/))
    expect(text).toContain('Pennow Bar is stale')
    expect(text).toContain("Fairway's figures stand in")
    expect(text).toContain('Suspect')
    const own = placeView('PS').outlook!.figures[0]!.figure
    const carried = place().outlook!.figures[0]!.figure
    expect(carried.sd! / carried.value!).toBeGreaterThan(own.sd! / own.value!)
  })

  it('carries the doubt wash in the row, with the name of who stands in', () => {
    const shown = cell(place())
    expect(shown.classes()).toContain('doubtful')
    expect(wordsOf(shown.element)).toMatch(/Not measured here ?, from Fairway/)
  })

  it('shows no figure once the substitute is old too, only the last good one in words', () => {
    const shown = cell(place(), placesAt + 20 * 60_000)
    expect(shown.find('.fig').exists()).toBe(false)
    expect(wordsOf(shown.element)).toContain('not judged')
    const words = wordsOf(lead(place(), placesAt + 20 * 60_000).element)
    expect(words).toContain('Pennow Bar, Fairway are stale: no figure for 20 min')
    expect(words).toContain('Last good 14:10 UTC, from Fairway')
  })
})

describe('a breakwater in a calm', () => {
  it('says that none is predicted, with the band that it may still be in', () => {
    const calm = seaEstimate()
    calm.systems = calm.systems.slice(0, 1).map((system) => ({ ...system, significantWaveHeight: 0.5 }))
    const place = placeView('LA', { sea: { FW: { ...calm, significantWaveHeight: 0.5 } } })
    const text = wordsOf(cell(place).element)
    expect(text).toContain('none predicted')
    expect(text).not.toMatch(/safe/i)
  })
})
