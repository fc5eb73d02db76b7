import { describe, expect, test } from 'vitest'
import { codeAt, stepAt, stepOfCode } from '../../server/services/secondFactor/timedCode.ts'
import { seal, unseal } from '../../server/services/secondFactor/secretBox.ts'

/** RFC 6238, appendix B: SHA-1, the secret is the ASCII of 12345678901234567890; of its eight digits the last six. */
const secret = 'GEZDGNBVGY3TQOJQGEZDGNBVGY3TQOJQ'
const vectors: [seconds: number, digits: string][] = [
  [59, '94287082'],
  [1111111109, '07081804'],
  [1111111111, '14050471'],
  [1234567890, '89005924'],
  [2000000000, '69279037'],
  [20000000000, '65353130'],
]
const at = (seconds: number): Date => new Date(seconds * 1000)

describe('a code by the clock', () => {
  test.each(vectors)('at %d s is the one of RFC 6238', (seconds, digits) => {
    expect(codeAt(secret, at(seconds))).toBe(digits.slice(2))
    expect(stepOfCode(secret, digits.slice(2), at(seconds), null)).toBe(Math.floor(seconds / 30))
  })

  test('of a clock up to thirty seconds off is taken, and no further', () => {
    const now = at(1_700_000_010)
    const of = (steps: number): string => codeAt(secret, at(1_700_000_010 + 30 * steps))
    expect([-2, -1, 0, 1, 2].map((steps) => stepOfCode(secret, of(steps), now, null))).toEqual([
      null,
      stepAt(now) - 1,
      stepAt(now),
      stepAt(now) + 1,
      null,
    ])
  })

  test('that was taken before is refused, and so is an older one', () => {
    const now = at(1_700_000_010)
    const step = stepAt(now)
    expect(stepOfCode(secret, codeAt(secret, now), now, step)).toBeNull()
    expect(stepOfCode(secret, codeAt(secret, at(1_699_999_980)), now, step)).toBeNull()
    expect(stepOfCode(secret, codeAt(secret, at(1_700_000_040)), now, step)).toBe(step + 1)
  })

  test.each(['', '12345', '1234567', 'abcdef', '12 456', '１２３４５６'])('written %s is none', (code) => {
    expect(stepOfCode(secret, code, at(59), null)).toBeNull()
  })
})

describe('a sealed secret', () => {
  test('opens with the installation’s secret for its owner alone, and unaltered', () => {
    const sealed = seal('one secret of this installation', 7, secret)
    expect(sealed).not.toContain(secret)
    expect(sealed.length).toBeLessThanOrEqual(160)
    expect(unseal('one secret of this installation', 7, sealed)).toBe(secret)
    expect(unseal('another secret', 7, sealed)).toBeNull()
    expect(unseal('one secret of this installation', 8, sealed)).toBeNull()
    expect(unseal('one secret of this installation', 7, `A${sealed.slice(1)}`)).toBeNull()
    expect(unseal('one secret of this installation', 7, '')).toBeNull()
  })
})
