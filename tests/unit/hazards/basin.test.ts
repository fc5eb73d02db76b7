import { describe, expect, it } from 'vitest'
import { basinModes, merianPeriod } from '../../../shared/hazards/basinModes.ts'
import { bandEnergy, modeEnergies, surgeBand } from '../../../shared/hazards/surgeBand.ts'
import type { LongWaveSpectrum } from '../../../shared/hazards/surgeBand.ts'

describe('own periods of a basin', () => {
  it('of 300 m, 6 m deep are 78.2 s closed and 156.4 s open (Merian)', () => {
    expect(merianPeriod('closed', 1, 300, 6)).toBeCloseTo(78.2, 1)
    expect(merianPeriod('open', 1, 300, 6)).toBeCloseTo(156.4, 1)
  })

  it('have the shape of standing waves: whole wavelengths in half lengths, odd quarters at a mouth', () => {
    const speed = Math.sqrt(9.81 * 6)
    expect(merianPeriod('closed', 3, 300, 6) * speed).toBeCloseTo((2 * 300) / 3, 9)
    expect(merianPeriod('open', 2, 300, 6) * speed).toBeCloseTo((4 * 300) / 3, 9)
  })

  it('come longest first with the ± of the depth', () => {
    const modes = basinModes(
      { kinds: ['closed', 'open'], length: { value: 300, sd: 0 }, depth: { value: 6, sd: 0.6 } },
      2,
    )
    expect(modes.map(({ kind, mode }) => `${kind} ${mode}`)).toEqual(['open 1', 'closed 1', 'open 2', 'closed 2'])
    // T goes with h^−½: 10 % of depth is 5 % of period.
    expect(modes[0].period.sd).toBeCloseTo(0.05 * 156.4, 0)
  })

  it('of a basin that has fallen dry are not told', () => {
    const dry = basinModes({ kinds: ['closed'], length: { value: 300, sd: 0 }, depth: { value: -0.2, sd: 0.1 } }, 1)
    expect(dry[0].period).toMatchObject({ value: null, reason: 'the basin is dry' })
    expect(() => merianPeriod('open', 1, 0, 6)).toThrow(RangeError)
  })
})

/** A flat floor with two bumps of resonance, 0.001 to 0.05 Hz. */
function spectrum(peaks: { frequency: number; height: number }[], floor = 0): LongWaveSpectrum {
  const frequency = Array.from({ length: 491 }, (_, n) => 0.001 + 0.0001 * n)
  const width = 0.0004
  const density = frequency.map((f) =>
    peaks.reduce((sum, peak) => {
      const share = Math.exp(-((f - peak.frequency) ** 2) / (2 * width * width)) / (width * Math.sqrt(2 * Math.PI))
      return sum + (peak.height / 4) ** 2 * share
    }, floor),
  )
  return { frequency, density, degreesOfFreedom: 12 }
}

describe('long swell at the berths', () => {
  const band = { shortest: 30, longest: 250 }

  it('is 4 √m₀ of what lies in the band, known from the bumps put in', () => {
    const found = surgeBand(
      spectrum([
        { frequency: 1 / 78.2, height: 0.08 },
        { frequency: 1 / 156.4, height: 0.04 },
      ]),
      band,
    )
    expect(found.value).toBeCloseTo(Math.hypot(0.08, 0.04), 4)
    expect(found.sd).toBeGreaterThan(0)
  })

  it('has a sampling ± of ½ √(2/ν) where the density is even', () => {
    const flat = spectrum([], 0.01)
    const { value, sd } = surgeBand(flat, band)
    const bins = (1 / 30 - 1 / 250) / 0.0001
    expect((sd ?? NaN) / (value ?? NaN)).toBeCloseTo(0.5 * Math.sqrt(2 / (12 * bins)), 6)
    expect(bandEnergy(flat, 1 / 250, 1 / 30)).toBeCloseTo(0.01 * (1 / 30 - 1 / 250), 9)
  })

  it('is refused where the spectrum does not reach over the band: not measured is not calm', () => {
    const short = spectrum([])
    short.frequency = short.frequency.slice(0, 200)
    short.density = short.density.slice(0, 200)
    expect(surgeBand(short, band).reason).toBe('the spectrum does not reach over the band')
    expect(surgeBand(null, band).value).toBeNull()
    expect(surgeBand(short, { shortest: 250, longest: 30 }).reason).toBe('the band has no width')
  })

  it('shows which own period answers', () => {
    const swinging = spectrum([{ frequency: 1 / 78.2, height: 0.08 }], 0.0005)
    const modes = basinModes(
      { kinds: ['closed', 'open'], length: { value: 300, sd: 0 }, depth: { value: 6, sd: 0.1 } },
      1,
    )
    const [open, closed] = modeEnergies(swinging, modes, band)
    expect(closed.amplification).toBeGreaterThan(2)
    expect(closed.height).toBeGreaterThan(0.079)
    expect(open.amplification).toBeLessThan(1)
    expect(modeEnergies(swinging, modes, { shortest: 30, longest: 100 })).toHaveLength(1)
  })
})
