import { describe, expect, test } from 'vitest'
import { makePassphrase } from '../../../server/seeders/passphrase.ts'
import { faultOfPassword, hashPassword, passwordFits } from '../../../server/services/passwords.ts'

describe('a new password', () => {
  test.each([
    'four oars on a grey boat',
    'tide-tables and a torch',
    'correct but not that horse',
    'Zwölf Boxkämpfer jagen',
    'ペンギンは海で泳ぐのが好きだ',
    'x7$Kq!vT2#mP9',
    'a'.repeat(3) + ' long one with triple letters',
    '12 herons, 14 terns',
  ])('such as "%s" may be used', (password) => {
    expect(faultOfPassword(password)).toBeNull()
  })

  test.each([
    ['eleven char', 'Use at least 12 characters; a few words will do.'],
    ['password1234', 'This is a commonly used password.'],
    ['P4ssw0rd!2026', 'This is a commonly used password.'],
    ['qwertyuiop12', 'This is a commonly used password.'],
    ['Letmein-2026!!', 'This is a commonly used password.'],
    ['correct horse battery staple', 'This is a commonly used password.'],
    ['harbourmaster1', 'This is a commonly used password.'],
    ['111111111111', 'This repeats a short piece or counts up: use something harder to guess.'],
    ['abcabcabcabcab', 'This repeats a short piece or counts up: use something harder to guess.'],
    ['123456789012', 'This repeats a short piece or counts up: use something harder to guess.'],
    ['abcdefghijkl', 'This repeats a short piece or counts up: use something harder to guess.'],
    ['2026-12-01 06:00', 'This is a commonly used password.'],
  ])('"%s" is refused with its reason', (password, reason) => {
    expect(faultOfPassword(password)).toBe(reason)
  })

  test("made of the person's own name or e-mail is refused", () => {
    expect(faultOfPassword('Ada.Quayle.2026', ['Ada Quayle', 'ada'])).toBe('This is made of your name or e-mail.')
    expect(faultOfPassword('Ada Quayle saw the seal', ['Ada Quayle', 'ada'])).toBeNull()
  })

  test('may have 72 bytes and no more, counted as they are stored', () => {
    const words = 'the grey seal sleeps on the outer ledge while the tide comes in at dusk'
    expect(words.length).toBe(71)
    expect(faultOfPassword(`${words}!`)).toBeNull()
    expect(faultOfPassword(`${words}!!`)).toBe('Use at most 72 bytes.')
    expect(faultOfPassword(words.slice(0, 70) + 'ö')).toBeNull()
    expect(faultOfPassword(`${words}ö`)).toBe('Use at most 72 bytes.')
  })
})

describe('a stored password', () => {
  test('fits in either form of the same letters', async () => {
    const hash = await hashPassword('zwölf Boote im Hafen', 4)
    expect(await passwordFits('zwo\u0308lf Boote im Hafen', hash, 4)).toBe(true)
    expect(await passwordFits('zwolf Boote im Hafen', hash, 4)).toBe(false)
  })

  test('is checked for so many at once and no more, and for others again afterwards', async () => {
    const answers = await Promise.allSettled(Array.from({ length: 40 }, () => passwordFits('any', null, 4)))
    expect(answers.filter(({ status }) => status === 'fulfilled')).toHaveLength(32)
    expect(await passwordFits('any', null, 4)).toBe(false)
  })

  test('of nobody never fits, though it is computed', async () => {
    expect(await passwordFits('the password of nobody', null, 4)).toBe(false)
  })
})

test('a made passphrase may be used, and the next is another one', () => {
  const made = Array.from({ length: 50 }, makePassphrase)
  expect(made.map((passphrase) => faultOfPassword(passphrase))).toEqual(made.map(() => null))
  expect(new Set(made).size).toBe(50)
})
