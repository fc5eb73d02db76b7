/** Passphrases that can be read aloud: three words of three syllables, about 57 bits from the system's generator. */
import { randomInt } from 'node:crypto'

const consonants = [...'bdfgklmnprstvzhj']
const vowels = [...'aeiou']

const oneOf = (letters: string[]): string => letters[randomInt(letters.length)] ?? ''
const word = (): string => Array.from({ length: 3 }, () => oneOf(consonants) + oneOf(vowels)).join('')

export const makePassphrase = (): string => Array.from({ length: 3 }, word).join('-')
