/** What each input beside the array is for, and what is lost without it. */
import type { AuxiliaryKind } from '../../../shared/schemas/stationSetUpAuxiliary.ts'

export const unitOf: Record<AuxiliaryKind, string> = {
  waterLevel: 'm above datum',
  tide: 'm above datum',
  barometer: 'Pa',
  windSpeed: 'm/s',
  windFrom: '° T',
}

/** A window takes a single value at most so far from its middle, s; wind counts as being of now for so long. */
export const reachSeconds: Record<AuxiliaryKind, number> = {
  waterLevel: 1_800,
  tide: 1_800,
  barometer: 10_800,
  windSpeed: 3_600,
  windFrom: 3_600,
}

export const usedFor: Record<AuxiliaryKind, string> = {
  waterLevel: 'The depth of a window where the sensors themselves do not tell the level of the water; goes before a tide table.', // prettier-ignore
  tide: 'The depth of a window where neither the sensors nor a gauge tell the level of the water.',
  barometer: 'The level of absolute pressure sensors: 1 hPa is 1 cm of water.',
  windSpeed: 'Kept with its time and quality beside the waves, for people; no figure is made from it.',
  windFrom: 'Kept with its time and quality beside the waves, for people; no figure is made from it.',
}

export const lostWithout: Record<AuxiliaryKind, string> = {
  waterLevel:
    'The depth is that of the sensors, of the tide table, or the nominal one, which is said beside the figures.',
  tide: 'Where the sensors do not tell the level either, the nominal depth is used: height and linear speed are off by the tide.', // prettier-ignore
  barometer: 'Absolute pressure sensors are taken at standard pressure: the depth may be off by 0.3 m. Waves are not touched.', // prettier-ignore
  windSpeed: 'No figure: wind sea is told from swell by the waves alone, with or without it.',
  windFrom: 'No figure: wind sea is told from swell by the waves alone, with or without it.',
}
