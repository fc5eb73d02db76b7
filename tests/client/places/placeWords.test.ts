import { beforeEach, describe, expect, it } from 'vitest'
import { livePlace } from '../../../shared/places/livePlace.ts'
import { usualPreferences } from '../../../shared/schemas/preferences.ts'
import { dutyAt } from '../../../src/components/places/duty.ts'
import { localOf, momentOf } from '../../../src/components/places/localMoment.ts'
import { inputWords, rangeWords } from '../../../src/components/places/madeWords.ts'
import { noticeDraftOf, newNoticeForm } from '../../../src/components/places/noticeForm.ts'
import { figureWords, numberOf, twoDigits, uncertaintyOf } from '../../../src/components/places/placeFigures.ts'
import { alertingOf, limitOf, limitWords, placeMark } from '../../../src/components/places/placeMark.ts'
import { settingsLine } from '../../../src/components/places/placeWords.ts'
import { showIn } from '../../../src/figures/shown.ts'
import { placesAt, placeView, seaEstimate } from '../support/placeViews.ts'

const { heightUnit, speedUnit, spokenDigits } = usualPreferences
beforeEach(() => showIn({ heightUnit, speedUnit, spokenDigits }))

describe('figures of places', () => {
  it.each([
    [0.0045, '0.0045'],
    [0.4, '0.4'],
    [1, '1.0'],
    [1.249, '1.2'],
    [12.4, '12'],
    [338, '340'],
  ])('overtopping of %f is written with two digits as %s', (value, written) => {
    expect(twoDigits(value)).toBe(written)
  })

  it('overtopping stands in litres with its likely band, never with ±', () => {
    const figure = { value: 0.0012, sd: null, likely: { from: 0.0004, to: 0.0036 } }
    expect(numberOf('overtopping', 0.0012)).toBe('1.2')
    expect(uncertaintyOf('overtopping', figure)).toBe('likely 0.4 to 3.6')
  })

  it('heights follow the reader’s unit, limits in hundredths of a metre otherwise', () => {
    expect(numberOf('crossSea', 1.114)).toBe('1.11')
    showIn({ heightUnit: 'ft', speedUnit, spokenDigits })
    expect(numberOf('crossSea', 1.114)).toBe('3.7')
  })

  it('what cannot be determined says why instead of a number', () => {
    const flat = seaEstimate({ surgeHeight: null })
    const berth = placeView('B36', { sea: { FW: flat, OL: flat } })
    expect(livePlace(berth, placesAt)).toMatchObject({ kind: 'without', reason: expect.stringContaining('no hour of readings') }) // prettier-ignore
  })

  it('how a figure is made tells headings in both senses and whether it is inside its range', () => {
    const figure = placeView('EN').outlook!.figures.find(({ quantity }) => quantity === 'crossSea')!.figure
    expect(figureWords('crossSea', figure)).toMatch(/^\d\.\d\d m ± \d\.\d\d$/)
    const heading = figure.inputs.find(({ name }) => name === 'swell, heading')!
    expect(inputWords(heading).value).toBe('from 241° T, toward 061° T')
    const wall = placeView('LA').outlook!.figures.find(({ quantity }) => quantity === 'overtopping')!.figure
    expect(rangeWords(wall)).toMatch(/free crest over height \d/)
  })

  it('a place is described in a line with every bearing in degrees true', () => {
    expect(settingsLine(placeView('EN').settings.content)).toBe(
      'channel axis 038° T inbound, 218° T outbound, least width 96 m',
    )
  })
})

