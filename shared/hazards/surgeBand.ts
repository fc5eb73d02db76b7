/**
 * Long swell at a berth: H = 4 √(∫ S df) over a band of periods of a spectrum of the long waves, and how the energy sits about the
 * basin's own periods. Straight from bottom pressure (response close to 1); an hour or more of it, tide taken out.
 */
import type { BasinMode } from './basinModes.ts'
import { check, determined, input, undetermined } from './figure.ts'
import type { Figure, FigureFrame } from './figure.ts'

export interface LongWaveSpectrum {
  /** Hz, rising, evenly spaced. */
  frequency: number[]
  /** m²/Hz */
  density: number[]
  degreesOfFreedom: number
}

export interface PeriodBand {
  /** s */
  shortest: number
  longest: number
}

/** Energy (m²) of a spectrum between two frequencies, straight lines between its values. */
export function bandEnergy({ frequency, density }: LongWaveSpectrum, from: number, to: number): number {
  let energy = 0
  for (let n = 1; n < frequency.length; n++) {
    const [a, b] = [frequency[n - 1], frequency[n]]
    const low = Math.max(a, from)
    const high = Math.min(b, to)
    if (!(high > low)) continue
    const at = (f: number): number => density[n - 1] + ((density[n] - density[n - 1]) * (f - a)) / (b - a)
    energy += ((at(low) + at(high)) / 2) * (high - low)
  }
  return energy
}

/** Bandwidth that carries the sampling error: (∫S df)² / ∫S² df, Hz. */
function effectiveWidth(spectrum: LongWaveSpectrum, from: number, to: number): number {
  const squares = { ...spectrum, density: spectrum.density.map((value) => value * value) }
  const whole = bandEnergy(spectrum, from, to)
  return (whole * whole) / bandEnergy(squares, from, to)
}

/**
 * ± is that of sampling: the energy of independent bins with the spectrum's degrees of freedom, CV(H) = ½ √(2/ν), ν of the whole band.
 * Refused where the spectrum does not reach over the band: what is not measured is not calm.
 */
export function surgeBand(spectrum: LongWaveSpectrum | null, band: PeriodBand): Figure {
  const from = 1 / band.longest
  const to = 1 / band.shortest
  const frame: FigureFrame = {
    unit: 'm',
    method: {
      name: `long swell of ${band.shortest} to ${band.longest} s`,
      formula: 'H = 4 √(∫ S df)',
      source:
        'zeroth moment of the spectrum, IEC/IAHR list of sea-state parameters 1987; sampling error as for any spectrum',
      fromMemory: false,
      assumptions: [
        'the sea was the same for the hour behind it, so it answers slowly',
        'no direction is measured in a basin',
      ],
    },
    inputs: [input('shortest period', band.shortest, 's', 0), input('longest period', band.longest, 's', 0)],
    checks: spectrum ? [check('degrees of freedom of the spectrum', spectrum.degreesOfFreedom, '1', 4, null)] : [],
  }
  if (!(from > 0) || !(to > from)) return undetermined(frame, 'the band has no width')
  if (!spectrum || spectrum.frequency.length < 2) return undetermined(frame, 'no hour of readings without large gaps')
  const { frequency } = spectrum
  const step = frequency[1] - frequency[0]
  if (frequency[0] > from + step || frequency[frequency.length - 1] < to - step)
    return undetermined(frame, 'the spectrum does not reach over the band')
  const energy = bandEnergy(spectrum, from, to)
  const value = 4 * Math.sqrt(Math.max(0, energy))
  const bins = energy > 0 ? Math.max(1, effectiveWidth(spectrum, from, to) / step) : 1
  return determined(frame, {
    value,
    sd: (value / 2) * Math.sqrt(2 / (spectrum.degreesOfFreedom * bins)),
    uncertaintyFrom: 'sampling alone: degrees of freedom of the spectrum over the width of the energy in the band',
  })
}

export interface ModeEnergy {
  kind: BasinMode['kind']
  mode: number
  /** s */
  period: number
  /** Height of what swings within 15 % of the own period, m. */
  height: number
  /** Share of the energy of the band, 0 to 1. */
  share: number
  /** Density there over the mean density of the band: above 1 the basin answers. */
  amplification: number
}

/** Either side of an own period, share of it: Merian's own error and the width of a resonance. */
const modeWidth = 0.15

/** For the modes whose periods lie in the band. */
export function modeEnergies(spectrum: LongWaveSpectrum, modes: BasinMode[], band: PeriodBand): ModeEnergy[] {
  const [bandFrom, bandTo] = [1 / band.longest, 1 / band.shortest]
  const whole = bandEnergy(spectrum, bandFrom, bandTo)
  return modes.flatMap(({ kind, mode, period }) => {
    if (period.value === null || period.value < band.shortest || period.value > band.longest) return []
    const from = 1 / (period.value * (1 + modeWidth))
    const to = 1 / (period.value * (1 - modeWidth))
    const energy = bandEnergy(spectrum, from, to)
    const share = whole > 0 ? Math.min(1, energy / whole) : 0
    const amplification = whole > 0 ? energy / (to - from) / (whole / (bandTo - bandFrom)) : 0
    return [{ kind, mode, period: period.value, height: 4 * Math.sqrt(Math.max(0, energy)), share, amplification }]
  })
}
