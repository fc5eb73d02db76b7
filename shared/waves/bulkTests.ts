/**
 * QARTOD tests of the figures of one window (waves manual, tests 17 to 19; water level manual, test 5): what the band leaves out, energy of
 * very long waves, figures that cannot be, a depth that does not occur here.
 */
import type { EstimateResult, QualityTest } from '../schemas/estimate.ts'
import type { ArraySpectra } from './arraySpectra.ts'
import { noiseDensity } from './bandMatrices.ts'
import { defaultQualityLimits } from './qualityLimits.ts'
import type { QualityLimits } from './qualityLimits.ts'
import type { ArrayWindow } from './window.ts'

/** Hz */
const lowFrequency = 0.05

/**
 * Names of the tests that make the estimate suspect where they are. What the band leaves out is not among them: pressure at the bed of deep
 * water leaves out the short waves always, and the height says up to where it counts.
 */
export const bulkTestNames = ['climatology', 'low-frequency energy', 'bulk limits']

export function addBulkTests(result: EstimateResult, window: ArrayWindow, spectra: ArraySpectra): EstimateResult {
  const limits = window.settings.quality ?? defaultQualityLimits
  return {
    ...result,
    tests: [
      ...result.tests,
      climatology(window, limits),
      frequencyRange(result, limits),
      lowFrequencyEnergy(spectra, limits),
    ],
  }
}

function climatology({ waterDepth, waterDepthSource }: ArrayWindow, { depthSpan }: QualityLimits): QualityTest {
  const test = 'climatology'
  if (depthSpan === null)
    return { test, flag: 2, value: waterDepth, limit: null, detail: 'no span of depths is set for this station' }
  if (waterDepthSource === 'nominal')
    return { test, flag: 2, value: null, limit: null, detail: 'the level of the water is not known' }
  const [from, to] = depthSpan
  const isUsual = waterDepth >= from && waterDepth <= to
  return {
    test,
    flag: isUsual ? 1 : 3,
    value: waterDepth,
    limit: waterDepth < from ? from : to,
    detail: `depth of still water ${waterDepth.toFixed(2)} m, usual ${from} to ${to} m`,
  }
}

function frequencyRange(
  { significantWaveHeight, spectrum }: EstimateResult,
  { tailShare }: QualityLimits,
): QualityTest {
  const test = 'frequency range'
  const tail = spectrum?.tail
  if (!tail || !significantWaveHeight)
    return { test, flag: 2, value: null, limit: tailShare, detail: 'no spectrum to tell it from' }
  // Of the same spectrum, so that its own smoothing cancels.
  const own = heightOf(spectrum)
  const share = tail.significantWaveHeight / own - 1
  return {
    test,
    flag: share > tailShare ? 3 : 1,
    value: share,
    limit: tailShare,
    detail: `above ${spectrum.cutoff.toFixed(2)} Hz may lie ${(100 * share).toFixed(1)} % of the height`,
  }
}

function heightOf({ frequency, density }: NonNullable<EstimateResult['spectrum']>): number {
  const step = frequency.length > 1 ? frequency[1] - frequency[0] : 0
  return 4 * Math.sqrt(density.reduce((sum, value) => sum + value * step, 0))
}

function lowFrequencyEnergy({ bands }: ArraySpectra, { lowFrequencyShare: limit }: QualityLimits): QualityTest {
  const noise = noiseDensity(bands)
  let low = 0
  let all = 0
  for (let g = 0; g < bands.groups; g++) {
    const energy = Math.max(0, bands.density[g] - noise[g]) * bands.width[g]
    all += energy
    if (bands.frequency[g] < lowFrequency) low += energy
  }
  const share = all > 0 ? low / all : 0
  return {
    test: 'low-frequency energy',
    flag: share > limit ? 3 : 1,
    value: share,
    limit,
    detail: `${(100 * share).toFixed(1)} % of the energy below ${lowFrequency} Hz`,
  }
}

/** Figures of the systems that were found; one test for all, with the worst named. */
export function bulkLimitsTest(result: EstimateResult, limits: QualityLimits): QualityTest {
  const { significantWaveHeight, waterDepth, systems } = result
  const greatest = limits.greatestHeightShare * waterDepth
  const faults = [
    ...(significantWaveHeight !== null && significantWaveHeight > greatest
      ? [`height ${significantWaveHeight.toFixed(2)} m above ${greatest.toFixed(2)} m`]
      : []),
    ...systems.flatMap(({ name, peakPeriod, directionalSpread }) => [
      ...outside(`period of the ${name}`, peakPeriod, limits.periodSpan, 's'),
      ...(directionalSpread === null
        ? []
        : outside(`spread of the ${name}`, directionalSpread, limits.spreadSpan, '°')),
    ]),
  ]
  return {
    test: 'bulk limits',
    flag: faults.length > 0 ? 3 : 1,
    value: faults.length,
    limit: 0,
    detail: faults.length > 0 ? faults.join('; ') : 'height, periods and spreads are within what can be',
  }
}

function outside(name: string, value: number, [from, to]: readonly [number, number], unit: string): string[] {
  if (value >= from && value <= to) return []
  return [`${name} ${value.toFixed(1)} ${unit} outside ${from} to ${to}`]
}
