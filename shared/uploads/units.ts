/** Units that loggers write, to what is stored. */
import type { ReadingUnit } from '../schemas/stationSetUpUploads.ts'

/** What a column holds: a sensor's kind, or a quantity beside the array. */
export type ColumnKind = 'pressure' | 'surface' | 'waterLevel' | 'tide' | 'barometer' | 'windSpeed' | 'windFrom'

const metres: Partial<Record<ReadingUnit, number>> = { m: 1, cm: 0.01, mm: 0.001, ft: 0.3048 }
const pascals: Partial<Record<ReadingUnit, number>> = { Pa: 1, hPa: 100, mbar: 100, kPa: 1000, dbar: 1e4, bar: 1e5, psi: 6894.757293168 } // prettier-ignore
const decibars = Object.fromEntries(Object.entries(pascals).map(([unit, factor]) => [unit, factor / 1e4]))

const factors: Record<ColumnKind, Partial<Record<ReadingUnit, number>>> = {
  pressure: decibars,
  surface: metres,
  waterLevel: metres,
  tide: metres,
  barometer: pascals,
  windSpeed: { 'm/s': 1, kn: 1852 / 3600 },
  windFrom: { '°': 1 },
}

/** The unit that is stored. */
export const storedUnit: Record<ColumnKind, ReadingUnit> = {
  pressure: 'dbar',
  surface: 'm',
  waterLevel: 'm',
  tide: 'm',
  barometer: 'Pa',
  windSpeed: 'm/s',
  windFrom: '°',
}

/** What a value in this unit is multiplied by; null where the unit does not fit the kind. */
export const factorOf = (kind: ColumnKind, unit: ReadingUnit | null): number | null =>
  factors[kind][unit ?? storedUnit[kind]] ?? null

export const unitsOf = (kind: ColumnKind): string[] => Object.keys(factors[kind])
