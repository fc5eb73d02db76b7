import { describe, expect, it } from 'vitest'
import { bulletinPlainText } from '../../../shared/bulletins/plainText.ts'
import { readOut } from '../../../shared/bulletins/readOut.ts'
import { draftFaults, termOf } from '../../../shared/bulletins/term.ts'
import { figureWords, measuredWords, termWords } from '../../../shared/bulletins/words.ts'
import { entrance, exampleBulletin, longArm, outerLedge } from './exampleBulletin.ts'

describe('a figure of a bulletin in a line', () => {
  it('of a station has both senses, speed, height and period, each with its unit', () => {
    expect(figureWords(outerLedge)).toBe('swell from 247° T, toward 067° T, ± 3°, 11.4 m/s ± 0.3, 2.1 m ± 0.1, 12.4 s')
  })
  it('of a place has its ± and the side, of overtopping two significant digits and the likely range', () => {
    expect(figureWords(entrance)).toBe(
      'cross-sea 1.11 m ± 0.09, inbound 038° T, from the port quarter, setting to starboard',
    )
    expect(figureWords(longArm)).toBe('mean overtopping 1.2 l/s per m, likely 0.40 to 3.6')
  })
})

describe('the moment of measurement', () => {
  it('stands above the figures with the local time and is no forecast', () => {
    expect(measuredWords(exampleBulletin)).toBe('Measured 14:30 UTC, Thu 12 Nov 2026, 15:30 local. Not a forecast')
  })
  it('is a span where the figures are of different windows', () => {
    const figures = [outerLedge, { ...entrance, windowEndsAt: '2026-11-12T14:28:00.000Z' }]
    expect(measuredWords({ figures, timeZone: 'UTC' })).toContain('Measured 14:28 to 14:30 UTC')
  })
  it('is said to be missing where nothing could be measured', () => {
    expect(measuredWords({ figures: [], timeZone: 'UTC' })).toBe('No figure could be measured. Not a forecast')
  })
})

describe('the term of a bulletin', () => {
  it('names the days where it goes over midnight', () => {
    const words = termWords({ ...exampleBulletin, validUntil: '2026-11-13T03:00:00.000Z' })
    expect(words).toBe(
      'In force 15:00 UTC, Thu 12 Nov 2026, to 03:00 UTC, Fri 13 Nov 2026, 16:00 to 04:00 local, unless replaced.',
    )
  })
  it('goes from to come over in force to past, by the clock alone', () => {
    const at = (time: string): string => termOf({ ...exampleBulletin, status: 'issued' }, Date.parse(time))
    expect([at('2026-11-12T14:59:59Z'), at('2026-11-12T15:00:00Z'), at('2026-11-12T21:00:00Z')]).toEqual([
      'toCome',
      'inForce',
      'past',
    ])
  })
})

describe('a bulletin in plain text', () => {
  it('carries number, headline, term, figures with quality, what is missing and the caution', () => {
    const text = bulletinPlainText(exampleBulletin)
    for (const part of [
      'Bulletin 2026-316, Marrowick harbour watch. For Entrance and beaches',
      'WARNING: Building swell, hazardous cross-sea at the entrance',
      'Replaces 2026-315.',
      'Long Arm walk: mean overtopping 1.2 l/s per m, likely 0.40 to 3.6. Good.',
      'Pennow Bar: stale 22 min, last good 14:10 UTC: not included.',
      'all systems 2.4 m ± 0.1, mean of 20 min',
      'Single waves reach nearly twice',
      'Demonstration data, invented coast.',
    ]) {
      expect(text).toContain(part)
    }
  })
  it('of an exercise is marked first and last', () => {
    const lines = bulletinPlainText({ ...exampleBulletin, isExercise: true })
      .trim()
      .split('\n')
    expect([lines[0], lines.at(-1)]).toEqual(['EXERCISE EXERCISE EXERCISE', 'EXERCISE EXERCISE EXERCISE'])
  })
  it('never says that something is safe', () => {
    expect(bulletinPlainText(exampleBulletin)).not.toMatch(/\b(is|are) safe\b/)
  })
})

describe('a bulletin read out', () => {
  const spoken = readOut(exampleBulletin)
  it('begins with the call and the number, then the marker', () => {
    expect(spoken[1]).toBe('Bulletin two zero two six, three one six.')
    expect(spoken[3]).toBe('WARNING. Building swell, hazardous cross-sea at the entrance.')
  })
  it('has no figure that is not spelled out in words', () => {
    expect(spoken.join(' ')).not.toMatch(/\d|°|±/)
  })
  it('says that it is no forecast, both senses, and where there is no information', () => {
    const all = spoken.join(' ')
    expect(all).toContain('Measured at one four three zero UTC. This is not a forecast.')
    expect(all).toContain('Swell from two four seven degrees true, toward zero six seven degrees true')
    expect(all).toContain('Pennow Bar. No information. Stale two two minutes, last good one four one zero UTC.')
  })
  it('says of a suspect figure that it may be wrong', () => {
    const words = readOut({ ...exampleBulletin, figures: [{ ...outerLedge, qualityFlag: 3 }] }).join(' ')
    expect(words).toContain('This figure is suspect and may be wrong.')
  })
  it('of a cancelled one gives the reason and no figure', () => {
    const words = readOut({
      ...exampleBulletin,
      cancelled: { at: '2026-11-12T16:00:00.000Z', reason: 'Swell has gone down' },
    })
    expect(words.join(' ')).toContain('The bulletin is cancelled. Swell has gone down.')
    expect(words.join(' ')).not.toContain('two four seven')
  })
})

describe('a draft', () => {
  it('says of each empty field what is wanted before it can be issued', () => {
    const empty = {
      ...{ marker: 'information' as const, audience: '', headline: '', meaning: '', listIds: [], chosen: [] },
      ...{ validFrom: null, validUntil: null, nextIssueAt: null, replacesId: null, isExercise: false },
    }
    expect(draftFaults(empty, 0).map(({ field }) => field)).toEqual([
      ...['headline', 'audience', 'meaning', 'chosen', 'listIds', 'validFrom', 'validUntil'],
    ])
  })
})
