import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { criticalCoherence, phaseDeviation } from '../../../shared/waves/coherence.ts'
import { bandMatrices } from '../../../shared/waves/bandMatrices.ts'
import { fineSpectra } from '../../../shared/waves/recordSpectra.ts'
import { independentAverages, segmentSpectra, welchDensity } from '../../../shared/waves/spectrum.ts'

const numbers = z.array(z.number())
/** Made by welchReference.py with scipy. */
const reference = z
  .object({ frequency: numbers, xx: numbers, yy: numbers, edges: numbers, real: numbers, imag: numbers })
  .parse(JSON.parse(readFileSync(join(import.meta.dirname, 'welchReference.json'), 'utf8')))

const times = Array.from({ length: 640 }, (_, i) => i / 4)
const x = Float64Array.from(times, (t) => {
  const waves = 0.8 * Math.sin(2 * Math.PI * 0.11 * t + 0.3) + 0.3 * Math.cos(2 * Math.PI * 0.27 * t)
  return waves + 0.002 * t + 0.05 * Math.sin((37 * t * t) / 100)
})
const y = Float64Array.from(times, (t) => {
  const waves = 0.7 * Math.sin(2 * Math.PI * 0.11 * (t - 1.3) + 0.3) + 0.2 * Math.cos(2 * Math.PI * 0.27 * t + 0.9)
  return waves + 0.04 * Math.cos((53 * t * t) / 90)
})

describe("Welch's spectra", () => {
  const spectra = segmentSpectra([x, y], 4, 128)
  const xx = welchDensity(spectra, 0)
  const yy = welchDensity(spectra, 1)

  it('agree with scipy in density at every frequency', () => {
    reference.frequency.forEach((f, bin) => {
      expect(bin * spectra.step).toBeCloseTo(f, 12)
      expect(xx[bin]).toBeCloseTo(reference.xx[bin], 10)
      expect(yy[bin]).toBeCloseTo(reference.yy[bin], 10)
    })
  })

  it('refuse a segment longer than the record or no power of two', () => {
    expect(() => segmentSpectra([x], 4, 1024)).toThrow(RangeError)
    expect(() => segmentSpectra([x], 4, 100)).toThrow(RangeError)
  })

  it('stand for 0.95 K independent averages at half overlap (Welch 1967)', () => {
    expect(independentAverages(15)).toBeCloseTo(14.3, 1)
    expect(independentAverages(23)).toBeCloseTo(21.8, 1)
  })
})

describe('the spectrum of the whole record', () => {
  const fine = fineSpectra([x, y], 4, 0.004, 1.9)
  const edges = reference.edges.map((f) => Math.round((f - fine.first) / fine.step))
  const plain = [new Float64Array(fine.count).fill(1), new Float64Array(fine.count).fill(1)]
  const bands = bandMatrices(fine, edges, plain, [0, 0])

  it("gives groups of frequencies the cross-spectrum that scipy's csd gives, averaged by numpy", () => {
    reference.real.forEach((real, g) => {
      // Row 0, column 1 of ⟨X_m X_n*⟩ is the conjugate of scipy's ⟨X* Y⟩.
      expect(bands.real[4 * g + 1]).toBeCloseTo(real, 9)
      expect(bands.imag[4 * g + 1]).toBeCloseTo(-reference.imag[g], 9)
    })
  })

  it('gives a series that arrives 1.3 s later the phase −2πfτ', () => {
    const peak = bandMatrices(fine, [27 - 1, 30 - 1], plain, [0, 0])
    const phase = Math.atan2(-peak.imag[1], peak.real[1])
    expect(-phase / (2 * Math.PI * 0.11)).toBeCloseTo(1.3, 1)
  })

  it("keeps the series' variance (Parseval) once the taper is accounted for", () => {
    const flat = Float64Array.from({ length: 1000 }, (_, i) => Math.sin(0.7 * i) + 0.4 * Math.cos(1.9 * i + 1))
    const fine = fineSpectra([flat], 4, 0.001, 2)
    let m0 = 0
    for (let n = 0; n < fine.count; n++) m0 += (fine.series[0][2 * n] ** 2 + fine.series[0][2 * n + 1] ** 2) * fine.step
    const variance = flat.reduce((sum, v) => sum + v * v, 0) / flat.length
    expect((m0 * fine.energyFactor[0]) / variance).toBeCloseTo(1, 3)
  })
})

describe('coherence', () => {
  it.each([
    [8, 0.05, 0.348],
    [16, 0.05, 0.181],
    [32, 0.01, 0.138],
    [64, 0.01, 0.07],
  ])(
    'of noise over %s averages exceeds its critical value with probability %s (Carter et al. 1973)',
    (n, alpha, value) => {
      expect(criticalCoherence(n, alpha)).toBeCloseTo(value, 3)
    },
  )

  it.each([
    [0.2, 0.25],
    [0.5, 0.125],
    [0.8, 0.0625],
    [0.95, 0.0287],
  ])('of %s over 32 averages gives a phase known to %s rad (Bendat & Piersol)', (coherence, deviation) => {
    expect(phaseDeviation(coherence, 32)).toBeCloseTo(deviation, 3)
  })
})
