import { describe, expect, test } from 'vitest'
import { writeLetter } from '../../../server/mail/letter.ts'
import type { Letter, Surroundings } from '../../../server/mail/letter.ts'
import { glyphSvg, historySvg, scaleOf } from '../../../server/mail/letter/drawings.ts'
import type { MessageContent } from '../../../shared/schemas/message.ts'

const content: MessageContent = {
  isExercise: false,
  isDemonstration: true,
  portName: 'Marrowick harbour watch',
  priority: 'high',
  priorityWords: 'High, second most serious of four',
  title: 'Total height, Outer Ledge',
  headline: 'Total height above 2.50 m for 10 min',
  subjectName: 'Outer Ledge',
  value: '2.61 m ± 0.14',
  limit: 'Total height above 2.50 m for 10 min. Clears below 2.10 m.',
  quantity: 'significantWaveHeight',
  waves: 'Swell from 241° T, toward 061° T, 1.9 m, 12.5 s',
  glyph: { toward: 61, height: 1.9, name: 'Swell' },
  when: 'Thu 12 Nov 2026, 14:20 UTC, 15:20 local',
  windowEndsAt: '2026-11-12T14:20:00.000Z',
  since: null,
  quality: 'Good',
  toCheck: 'Moorings <berths 3 & 6>',
  handling: '',
  caution: 'Figures support, never replace, the judgement of the master.',
  path: '/alerts/418',
}

const letter: Letter = {
  messageId: 901,
  kind: 'alert',
  personName: 'Pilot station',
  standsInFor: null,
  subject: 'DEMONSTRATION High: Total height, Outer Ledge 2.61 m ± 0.14',
  text: 'High, second most serious of four.\nTotal height, Outer Ledge: 2.61 m ± 0.14',
  content,
  isExercise: false,
  alertId: 418,
  createdAt: new Date('2026-11-12T14:20:00Z'),
  mayBeCopy: false,
  isAcknowledged: false,
  receipt: { token: 'abc.def.ghi', expiresAt: new Date('2026-11-13T14:20:00Z') },
  link: null,
  next: {
    reminderAt: new Date('2026-11-12T14:28:00Z'),
    step: { at: new Date('2026-11-12T14:36:00Z'), lists: ['Harbour office'] },
  },
}

const minute = 60_000
const end = Date.parse(content.windowEndsAt)
const around: Surroundings = {
  publicUrl: 'https://watch.harbour.example',
  portName: 'Marrowick harbour watch',
  timeZone: 'Europe/Paris',
  isDemonstration: true,
  history: {
    points: Array.from({ length: 120 }, (_, n) => ({ at: end - (119 - n) * minute, value: 1 + n / 75 })),
    raise: 2.5,
    isCircular: false,
    unit: 'm',
    decimals: 2,
  },
}

const sizeOf = (png: Buffer): [number, number] => [png.readUInt32BE(16), png.readUInt32BE(20)]

