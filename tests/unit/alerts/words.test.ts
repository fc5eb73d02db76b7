import { describe, expect, it } from 'vitest'
import { capMessages, capPolygon, capTime } from '../../../shared/alerts/cap.ts'
import { conditionWords, spanWords, titleOf, valueWithSd } from '../../../shared/alerts/describe.ts'
import { messageContentOf, messageTextOf, subjectLineOf } from '../../../shared/alerts/messageText.ts'
import type { MessageFacts } from '../../../shared/alerts/messageText.ts'
import { byUrgency, floodSince } from '../../../shared/alerts/order.ts'
import { performanceOf } from '../../../shared/alerts/performance.ts'
import { quantityOf } from '../../../shared/alerts/quantities.ts'
import type { Condition } from '../../../shared/schemas/limit.ts'
import { noSystem, seaOf } from './seaFigures.ts'

const condition: Condition = {
  comparisons: [
    { kind: 'above', quantity: 'swellHeight', raise: 1.4, clear: 1.2, riseOverSeconds: null },
    { kind: 'sector', quantity: 'swellFrom', from: 205, to: 275, deadBand: 10 },
  ],
  when: { hours: { from: '20:00', to: '06:00', days: [5, 6] }, season: { from: '05-15', to: '09-15' } },
  onDelaySeconds: 600,
  offDelaySeconds: 1800,
  clearSigmas: 1,
  worstQuality: 3,
  latches: false,
}

describe('words', () => {
  it('tell a whole condition with units and senses', () => {
    expect(conditionWords(condition)).toBe(
      'Swell height above 1.40 m and swell from 205° T to 275° T, clockwise for 10 min, 20:00 to 06:00 local on Fri, Sat, from 15 May to 15 Sep. Clears below 1.20 m or 10° outside the sector with its ± counted for 30 min.',
    )
  })

  it('tell a value with its error, and a null as a word', () => {
    expect(valueWithSd(quantityOf('significantWaveHeight'), 2.614, 0.14)).toBe('2.61 m ± 0.14')
    expect(valueWithSd(quantityOf('swellFrom'), 7.2, 4)).toBe('from 007° T ± 4°')
    expect(valueWithSd(quantityOf('energyFlux'), 18_240, null)).toBe('18.2 kW/m')
    expect(valueWithSd(quantityOf('dataAge'), 1320, 0)).toBe('22 min')
    expect(valueWithSd(quantityOf('swellHeight'), null, null)).toBe('cannot be told')
  })

  it('head an alert with its quantity, or with a title of its own', () => {
    expect(titleOf(null, condition, 'Fairway')).toBe('Swell height, Fairway')
    expect(titleOf('Swell into the entrance', condition, 'Fairway')).toBe('Swell into the entrance, Fairway')
  })

  it('say at all times where nothing limits them', () => {
    expect(spanWords({ hours: null, season: null })).toBe('at all times')
  })
})

const facts: MessageFacts = {
  kind: 'alert',
  alertId: 418,
  isExercise: false,
  isDemonstration: false,
  portName: 'Marrowick',
  timeZone: 'Etc/GMT-1',
  caution: 'Figures support and never replace the judgement of the master.',
  subjectName: 'Fairway',
  title: null,
  condition: { ...condition, when: null },
  priority: 'high',
  toCheck: 'Pilot boarding.',
  value: 1.61,
  valueSd: 0.08,
  windowEndsAt: Date.parse('2026-11-12T14:20:00Z'),
  crossedAt: Date.parse('2026-11-12T14:10:00Z'),
  clearedAt: null,
  sea: seaOf({
    leading: { ...noSystem, height: 1.61, period: 12.4, toward: 67 },
    swell: { ...noSystem, height: 1.61 },
  }),
  isCaughtUp: false,
  handling: '',
}

describe('an e-mail about an alert', () => {
  it('says priority in words, value with ±, both senses, both times, what to check and the caution', () => {
    const text = messageTextOf('alert', messageContentOf(facts))
    for (const part of [
      'High, second most serious of four.',
      'Swell height, Fairway: 1.61 m ± 0.08',
      'for 10 min',
      'Thu 12 Nov 2026, 14:20 UTC, 15:20 local',
      'Swell from 247° T, toward 067° T, 1.6 m, 12.4 s',
      'Check: Pilot boarding.',
      facts.caution,
    ]) {
      expect(text).toContain(part)
    }
  })

  it('that clears says that this does not mean safe', () => {
    const content = messageContentOf({ ...facts, kind: 'allClear', clearedAt: facts.windowEndsAt })
    expect(messageTextOf('allClear', content)).toContain('This does not mean that it is safe.')
    expect(subjectLineOf('allClear', content)).toBe('High, cleared: Swell height, Fairway 1.61 m ± 0.08')
  })

  it('of a drill begins and ends with EXERCISE, in its subject too', () => {
    const content = messageContentOf({ ...facts, isExercise: true })
    const lines = messageTextOf('alert', content).split('\n')
    expect(lines[0]).toMatch(/^EXERCISE/)
    expect(lines.at(-1)).toMatch(/^EXERCISE/)
    expect(subjectLineOf('alert', content)).toMatch(/^EXERCISE High: /)
  })

  it('says since when, where nobody could be told before', () => {
    const content = messageContentOf({ ...facts, isCaughtUp: true })
    expect(content.since).toBe('Exceeded since 14:10 UTC; nobody could be told before.')
  })
})

