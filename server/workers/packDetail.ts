/**
 * The whole result as it is kept: deflated JSON. The spectra are rounded to four digits, far below their statistical
 * error, which makes them a fraction of the size; all other figures stay as they are.
 */
import { deflateRawSync } from 'node:zlib'
import type { EstimateResult } from '../../shared/schemas/estimate.ts'

const rounded = (value: number, digits: number): number => Number(value.toPrecision(digits))
const row = (values: number[], digits = 4): number[] => values.map((value) => rounded(value, digits))

export function packDetail(result: EstimateResult): Buffer {
  const { spectrum, directionalSpectrum } = result
  const kept: EstimateResult = {
    ...result,
    spectrum: spectrum && { ...spectrum, frequency: row(spectrum.frequency, 7), density: row(spectrum.density) },
    directionalSpectrum: directionalSpectrum && {
      ...directionalSpectrum,
      frequency: row(directionalSpectrum.frequency, 7),
      density: directionalSpectrum.density.map((densities) => row(densities)),
    },
  }
  return deflateRawSync(JSON.stringify(kept))
}
