/**
 * Passwords: length counts and no rule of composition (NIST SP 800-63B-4, 3.1.1.2); common words, runs and the
 * person's own names are refused with the reason. bcrypt reads 72 bytes and no more, so longer ones are refused.
 */
import bcrypt from 'bcryptjs'
import { longestPasswordBytes, shortestPassword } from '../../shared/schemas/session.ts'
import { commonWords } from './passwords/commonWords.ts'
import { Refused } from './problems.ts'

/** One code point is one character, however it was typed. */
export const normalisedPassword = (password: string): string => password.normalize('NFC')

const lookalikes: Record<string, string> = {
  '0': 'o',
  '1': 'i',
  '3': 'e',
  '4': 'a',
  '5': 's',
  '7': 't',
  $: 's',
  '@': 'a',
}

/** Lower case without what people put around and into a word: `P4ssw0rd-2026!` becomes `password`. */
function bareWords(password: string): string[] {
  const lower = password.toLowerCase()
  const trimmed = lower.replace(/^[^\p{L}]+|[^\p{L}]+$/gu, '')
  const replaced = trimmed.replace(/[013457$@]/g, (sign) => lookalikes[sign] ?? sign)
  return [lower, trimmed, replaced].map((word) => word.replace(/[^\p{L}]/gu, ''))
}

/** `abcabcabc`, `111111`, `123456789012`: a short piece again and again, or a run along the keyboard's digits. */
function isRepetition(password: string): boolean {
  const cycle = /^(.{1,5}?)\1+.{0,4}$/u.test(password)
  const steps = [...password]
    .slice(1)
    .map((sign, index) => (sign.codePointAt(0) ?? 0) - (password.codePointAt(index) ?? 0))
  return cycle || steps.filter((step) => Math.abs(step) === 1).length >= steps.length - 2
}

/** Why this password is refused, as a sentence for the person; null: it may be used. */
export function faultOfPassword(given: string, ownWords: string[] = []): string | null {
  const password = normalisedPassword(given)
  if ([...password].length < shortestPassword)
    return `Use at least ${shortestPassword} characters; a few words will do.`
  if (Buffer.byteLength(password) > longestPasswordBytes) return `Use at most ${longestPasswordBytes} bytes.`
  if (isRepetition(password)) return 'This repeats a short piece or counts up: use something harder to guess.'
  const words = bareWords(password)
  if (words.some((word) => word === '' || commonWords.has(word))) return 'This is a commonly used password.'
  const own = ownWords.map((word) => bareWords(word).at(0) ?? '').filter((word) => word.length >= 4)
  if (words.some((word) => own.includes(word))) return 'This is made of your name or e-mail.'
  return null
}

/** bcryptjs computes on the main thread in slices: one at a time, so that many sign-ins do not starve the live feed. */
let lastInLine: Promise<unknown> = Promise.resolve()
let waiting = 0
/** At the usual cost the last in line waits about ten seconds. */
const longestLine = 32

function inLine<Result>(work: () => Promise<Result>): Promise<Result> {
  if (waiting >= longestLine) return Promise.reject(tooManyAtOnce())
  waiting += 1
  const turn = lastInLine.then(work, work).finally(() => (waiting -= 1))
  lastInLine = turn.catch(() => undefined)
  return turn
}

const tooManyAtOnce = (): Refused =>
  new Refused({
    status: 503,
    code: 'session.tooManyAtOnce',
    title: 'Too many sign-ins at once',
    detail: 'Try again in a few seconds.',
    retryAfterSeconds: 5,
  })

export const hashPassword = (password: string, cost: number): Promise<string> =>
  inLine(() => bcrypt.hash(normalisedPassword(password), cost))

const dummyHashes = new Map<number, string>()

/** Takes as long for an account that does not exist as for one that does. */
export function passwordFits(password: string, hash: string | null, cost: number): Promise<boolean> {
  return inLine(async () => {
    const dummy = dummyHashes.get(cost) ?? (await bcrypt.hash('the password of nobody', cost))
    dummyHashes.set(cost, dummy)
    const tooLong = Buffer.byteLength(normalisedPassword(password)) > longestPasswordBytes
    const fits = await bcrypt.compare(normalisedPassword(password), hash ?? dummy)
    return fits && hash !== null && !tooLong
  })
}
