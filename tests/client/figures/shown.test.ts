import { mount } from '@vue/test-utils'
import { afterEach, describe, expect, test } from 'vitest'
import { nextTick } from 'vue'
import LeadFigures from '../../../src/components/watch/LeadFigures.vue'
import { heightSd, heightWords, showIn, speedSd, speedWords, spoken } from '../../../src/figures/shown.ts'
import { changed } from '../../../src/composables/useKeepPreferences.ts'
import { usualPreferences } from '../../../shared/schemas/preferences.ts'
import { swell } from '../support/views.ts'

const usual = { heightUnit: 'm', speedUnit: 'm/s', spokenDigits: true } as const
afterEach(() => showIn(usual))

describe('heights and speeds as a person reads them', () => {
  test('are metres and m/s until something else is chosen', () => {
    expect([heightWords(2.1), speedWords(11.4), heightSd(0.12, 1), speedSd(0.3)]).toEqual([
      '2.1 m',
      '11.4 m/s',
      '± 0.1',
      '± 0.3',
    ])
  })

  /** 0.3048 m a foot and 1852 m a nautical mile, both exact by definition (BIPM, The SI Brochure, 9th edition, 2019, table 8 for the mile). */
  test('in feet and knots are 2.1 / 0.3048 = 6.89 ft and 11.4 × 3600 / 1852 = 22.16 kn', () => {
    showIn({ ...usual, heightUnit: 'ft', speedUnit: 'kn' })
    expect([heightWords(2.1), speedWords(11.4)]).toEqual(['6.9 ft', '22.2 kn'])
    expect([heightSd(0.12, 1), speedSd(0.3)]).toEqual(['± 0.4', '± 0.6'])
    expect([heightWords(null), speedWords(null)]).toEqual(['none', 'none'])
  })

  test('change on the page that stands already, in figures and for voices', async () => {
    const system = swell()
    const page = mount(LeadFigures, { props: { system, all: [system], size: 'wide' } })
    expect(page.text()).toContain('11.4m/s')
    showIn({ ...usual, heightUnit: 'ft', speedUnit: 'kn' })
    await nextTick()
    expect(page.text()).toContain('22.2kn')
    expect(page.text()).toContain('6.9ft')
    expect(page.text()).not.toContain('m/s')
    expect(page.attributes('aria-label')).toContain('22.2 kn ± 0.6, 6.9 ft ± 0.3')
  })
})

test('bearings are read digit by digit, or as they are written', () => {
  const sentence = 'Waves from 247° T, toward 067° T, ± 3°.'
  expect(spoken(sentence)).toBe('Waves from two four seven degrees true, toward zero six seven degrees true, ± 3°.')
  showIn({ ...usual, spokenDigits: false })
  expect(spoken(sentence)).toBe(sentence)
})

test('of what is chosen on a screen only what differs from the server’s is sent', () => {
  expect(changed({ ...usualPreferences, heightUnit: 'ft', textSize: 150 }, usualPreferences)).toEqual({
    heightUnit: 'ft',
    textSize: 150,
  })
  expect(changed(usualPreferences, usualPreferences)).toEqual({})
})
