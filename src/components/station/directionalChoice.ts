/** The directional spectrum by each of its methods, and what is said of each. */
import type { EstimateResult } from '../../../shared/schemas/estimate.ts'

export interface DirectionalByMethod {
  method: string
  frequency: number[]
  /** Toward, degrees true. */
  directions: number[]
  /** m²/Hz/degree. */
  density: number[][]
  statement: string
}

const statements: Record<string, string> = {
  conventional: 'Conventional beam: as wide as the array makes it, with its side lobes in it.',
  Capon: 'Capon’s method: sharper than the beam; it does not give the measured cross-spectra back.',
}

/** The first is the one that the estimate uses. */
export function directionalMethods(
  spectrum: NonNullable<EstimateResult['directionalSpectrum']>,
): DirectionalByMethod[] {
  const { method, converged, frequency, directions, density, beside } = spectrum
  const statement = converged
    ? `${method} has settled: the density gives the measured cross-spectra back.`
    : `${method} has not settled: some energy stands where the measured cross-spectra do not ask for it.`
  return [
    { method, frequency, directions, density, statement },
    ...beside.map((one) => ({
      method: one.method,
      frequency,
      directions: (one.hundredths[0] ?? []).map((_, d, all) => (360 * d) / all.length),
      density: one.hundredths.map((row) => row.map((share) => (share * one.highest) / 100)),
      statement: statements[one.method] ?? '',
    })),
  ]
}
