/** Tables of what one estimate says: systems, spectrum, sub-arrays, grounds for trust. */
import { opposite, threeDigits } from '../../../../shared/directions.ts'
import type { EstimateResult, WaveSystem } from '../../../../shared/schemas/estimate.ts'
import { decimals, heightPlaces, noValue, plusMinus, seconds } from '../../../../shared/units.ts'
import { systemTitle } from '../../../../shared/waveSystemNames.ts'
import { qualityWord } from '../../drawings/geometry/qualityWord.ts'
import type { FiguresTable } from './figuresTable.ts'

/** What the crest plan shows. */
export function crestPlanFigures(
  systems: readonly WaveSystem[],
  sensors: readonly { name: string; east: number; north: number; isUsed: boolean }[],
): FiguresTable {
  return {
    of: 'crest plan',
    note: 'systems first, then sensors with their place in the array; phase not measured',
    columns: [
      { heading: 'What' },
      { heading: 'From T' },
      { heading: 'Toward T' },
      { heading: 'Speed m/s', isNumber: true },
      { heading: 'Spacing m', isNumber: true },
      { heading: 'East m', isNumber: true },
      { heading: 'North m', isNumber: true },
      { heading: 'Used' },
    ],
    rows: [
      ...systems.map((system) => [
        systemTitle(system, systems),
        threeDigits(opposite(system.toward)),
        `${threeDigits(system.toward)} ± ${Math.max(1, Math.round(system.headingSd))}°`,
        `${decimals(system.speed, 1)} ${plusMinus(system.speedSd, 1)}`,
        decimals(system.speed * system.peakPeriod, 0),
        '',
        '',
        '',
      ]),
      ...sensors.map((sensor) => [
        sensor.name,
        '',
        '',
        '',
        '',
        decimals(sensor.east, 1),
        decimals(sensor.north, 1),
        sensor.isUsed ? 'yes' : 'no',
      ]),
    ],
  }
}

/** Density by frequency. */
export function spectrumFigures(spectrum: NonNullable<EstimateResult['spectrum']>): FiguresTable {
  const shown = spectrum.frequency.flatMap((frequency, index) =>
    frequency <= spectrum.cutoff ? [{ frequency, density: spectrum.density[index] }] : [],
  )
  return {
    of: 'spectrum',
    note: `surface variance density, ${decimals(spectrum.degreesOfFreedom, 0)} degrees of freedom, up to ${decimals(spectrum.cutoff, 2)} Hz`,
    columns: [
      { heading: 'Frequency Hz', isNumber: true, fileHeading: 'wave_frequency_s-1' },
      { heading: 'Period s', isNumber: true, fileHeading: 'period_s' },
      { heading: 'Density m²/Hz', isNumber: true, fileHeading: 'sea_surface_wave_variance_spectral_density_m2_s' },
    ],
    rows: shown.map(({ frequency, density }) => [
      decimals(frequency, 4),
      frequency > 0 ? decimals(1 / frequency, 1) : noValue,
      decimals(density, 4),
    ]),
    fileRows: shown.map(({ frequency, density }) => [frequency, frequency > 0 ? 1 / frequency : null, density]),
  }
}

/** Every sub-array that could resolve the wave. */
export function subArrayFigures(subArrays: EstimateResult['subArrays']): FiguresTable {
  return {
    of: 'sub-arrays',
    note: 'every sub-array of three or more that can resolve this wave',
    columns: [
      { heading: 'Sensors' },
      { heading: 'From T' },
      { heading: 'Toward T' },
      { heading: 'Speed m/s', isNumber: true },
      { heading: 'Agrees' },
    ],
    rows: subArrays.map((one) => [
      one.sensors.join(' '),
      threeDigits(opposite(one.toward)),
      threeDigits(one.toward),
      decimals(one.speed, 1),
      one.agrees ? 'yes' : 'no',
    ]),
  }
}

/** Every test of the window, with what it found and what it allows. */
export function testFigures(tests: EstimateResult['tests']): FiguresTable {
  return {
    of: 'tests on this window',
    note: `${tests.length} tests`,
    columns: [
      { heading: 'Test' },
      { heading: 'Found', isNumber: true },
      { heading: 'Limit', isNumber: true },
      { heading: 'Detail' },
      { heading: 'Flag' },
    ],
    rows: tests.map((test) => [
      test.test,
      decimals(test.value, 3),
      decimals(test.limit, 3),
      test.detail,
      qualityWord(test.flag),
    ]),
  }
}

/** Lags and trace speeds of all pairs. */
export function traceSpeedFigures(pairs: EstimateResult['traceSpeeds']): FiguresTable {
  return {
    of: 'pairwise trace speeds',
    note: 'along pairs; not components of the vector',
    columns: [
      { heading: 'Pair' },
      { heading: 'Distance m', isNumber: true },
      { heading: 'Lag s', isNumber: true },
      { heading: '± s', isNumber: true },
      { heading: 'Trace speed m/s', isNumber: true },
      { heading: 'Coherence', isNumber: true },
      { heading: 'Left over s', isNumber: true },
    ],
    rows: pairs.map((pair) => [
      pair.between.join(' to '),
      decimals(pair.distance, 1),
      decimals(pair.lag, 3),
      decimals(pair.lagSd, 3),
      pair.speed === null ? 'broadside' : decimals(pair.speed, 1),
      decimals(pair.coherence, 2),
      decimals(pair.residual, 3),
    ]),
  }
}

/** Words for a height with its ±, and a period. */
export const heightWords = (height: number | null, sd: number | null): string =>
  height === null ? noValue : `${decimals(height, heightPlaces(height))} m ${plusMinus(sd, heightPlaces(height))}`
export const periodWords = (period: number | null): string => seconds(period)