describe('the order of alerts', () => {
  it('is by state, then priority, then newest', () => {
    const alert = (id: number, state: Parameters<typeof byUrgency>[0]['state'], priority: 'low' | 'urgent', minute: number) => ({ id, state, priority, raisedAt: `2026-12-01T12:0${minute}:00Z` }) // prettier-ignore
    const shuffled = [
      alert(1, 'outOfService', 'urgent', 1),
      alert(2, 'shelved', 'urgent', 1),
      alert(3, 'returnedUnacknowledged', 'urgent', 1),
      alert(4, 'acknowledgedActive', 'urgent', 1),
      alert(5, 'unacknowledgedActive', 'low', 1),
      alert(6, 'unacknowledgedActive', 'urgent', 1),
      alert(7, 'unacknowledgedActive', 'urgent', 2),
    ]
    expect(shuffled.sort(byUrgency).map(({ id }) => id)).toEqual([7, 6, 5, 4, 3, 2, 1])
  })
})

const minute = 60_000

describe('a flood', () => {
  it('begins with the eleventh announcement within ten minutes and ends with fewer than five', () => {
    const ten = Array.from({ length: 10 }, (_, n) => n * 30_000)
    expect(floodSince(ten, 5 * minute)).toBeNull()
    expect(floodSince([...ten, 5 * minute], 5 * minute)).toBe(0)
    expect(floodSince([...ten, 5 * minute], 16 * minute)).toBeNull()
  })
})

describe('alert performance', () => {
  const from = Date.parse('2026-11-01T00:00:00Z')
  const alert = (id: number, limitId: number, announcedAt: number, acknowledgedAfter: number | null = 120_000) => ({
    ...{ id, limitId, title: `Limit ${limitId}`, priority: 'low' as const, announcedAt },
    acknowledgedAt: acknowledgedAfter === null ? null : announcedAt + acknowledgedAfter,
    clearedAt: announcedAt + 3_600_000,
    closedAt: null,
  })

  it('measures rates, floods, chatter and times to acknowledge over the days asked for', () => {
    const burst = Array.from({ length: 12 }, (_, n) => alert(n, n % 2, from + n * 30_000))
    const found = performanceOf([...burst, alert(99, 7, from + 5 * 86_400_000, null)], from, from + 30 * 86_400_000)
    const of = (key: string) => found.measures.find((measure) => measure.key === key)
    expect(of('perDay')?.value).toBeCloseTo(13 / 30, 9)
    expect(of('busyTenMinutes')?.value).toBeCloseTo(1 / (30 * 144), 9)
    expect(of('flood')).toMatchObject({ verdict: 'met' })
    expect(of('flood')?.value).toBeGreaterThan(0)
    expect(found.chattering).toMatchObject([{ limitId: 0, count: 4 }, { limitId: 1, count: 4 }]) // prettier-ignore
    expect(of('acknowledge')).toMatchObject({ value: 120, detail: expect.stringContaining('1 of 13 not acknowledged') })
    expect(found.topOffenders[0]).toMatchObject({ limitId: 0, count: 6 })
    expect(found.isLongEnough).toBe(true)
  })

  it('without alerts says what cannot be determined instead of nought', () => {
    const found = performanceOf([], from, from + 86_400_000)
    expect(found.measures.find(({ key }) => key === 'acknowledge')).toMatchObject({
      value: null,
      verdict: 'notDetermined',
    })
    expect(found.byPriority.every(({ share }) => share === null)).toBe(true)
  })
})

describe('CAP', () => {
  it('writes UTC as −00:00 and never Z, and latitude before longitude', () => {
    expect(capTime(Date.parse('2026-01-14T05:40:00.250Z'))).toBe('2026-01-14T05:40:00-00:00')
    expect(capPolygon([[-30.003, 45.001], [-30.001, 45.001], [-30.001, 45.003], [-30.003, 45.001]])).toMatch(/^45\.00100,-30\.00300 /) // prettier-ignore
  })

  it('chains an Update to all messages before it, and begins a new chain after a Cancel', () => {
    const event = (id: number, kind: 'raised' | 'priorityRose' | 'acknowledged' | 'cleared' | 'raisedAgain') => ({ id, kind, at: id * minute, value: '2.6 m', number: 2.6 }) // prettier-ignore
    const messages = capMessages({
      ...{
        alertId: 7,
        isExercise: false,
        isDemonstration: false,
        priority: 'urgent',
        portName: 'Port',
        title: 'Total height, A',
      },
      ...{
        words: '',
        toCheck: '',
        caution: '',
        subjectName: 'A',
        subjectCode: 'A B',
        latitude: 1,
        longitude: 2,
        ring: null,
      },
      ...{ sender: 'duty@port.example', web: '', crossedAt: 0 },
      events: [
        event(1, 'raised'),
        event(2, 'acknowledged'),
        event(3, 'priorityRose'),
        event(4, 'cleared'),
        event(5, 'raisedAgain'),
      ],
    })
    expect(messages.map(({ msgType }) => msgType)).toEqual(['Alert', 'Update', 'Cancel', 'Alert'])
    expect(messages.map(({ identifier }) => identifier)).toEqual(['A-B-7-1', 'A-B-7-3', 'A-B-7-4', 'A-B-7-5'])
    expect(messages[2]?.references?.split(' ')).toEqual([
      'duty@port.example,A-B-7-1,1970-01-01T00:01:00-00:00',
      'duty@port.example,A-B-7-3,1970-01-01T00:03:00-00:00',
    ])
    expect(messages[3]?.references).toBeNull()
    expect(messages[0]?.info.area.circle).toBe('1.00000,2.00000 1')
  })
})
