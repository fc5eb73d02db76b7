/** Names and figures of what is known beside the array. Pure. */
import { opposite, threeDigits } from '../../../shared/directions.ts'
import type { AuxiliaryKind } from '../../../shared/schemas/stationSetUpAuxiliary.ts'
import { decimals, metres, metresPerSecond } from '../../../shared/units.ts'

export const inputWords: Record<AuxiliaryKind, string> = {
  waterLevel: 'Level of the water',
  tide: 'Tide table',
  barometer: 'Pressure of the air',
  windSpeed: 'Speed of the wind',
  windFrom: 'Direction of the wind',
}

/** Metres above datum; pascals, read as hectopascals; m/s; degrees true the wind comes from. */
export function inputFigure(kind: AuxiliaryKind, value: number): string {
  if (kind === 'barometer') return `${decimals(value / 100, 1)} hPa`
  if (kind === 'windSpeed') return metresPerSecond(value)
  if (kind === 'windFrom') return `from ${threeDigits(value)} T, toward ${threeDigits(opposite(value))} T`
  return `${metres(value, 2)} above datum`
}

/** How it is typed: its unit, and how many of the contract's unit go into one. */
export const inputUnits: Record<AuxiliaryKind, { unit: string; per: number }> = {
  waterLevel: { unit: 'm above datum', per: 1 },
  tide: { unit: 'm above datum', per: 1 },
  barometer: { unit: 'hPa', per: 100 },
  windSpeed: { unit: 'm/s', per: 1 },
  windFrom: { unit: '° T, from', per: 1 },
}