describe('limits at a place', () => {
  const words = (place: ReturnType<typeof placeView>) =>
    limitWords(limitOf(place, place.settings.content.leadQuantity), livePlace(place, placesAt), placesAt)
  const value = placeView('EN').outlook!.figures[0]!.figure

  it('within one standard deviation of a line that is not exceeded it is near, in strong ink', () => {
    const near = placeView('EN', { limits: [{ raise: value.value! + 0.5 * value.sd! }] })
    expect(words(near)).toMatchObject({ words: expect.stringMatching(/^near limit /), isStrong: true })
    const far = placeView('EN', { limits: [{ raise: value.value! + 3 * value.sd! }] })
    expect(words(far)).toMatchObject({ words: expect.stringMatching(/^limit /), isStrong: false })
  })

  it('shelved it says above, and until when', () => {
    const limits = [{ state: 'shelved' as const, isActive: true, shelvedUntil: '2026-11-12T18:00:00.000Z' }]
    expect(words(placeView('EN', { limits })).words).toBe('above limit 1.00 m, shelved until 18:00')
  })

  it('is not judged while the place is stale, whatever its last state', () => {
    const place = placeView('EN', { limits: [{}] })
    const picture = livePlace(place, placesAt + 3_600_000)
    expect(limitWords(limitOf(place, 'crossSea'), picture, placesAt).words).toBe('limit 1.00 m: not judged')
  })

  it('where none is set says so', () => {
    expect(words(placeView('EN')).words).toBe('no limit set')
  })

  it('marks the worst active before what is put aside, and colours what alerts alone', () => {
    const place = placeView('EN', {
      limits: [
        { state: 'shelved', priority: 'urgent' },
        { state: 'acknowledgedActive', priority: 'medium' },
      ],
    })
    expect(placeMark(place)).toEqual({ priority: 'medium', state: 'acknowledgedActive' })
    expect(alertingOf(place.limits[0]!)).toBeNull()
    expect(alertingOf(place.limits[1]!)).toBe('medium')
    expect(placeMark(placeView('EN', { limits: [{}] }))).toBeNull()
  })
})

describe('the patrol', () => {
  const patrol = [{ hours: { from: '09:00', to: '17:00', days: [1, 2, 3, 4, 5, 6, 7] }, season: null }]
  // Etc/GMT-1 is an hour ahead of UTC all year.
  it('is on duty until its local end, and off until it begins again', () => {
    expect(dutyAt(patrol, Date.parse('2026-11-12T14:32:00Z'), 'Etc/GMT-1')).toEqual({ isOn: true, changesAt: '17:00' })
    expect(dutyAt(patrol, Date.parse('2026-11-12T18:00:00Z'), 'Etc/GMT-1')).toEqual({ isOn: false, changesAt: '09:00' })
  })

  it('that is never set is off without a time', () => {
    expect(dutyAt([], placesAt, 'UTC')).toEqual({ isOn: false, changesAt: null })
  })
})

describe('what a supervisor records', () => {
  const moment = (day: string, time: string) => momentOf(day, time, 'Europe/Paris')

  it('a closure needs an area, a reason and an end, each told at its field', () => {
    const form = { ...newNoticeForm('closure', '', ''), reason: 'ok' }
    expect(noticeDraftOf(form, moment).faults).toMatchObject({
      area: expect.any(String),
      reason: expect.any(String),
      expiresAt: 'a day and a time',
    })
  })

  it('local times become moments; one that the clocks skip is none', () => {
    expect(moment('2026-11-12', '15:32')).toBe('2026-11-12T14:32:00.000Z')
    // Clocks go from 02:00 to 03:00 on 29 March 2026 in Paris.
    expect(moment('2026-03-29', '02:30')).toBeNull()
    expect(localOf(Date.parse('2026-11-12T14:32:00Z'), 'Europe/Paris')).toEqual({ day: '2026-11-12', time: '15:32' })
  })

  it('a flag may stand until another is set', () => {
    const form = { ...newNoticeForm('flag', '', ''), flag: 'red', reason: 'Strong side current' }
    expect(noticeDraftOf(form, moment).draft).toEqual({ kind: 'flag', flag: 'red', startsAt: null, expiresAt: null, reason: 'Strong side current' }) // prettier-ignore
  })
})