describe('an e-mail', () => {
  test('says in HTML and in text: priority in words and rank, value, both senses, both times, caution, links', async () => {
    const { html, text, subject } = await writeLetter(letter, around)
    expect(subject).toBe(letter.subject)
    for (const said of [
      'HIGH, second most serious of four. Not yet acknowledged by the watch',
      'Total height, Outer Ledge: 2.61 m ± 0.14',
      'Swell from 241° T, toward 061° T, 1.9 m, 12.5 s',
      'Thu 12 Nov 2026, 14:20 UTC, 15:20 local. Quality: Good',
      'Figures support, never replace, the judgement of the master.',
      'Demonstration data, invented coast',
      'Confirm receipt of 0418',
    ]) {
      expect(html).toContain(said)
    }
    for (const body of [html, text]) {
      expect(body).toContain('https://watch.harbour.example/receipt/abc.def.ghi')
      expect(body).toContain('https://watch.harbour.example/alerts/418')
      expect(body).toContain('It does not acknowledge the alert: the watch does that.')
      expect(body).toContain(
        'Without a receipt you get the next e-mail at 14:28 UTC (15:28 local); at 14:36 UTC (15:36 local) Harbour office will be told.',
      )
      expect(body).toContain('You receive this as Pilot station.')
      expect(body).toContain('ends Fri 13 Nov 2026, 14:20 UTC (15:20 local)')
      expect(body).not.toMatch(/\b(is|are) safe\b/)
    }
  })

  test('escapes what people wrote, loads nothing from outside and is a table of 600 px', async () => {
    const { html } = await writeLetter({ ...letter, personName: '<script>x</script>' }, around)
    expect(html).toContain('Moorings &lt;berths 3 &amp; 6&gt;')
    expect(html).not.toContain('<script')
    expect([...html.matchAll(/src="([^"]+)"/g)].map(([, source]) => source)).toEqual([
      'cid:mark@offing',
      'cid:glyph@offing',
      'cid:history@offing',
    ])
    expect(html).toContain('width="600"')
  })

  test('carries glyph and history as PNG of twice their size, and says them in words', async () => {
    const { pictures, html } = await writeLetter(letter, around)
    expect(pictures.map(({ name, png }) => [name, png.toString('latin1', 1, 4), sizeOf(png)])).toEqual([
      ['offing.png', 'PNG', [172, 44]],
      ['waves.png', 'PNG', [144, 144]],
      ['history.png', 'PNG', [1088, 192]],
    ])
    expect(html).toContain('alt="Waves from 241° T, toward 061° T, 1.9 m"')
    expect(html).toContain('12:21 to 14:20 UTC: least 1.00 m, most 2.59 m; the limit of 2.50 m dashed.')
  })

  test('without waves and history has neither picture', async () => {
    const plain = { ...letter, content: { ...content, waves: null, glyph: null } }
    const { pictures, html } = await writeLetter(plain, { ...around, history: null })
    expect(pictures.map(({ name }) => name)).toEqual(['offing.png'])
    expect(html.match(/<img/g)).toHaveLength(1)
  })

  test('of a drill is marked in the subject, above and below, even where its text was not', async () => {
    const { subject, text, html } = await writeLetter({ ...letter, isExercise: true }, around)
    expect(subject).toMatch(/^EXERCISE /)
    expect(text).toMatch(/^EXERCISE EXERCISE EXERCISE/)
    expect(html.match(/EXERCISE EXERCISE EXERCISE/g)).toHaveLength(2)
  })

  test('about an alert that an operator has acknowledged says so and announces no further step', async () => {
    const { html, text } = await writeLetter({ ...letter, kind: 'reminder', isAcknowledged: true }, around)
    expect(html).toContain('Reminder, no receipt from you yet. Acknowledged by the watch')
    expect(text).not.toContain('Harbour office will be told')
  })

  test('that may be a copy says that it may come twice', async () => {
    const { text } = await writeLetter({ ...letter, mayBeCopy: true }, around)
    expect(text).toContain('It may reach you twice')
  })

  test('of a test or of the day has its sentences and no button', async () => {
    const daily: Letter = {
      ...letter,
      ...{ kind: 'heartbeat', content: null, receipt: null, alertId: null, text: 'It runs.\n\nStations: 3 of 4.' },
    }
    const { html, text } = await writeLetter(daily, { ...around, history: null })
    expect(html).toContain('Stations: 3 of 4.')
    expect(html).not.toContain('/receipt/')
    expect(text).toContain('E-mail 901, written Thu 12 Nov 2026, 14:20 UTC (15:20 local).')
  })
})

describe('the drawings of an e-mail', () => {
  test.each([
    [0.4, 1],
    [1, 1],
    [1.9, 2],
    [3, 3],
  ])('show a crest for each metre begun: %s m has %s', (height, crests) => {
    expect(glyphSvg({ toward: 61, height }).match(/Q0/g)).toHaveLength(crests)
  })

  test('show more than 3 m as one block', () => {
    expect(glyphSvg({ toward: 61, height: 3.1 }).match(/Q0/g)).toHaveLength(2)
  })

  test('break the line where figures are missing and where a bearing passes north', () => {
    const points = [0, 1, 2, 30, 31].map((n) => ({ at: n * minute, value: 1 }))
    const missing = historySvg({ points, raise: null, isCircular: false }) ?? ''
    expect(/<path d="(M\d[^"]+)" fill="none"/.exec(missing)?.[1].match(/M/g)).toHaveLength(2)
    const turning = [350, 355, 5, 10].map((value, n) => ({ at: n * minute, value }))
    const circle = historySvg({ points: turning, raise: null, isCircular: true }) ?? ''
    expect(/<path d="(M\d[^"]+)" fill="none"/.exec(circle)?.[1].match(/M/g)).toHaveLength(2)
  })

  test('hold the value that raises inside their scale, and begin at zero', () => {
    const points = [1, 1.2].map((value, n) => ({ at: n * minute, value }))
    expect(scaleOf({ points, raise: 2.5, isCircular: false })).toMatchObject({ lowest: 0, highest: 2.7 })
    expect(scaleOf({ points: points.slice(1), raise: 2.5, isCircular: false })).toBeNull()
  })
})
