import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { hasTooManyHoles, isHandled, startLedger, withHandled } from '../../../shared/readings/sequence.ts'

describe('the ledger of a stream', () => {
  it('moves on over frames in order', () => {
    expect(withHandled(startLedger(0), [1, 2, 3])).toEqual({ contiguous: 3, beyond: [] })
  })

  it('stops before a hole and closes up when the hole is filled', () => {
    const withHole = withHandled(startLedger(5), [7, 8, 10])
    expect(withHole).toEqual({ contiguous: 5, beyond: [[7, 8], [10, 10]] }) // prettier-ignore
    expect(withHandled(withHole, [9])).toEqual({ contiguous: 5, beyond: [[7, 10]] })
    expect(withHandled(withHole, [6, 9]).contiguous).toBe(10)
  })

  it('says of every number whether it was handled, whatever the order and the repetitions', () => {
    fc.assert(
      fc.property(
        fc.array(fc.array(fc.integer({ min: 1, max: 60 }), { maxLength: 12 }), { maxLength: 12 }),
        (turns) => {
          const ledger = turns.reduce(withHandled, startLedger(0))
          const handled = new Set(turns.flat())
          for (let seq = 1; seq <= 61; seq++) expect(isHandled(ledger, seq)).toBe(handled.has(seq))
          let contiguous = 0
          while (handled.has(contiguous + 1)) contiguous++
          expect(ledger.contiguous).toBe(contiguous)
        },
      ),
    )
  })

  it('tells a station that leaves holes from one that shuffles a day of frames', () => {
    const everyOther = (count: number) => Array.from({ length: count }, (_, n) => 2 * n + 2)
    expect(hasTooManyHoles(withHandled(startLedger(0), everyOther(43_200)))).toBe(false)
    expect(hasTooManyHoles(withHandled(startLedger(0), everyOther(50_001)))).toBe(true)
  })
})
