import { describe, expect, it } from 'vitest'
import { consentOf, isConsentGiven } from '../../../src/components/alerts/consentForm.ts'

const empty = { isAlone: false, email: '', password: '', aloneReason: '' }

describe('the form for a second person', () => {
  it('sends name and passphrase, and no reason that was typed before', () => {
    const form = { ...empty, email: ' duty b ', password: ' as typed ', aloneReason: 'Nobody else on watch' }
    expect(consentOf(form)).toEqual({ consent: { email: 'duty b', password: ' as typed ' }, aloneReason: null })
  })

  it('sends the reason of who is alone, and no passphrase that was typed before', () => {
    const form = { isAlone: true, email: 'b', password: 'secret words', aloneReason: ' Nobody else on watch ' }
    expect(consentOf(form)).toEqual({ consent: null, aloneReason: 'Nobody else on watch' })
  })

  it.each([
    ['nothing', empty],
    ['a name alone', { ...empty, email: 'b' }],
    ['a short reason', { ...empty, isAlone: true, aloneReason: 'Alone' }],
  ])('with %s is not ready and sends neither', (_, form) => {
    expect(isConsentGiven(form)).toBe(false)
    expect(consentOf(form)).toEqual({ consent: null, aloneReason: null })
  })
})
