/** Long swell at the berths, out of the surge band of a station, and the basin's own periods. */
import { basinModes } from '../hazards/basinModes.ts'
import { depthNow } from '../hazards/depths.ts'
import { check, determined, input, undetermined } from '../hazards/figure.ts'
import type { Figure, FigureFrame } from '../hazards/figure.ts'
import { modeEnergies, surgeBand as surgeBandFigure } from '../hazards/surgeBand.ts'
import type { LongWaveSpectrum } from '../hazards/surgeBand.ts'
import { propagate } from '../hazards/uncertain.ts'
import type { Uncertain } from '../hazards/uncertain.ts'
import type { BerthFeed, BerthSettings } from '../schemas/placeSettings.ts'
import { surgeBand } from '../waves/surge.ts'
import { nothingElse } from './entrance.ts'
import type { KindOutlook } from './entrance.ts'
import { graded } from './flags.ts'
import type { Grounds } from './flags.ts'

/** As the band of the surge height, s. */
const band = { shortest: 1 / surgeBand.to, longest: 1 / surgeBand.from }

/**
 * Sampling error of a surge height without a spectrum, share of it: ½ √(2/ν) with ν = 2 T B of an hour and a third of the band, 0.012 Hz,
 * filled with energy.
 */
const usualSamplingShare = 0.5 * Math.sqrt(2 / (2 * 3600 * 0.012))

type Spectrum = LongWaveSpectrum | null

function samplingShareOf(spectrum: Spectrum): number {
  const figure = surgeBandFigure(spectrum, band)
  return figure.value !== null && figure.value > 0 && figure.sd !== null ? figure.sd / figure.value : usualSamplingShare
}

function longSwell({ surgeHeight, surgeSpectrum, feed, relativeSd }: Measured): Figure {
  const { factor, isInBasin } = feed
  const samplingShare = samplingShareOf(surgeSpectrum)
  const own: Uncertain = {
    value: surgeHeight ?? 0,
    sd: surgeHeight === null ? null : surgeHeight * Math.hypot(samplingShare, relativeSd),
  }
  const frame: FigureFrame = {
    unit: 'm',
    method: {
      name: isInBasin ? 'surge band at a gauge in the basin' : 'surge band outside times the factor of the basin',
      formula: 'H = factor · 4 √(∫ S df), 0.004 to 0.04 Hz (25 to 250 s)',
      source: 'zeroth moment of the spectrum, IEC/IAHR list of sea-state parameters 1987; the factor is a setting',
      fromMemory: false,
      assumptions: [
        'an hour of readings, tide removed: it answers slowly',
        'no direction is measured in a basin',
        ...(isInBasin ? [] : ['one factor for all periods: at the basin’s own periods the water swings more']),
      ],
    },
    inputs: [
      input('surge height at the station', own.value, 'm', own.sd),
      input('factor of the basin', factor.value, '1', factor.sd, factor.source),
    ],
    checks: surgeHeight === null ? [] : [check('surge height at the station', surgeHeight, 'm', 0, 3)],
  }
  if (surgeHeight === null) return undetermined(frame, 'no hour of readings without large gaps')
  return determined(frame, {
    value: factor.value * surgeHeight,
    sd: propagate([own, factor], ([height, times]) => height * times),
    uncertaintyFrom: `sampling of an hour (${Math.round(samplingShare * 100)} %)${relativeSd > 0 ? ', what a substitute adds' : ''} and ± of the factor`,
  })
}

interface Measured {
  surgeHeight: number | null
  surgeSpectrum: Spectrum
  feed: BerthFeed
  level: Uncertain
  /** What a substitute adds, share of the height; 0 at the place's own station. */
  relativeSd: number
}

export function berthOutlook(settings: BerthSettings, measured: Measured, grounds: Grounds): KindOutlook {
  const { surgeSpectrum, feed, level } = measured
  const { length, bedLevel, mouth } = settings.basin
  const depth = depthNow(level, bedLevel) ?? { value: 0, sd: null }
  const modes = basinModes({
    kinds: mouth === 'between' ? ['closed', 'open'] : [mouth],
    length: { value: length, sd: null },
    depth,
  })
  const here: Spectrum = surgeSpectrum && {
    ...surgeSpectrum,
    density: surgeSpectrum.density.map((value) => value * feed.factor.value ** 2),
  }
  const energies = here ? modeEnergies(here, modes, band) : []
  return {
    ...nothingElse,
    figures: [graded('longSwell', longSwell(measured), grounds)],
    basin: modes.map(({ kind, mode, period }) => {
      const energy = energies.find((one) => one.kind === kind && one.mode === mode)
      return { kind, mode, period, height: energy?.height ?? null, share: energy?.share ?? null }
    }),
    longWaves: here && { frequency: here.frequency, density: here.density },
    remarks: feed.isInBasin
      ? []
      : [`Not measured in the basin: ${surgeBand.from} to ${surgeBand.to} Hz outside, times ${feed.factor.value} (${feed.factor.source}).`], // prettier-ignore
    systems: [],
  }
}
