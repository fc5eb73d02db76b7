import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { packSamples, unpackSamples } from '../../../shared/readings/pack.ts'
import type { SampleSpan } from '../../../shared/readings/span.ts'
import { toStored } from '../../../shared/readings/span.ts'

const stored = fc.oneof(
  { weight: 6, arbitrary: fc.integer({ min: -300_000, max: 300_000 }) },
  { weight: 2, arbitrary: fc.integer({ min: -10_000_000, max: 1_000_000_000 }) },
  { weight: 1, arbitrary: fc.constant(NaN) },
)

const span: fc.Arbitrary<SampleSpan> = fc
  .tuple(
    fc.constantFrom(0.5, 1, 2, 2.56, 4, 12.5, 64),
    fc.integer({ min: 0, max: 2 ** 40 }),
    fc.uniqueArray(fc.string({ minLength: 1, maxLength: 16, unit: 'binary' }), { minLength: 1, maxLength: 6 }),
    fc.integer({ min: 0, max: 40 }),
  )
  .chain(([sampleRate, firstSlot, letters, length]) =>
    fc
      .array(fc.array(stored, { minLength: length, maxLength: length }), {
        minLength: letters.length,
        maxLength: letters.length,
      })
      .map((rows) => ({ sampleRate, firstSlot, letters, series: rows.map((row) => Float64Array.from(row)) })),
  )

const spanOf = (...rows: (number | null)[][]): SampleSpan => ({
  sampleRate: 4,
  firstSlot: 7_000_000_000,
  letters: rows.map((_, index) => `S-${index + 1}`),
  series: rows.map((row) => Float64Array.from(row, toStored)),
})

describe('packing readings', () => {
  it('gives back any span of samples exactly as it was', () => {
    fc.assert(
      fc.property(span, (samples) => {
        expect(unpackSamples(packSamples(samples))).toEqual(samples)
      }),
      { numRuns: 500 },
    )
  })

  it('keeps differences that do not fit into 32 bits', () => {
    const samples = spanOf([-1000, 100_000, -1000, 100_000])
    const [series] = unpackSamples(packSamples(samples)).series
    expect([...(series ?? [])]).toEqual([-10_000_000, 1_000_000_000, -10_000_000, 1_000_000_000])
  })

  it('writes the bytes that its description lays down', () => {
    const samples = { sampleRate: 4, firstSlot: 300, letters: ['A', 'B'], series: [Float64Array.of(1, -1, 64), Float64Array.of(NaN, 5, 5)] } // prettier-ignore
    expect([...packSamples(samples)]).toEqual([
      1, 0, 0, 0, 0, 0, 0, 16, 64, 0xac, 0x02, 3, 2, 1, 65, 1, 66, // version, 4.0, 300, lengths, letters
      1, 0b00001000, // the fourth sample is missing
      2, 3, 0x82, 0x01, // +1, -2, +65
      10, 0, // +5, 0
    ]) // prettier-ignore
  })

  it('turns negative zero into zero, so that equal readings have equal bytes', () => {
    expect(packSamples(spanOf([-0, 0.00004, -0.00004]))).toEqual(packSamples(spanOf([0, 0, 0])))
  })

  it('refuses bytes that were cut short, lengthened or come from another version', () => {
    const bytes = packSamples(spanOf([1, 2, null], [4, 5, 6]))
    for (let length = 0; length < bytes.length; length++) {
      expect(() => unpackSamples(bytes.subarray(0, length)), `first ${length} bytes`).toThrow(RangeError)
    }
    expect(() => unpackSamples(Uint8Array.of(...bytes, 0))).toThrow('followed by something else')
    expect(() => unpackSamples(Uint8Array.of(2, ...bytes.subarray(1)))).toThrow('another version')
  })

  it('never takes more than a moment or the memory for bytes at random', () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 60 }), (bytes) => {
        try {
          unpackSamples(Uint8Array.of(1, ...bytes))
        } catch (error) {
          expect(error).toBeInstanceOf(RangeError)
        }
      }),
    )
  })
})
