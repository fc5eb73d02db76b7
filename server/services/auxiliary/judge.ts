/** The quality of a value that came without one, by its range: what cannot be is failed, what is rare is suspect. */
import type { AuxiliaryKind } from '../../../shared/schemas/stationSetUpAuxiliary.ts'

/** Least and most that can be, and that is usual. */
const ranges: Record<AuxiliaryKind, { can: [number, number]; usual: [number, number] }> = {
  waterLevel: { can: [-15, 25], usual: [-8, 18] },
  tide: { can: [-15, 25], usual: [-8, 18] },
  // Sea level pressures on record lie between 870 and 1085 hPa [M].
  barometer: { can: [85_000, 110_000], usual: [92_000, 106_000] },
  windSpeed: { can: [0, 120], usual: [0, 45] },
  windFrom: { can: [0, 360], usual: [0, 360] },
}

const isIn = (value: number, [least, most]: [number, number]): boolean => value >= least && value <= most

/** QARTOD flag of the gross range test: 1 good, 3 suspect, 4 fail. */
export function flagOf(kind: AuxiliaryKind, value: number): 1 | 3 | 4 {
  const { can, usual } = ranges[kind]
  if (!Number.isFinite(value) || !isIn(value, can)) return 4
  return isIn(value, usual) ? 1 : 3
}
