import { expect, test } from 'vitest'
import { actionWords, differences } from '../../shared/audit/differences.ts'

test('a change is told field by field, equal ones left out, what went last', () => {
  const before = { name: 'North', limit: { raise: 1, clear: 0.9 }, days: [1, 2], note: 'x' }
  const after = { name: 'North', limit: { raise: 1.2, clear: 0.9 }, days: [1, 3], team: null }
  expect(differences(before, after)).toEqual([
    { path: 'limit.raise', before: '1', after: '1.2' },
    { path: 'days.1', before: '2', after: '3' },
    { path: 'team', before: null, after: 'null' },
    { path: 'note', before: 'x', after: null },
  ])
})

test('something added or taken away is told whole, and nothing changed is nothing', () => {
  expect(differences(null, { a: 1 })).toEqual([{ path: 'a', before: null, after: '1' }])
  expect(differences({ a: [] }, undefined)).toEqual([{ path: 'a', before: '[]', after: null }])
  expect(differences('old', 'new')).toEqual([{ path: 'content', before: 'old', after: 'new' }])
  expect(differences(null, null)).toEqual([])
})

test('a long text is cut', () => {
  expect(differences(null, { text: 'a'.repeat(500) })[0]?.after).toHaveLength(202)
})

test.each([
  ['stationKey.issue', 'station key: issue'],
  ['person.sendReset', 'person: send reset'],
])('the action %s reads %s', (action, words) => {
  expect(actionWords(action)).toBe(words)
})
