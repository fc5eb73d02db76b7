/** Cross-spectral matrices of the array in narrow groups of frequencies: what every directional step works on. */
import type { FineSpectra } from './recordSpectra.ts'

export interface BandMatrices {
  sensors: number
  groups: number
  /** Energy-weighted middle of each group, Hz. */
  frequency: Float64Array
  /** Hz. */
  width: Float64Array
  /** Independent averages in each group. */
  averages: Float64Array
  /** C_mn = ⟨X_m X_n*⟩, sensors² numbers a group, row by row: real and imaginary parts. Surface metres²/Hz. */
  real: Float64Array
  imag: Float64Array
  /** Mean of the diagonal. */
  density: Float64Array
  /** Noise density of each sensor in each group, m²/Hz, as the floor above the waves says. */
  noise: Float64Array
}

/**
 * `edges` are bin numbers, group g running from edges[g] (included) to edges[g+1] (excluded). `gain[m][bin]` turns the sensor's
 * unit into surface metres; `noiseFloor[m]` is in the sensor's own unit²/Hz.
 */
export function bandMatrices(
  fine: FineSpectra,
  edges: readonly number[],
  gain: readonly Float64Array[],
  noiseFloor: readonly number[],
): BandMatrices {
  const m = fine.series.length
  const groups = Math.max(0, edges.length - 1)
  const bands: BandMatrices = {
    sensors: m,
    groups,
    frequency: new Float64Array(groups),
    width: new Float64Array(groups),
    averages: new Float64Array(groups),
    real: new Float64Array(groups * m * m),
    imag: new Float64Array(groups * m * m),
    density: new Float64Array(groups),
    noise: new Float64Array(groups * m),
  }
  for (let g = 0; g < groups; g++) {
    const at = g * m * m
    let energy = 0
    let moment = 0
    const bins = edges[g + 1] - edges[g]
    for (let bin = edges[g]; bin < edges[g + 1]; bin++) {
      let here = 0
      for (let i = 0; i < m; i++) {
        const gi = gain[i][bin]
        const xr = fine.series[i][2 * bin] * gi
        const xi = fine.series[i][2 * bin + 1] * gi
        here += xr * xr + xi * xi
        bands.noise[g * m + i] += (noiseFloor[i] * gi * gi) / bins
        for (let j = 0; j <= i; j++) {
          const yr = fine.series[j][2 * bin] * gain[j][bin]
          const yi = fine.series[j][2 * bin + 1] * gain[j][bin]
          bands.real[at + i * m + j] += xr * yr + xi * yi
          bands.imag[at + i * m + j] += xi * yr - xr * yi
        }
      }
      energy += here
      moment += here * (fine.first + bin * fine.step)
    }
    for (let i = 0; i < m; i++) {
      for (let j = 0; j <= i; j++) {
        bands.real[at + i * m + j] /= bins
        bands.imag[at + i * m + j] /= bins
        bands.real[at + j * m + i] = bands.real[at + i * m + j]
        bands.imag[at + j * m + i] = -bands.imag[at + i * m + j]
      }
    }
    bands.density[g] = energy / (m * bins)
    bands.frequency[g] = energy > 0 ? moment / energy : fine.first + 0.5 * (edges[g] + edges[g + 1] - 1) * fine.step
    bands.width[g] = bins * fine.step
    bands.averages[g] = Math.max(1, bins * fine.averagesPerBin)
  }
  return bands
}

/** The groups from `from` to `to` (excluded) alone, sharing no memory with the whole. */
export function selectGroups(bands: BandMatrices, from: number, to: number): BandMatrices {
  const m = bands.sensors
  return {
    sensors: m,
    groups: to - from,
    frequency: bands.frequency.slice(from, to),
    width: bands.width.slice(from, to),
    averages: bands.averages.slice(from, to),
    real: bands.real.slice(from * m * m, to * m * m),
    imag: bands.imag.slice(from * m * m, to * m * m),
    density: bands.density.slice(from, to),
    noise: bands.noise.slice(from * m, to * m),
  }
}

/** The same groups with only some of the sensors, in the order given. */
export function selectSensors(bands: BandMatrices, kept: readonly number[]): BandMatrices {
  const m = bands.sensors
  const n = kept.length
  const real = new Float64Array(bands.groups * n * n)
  const imag = new Float64Array(bands.groups * n * n)
  const density = new Float64Array(bands.groups)
  const noise = new Float64Array(bands.groups * n)
  for (let g = 0; g < bands.groups; g++) {
    for (let i = 0; i < n; i++) {
      noise[g * n + i] = bands.noise[g * m + kept[i]]
      for (let j = 0; j < n; j++) {
        real[g * n * n + i * n + j] = bands.real[g * m * m + kept[i] * m + kept[j]]
        imag[g * n * n + i * n + j] = bands.imag[g * m * m + kept[i] * m + kept[j]]
      }
      density[g] += real[g * n * n + i * n + i] / n
    }
  }
  return { ...bands, sensors: n, real, imag, density, noise }
}

/** Mean noise density of the sensors in each group, m²/Hz. */
export function noiseDensity(bands: BandMatrices): Float64Array {
  const noise = new Float64Array(bands.groups)
  const m = bands.sensors
  for (let g = 0; g < bands.groups; g++) for (let i = 0; i < m; i++) noise[g] += bands.noise[g * m + i] / m
  return noise
}
