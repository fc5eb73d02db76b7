import { describe, expect, test } from 'vitest'
import { writeLetter } from '../../../server/mail/letter.ts'
import type { Letter, Surroundings } from '../../../server/mail/letter.ts'
import { bulletinPlainText } from '../../../shared/bulletins/plainText.ts'
import { exampleBulletin } from '../bulletins/exampleBulletin.ts'

const letter: Letter = {
  ...{ messageId: 901, kind: 'bulletin', personName: 'Pilot station', standsInFor: null },
  subject: 'DEMONSTRATION Information: Building swell',
  text: bulletinPlainText(exampleBulletin),
  ...{ content: null, bulletin: exampleBulletin, isExercise: false, alertId: null },
  createdAt: new Date('2026-11-12T14:40:00Z'),
  ...{ mayBeCopy: false, isAcknowledged: false, receipt: null, link: null, next: { reminderAt: null, step: null } },
}
const around: Surroundings = {
  ...{ publicUrl: 'https://watch.harbour.example', portName: 'Marrowick harbour watch', timeZone: 'Europe/Paris' },
  ...{ isDemonstration: true, history: null },
}

describe('the e-mail of a bulletin', () => {
  test('says when it was measured above its figures, and every caution in its body', async () => {
    const { html, pictures } = await writeLetter(letter, around)
    const measured = html.indexOf('Not a forecast')
    expect(measured).toBeGreaterThan(0)
    expect(html.indexOf('247°')).toBeGreaterThan(measured)
    expect(html).toContain('Demonstration data, invented coast')
    for (const caution of exampleBulletin.cautions) expect(html).toContain(caution)
    expect(pictures.map(({ name }) => name)).toEqual(['offing.png', 'waves.png'])
  })

  test('names what is missing and gives it no figure', async () => {
    const { html } = await writeLetter(letter, around)
    expect(html).toContain('not included')
    expect(html).toContain('no figure')
  })

  test('of one that is cancelled gives the reason and no figure any more', async () => {
    const cancelled = { at: '2026-11-12T16:00:00.000Z', reason: 'The swell went down <early>' }
    const { html, pictures } = await writeLetter({ ...letter, bulletin: { ...exampleBulletin, cancelled } }, around)
    expect(html).toContain('The swell went down &lt;early&gt;')
    expect(html).not.toContain('247°')
    expect(pictures.map(({ name }) => name)).toEqual(['offing.png'])
  })

  test('of an exercise says so at its top and its end', async () => {
    const { html, subject } = await writeLetter({ ...letter, isExercise: true }, around)
    expect(html.match(/EXERCISE EXERCISE EXERCISE/g)?.length).toBeGreaterThanOrEqual(2)
    expect(subject).toMatch(/^EXERCISE/)
  })
})
