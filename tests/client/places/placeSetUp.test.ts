import { describe, expect, it } from 'vitest'
import { newPlaceForm } from '../../../src/components/places/setUp/placeForm.ts'
import { placeFormOf } from '../../../src/components/places/setUp/placeFormOf.ts'
import { describedOf, settingsChanges, settingsOf } from '../../../src/components/places/setUp/placeOfForm.ts'
import { readTransferFile } from '../../../src/components/places/setUp/transferFile.ts'
import { placeView } from '../support/placeViews.ts'

describe('the form of a place', () => {
  it.each(['EN', 'LA', 'B36', 'PS', 'OB'])('gives back what %s has, but for the sixth decimal', (code) => {
    const place = placeView(code)
    const form = placeFormOf(place)
    const { settings, faults } = settingsOf(form)
    expect(faults).toBeNull()
    expect(placeFormOf({ ...place, settings: { ...place.settings, content: settings! } })).toEqual(form)
    expect(describedOf(form).fields).toMatchObject({ name: place.name, team: place.team, position: place.position })
  })

  it('tells each fault by the path of the contract', () => {
    const form = newPlaceForm('breakwater', 'overtopping', 2)
    const { faults } = settingsOf(form)
    expect(faults).toMatchObject({
      'settings.crestLevel.value': 'must be a number',
      'settings.crestLevel.source': expect.stringContaining('must say where'),
      'settings.seawardNormal': 'must be a number',
    })
    expect(describedOf(form).faults).toMatchObject({ latitude: expect.stringContaining('degrees'), code: expect.any(String) }) // prettier-ignore
  })

  it('says in words what a version changes', () => {
    const place = placeView('EN')
    const form = placeFormOf(place)
    form.width = '90'
    expect(settingsChanges(place.settings.content, settingsOf(form).settings!)).toEqual(['least width'])
  })

  it('points at the line of a sounded path that cannot be read', () => {
    const form = placeFormOf(placeView('EN'))
    form.feeds[0]!.path = '0 -11.6\nfar -9'
    expect(settingsOf(form).faults).toHaveProperty(['settings.stationOrder.0.path'])
  })
})

describe('a transfer table from a file', () => {
  const rows = ['8;200;0,90;5', '8;240;0,95;2', '12;200;0,80;8', '12;240;0,88;3']

  it('is read with decimal commas in any order of rows', () => {
    const text = ['period s;direction from;height ratio;turn', ...[...rows].reverse()].join('\r\n')
    expect(readTransferFile(text).table).toEqual({
      kind: 'table',
      periods: [8, 12],
      directions: [200, 240],
      heightRatio: [
        [0.9, 0.95],
        [0.8, 0.88],
      ],
      turn: [
        [5, 2],
        [8, 3],
      ],
    })
  })

  it('is refused with every fault by its line', () => {
    const text = ['period,direction,ratio,turn', '8,200,0.9,5', '8,240,x,2', '12,200,0.8,8', '12,200,0.8,8'].join('\n')
    const { faults } = readTransferFile(text)
    expect(faults).toContain('Line 3: no number for height ratio.')
    expect(faults).toContain('Line 5: 12 s from 200° stands twice.')
  })

  it('without a column that is needed says which', () => {
    expect(readTransferFile('period,direction,turn\n8,200,5').faults).toEqual(['Line 1: no column for height ratio.'])
  })
})
