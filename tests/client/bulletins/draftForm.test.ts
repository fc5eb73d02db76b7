import { describe, expect, test } from 'vitest'
import type { BulletinFigure } from '../../../shared/schemas/bulletin.ts'
import { differingFields, reachWords } from '../../../src/components/bulletins/bulletinWords.ts'
import { draftOf, firstDraft, formOf, momentOf } from '../../../src/components/bulletins/draftForm.ts'

const now = Date.parse('2026-11-12T14:32:07Z')
const missing: BulletinFigure = {
  ...{ kind: 'missing', subject: 'station', subjectId: 3, name: 'Pennow Bar', reason: 'stale 22 min' },
}

describe('a new draft', () => {
  test('begins at the next ten minutes, holds six hours, and names what is missing too', () => {
    expect(firstDraft([missing], now)).toMatchObject({
      validFrom: '2026-11-12T14:40:00.000Z',
      validUntil: '2026-11-12T20:40:00.000Z',
      nextIssueAt: '2026-11-12T20:40:00.000Z',
      chosen: ['station:3'],
      replacesId: null,
    })
  })

  test('comes back from its form unaltered', () => {
    const draft = firstDraft([missing], now)
    expect(draftOf(formOf(draft))).toEqual(draft)
    expect(differingFields(draft, draftOf(formOf(draft)))).toEqual([])
  })
})

test('a time that is left empty or half typed is no time', () => {
  expect(momentOf('')).toBeNull()
  expect(momentOf('2026-11-')).toBeNull()
  expect(momentOf('2026-11-12T15:00')).toBe('2026-11-12T15:00:00.000Z')
})

test('two drafts are told apart by the names of their fields', () => {
  const draft = firstDraft([missing], now)
  expect(differingFields(draft, { ...draft, headline: 'Swell', listIds: [4] })).toEqual(['Headline', 'Lists'])
})

test('how many it goes to is counted in words', () => {
  const lists = [{ id: 1, name: 'Pilots' }]
  expect(reachWords({ lists, people: 1 })).toBe('1 list, 1 person')
  expect(reachWords({ lists: [...lists, { id: 2, name: 'Office' }], people: 61 })).toBe('2 lists, 61 people')
})
