import { describe, expect, test } from 'vitest'
import { livePlace } from '../../../shared/places/livePlace.ts'
import { placesAt, placeView, seaEstimate } from '../../client/support/placeViews.ts'

const minute = 60_000

describe('what may be shown of a place', () => {
  test('its lead figure with its age while the outlook is younger than the stale limit', () => {
    const picture = livePlace(placeView('EN'), placesAt + 2 * minute)
    expect(picture).toMatchObject({ kind: 'live', ageSeconds: 120, lead: { quantity: 'crossSea' } })
  })

  test('nothing once the outlook is older, though nobody told the page', () => {
    const place = placeView('EN')
    expect(livePlace(place, placesAt + 15 * minute).kind).toBe('live')
    expect(livePlace(place, placesAt + 15 * minute + 1000)).toEqual({ kind: 'stale', ageSeconds: 901 })
  })

  test('the reason where no station could feed it', () => {
    const flat = seaEstimate({ resolved: false, reason: 'no-resolvable-wave', systems: [] })
    const picture = livePlace(placeView('EN', { sea: { FW: flat, OL: null } }), placesAt)
    expect(picture.kind).toBe('without')
    expect(picture).toHaveProperty('reason', expect.stringContaining('Fairway gives no direction'))
    expect(picture).toHaveProperty('reason', expect.stringContaining('Outer Ledge has no estimate'))
  })

  test('that none was ever made', () => {
    expect(livePlace(placeView('EN', { changes: { outlook: null } }), placesAt)).toEqual({ kind: 'empty' })
  })
})
