/**
 * The sea as the likelihood sees it: J trains of waves, each with heading, current along its heading, depth and spread, over sensor
 * noise. R_g = Σ_j S_jg Γ_jg + N·diag(v_g). Densities S_jg are free at every frequency, so no shape of spectrum is assumed.
 */
import type { BandMatrices } from './bandMatrices.ts'

/**
 * Parameters of one train, in this order in the vector: direction (rad), current along it (m/s), ln depth, ln spread (rad), current
 * across it to the left (m/s). A current across bends the wave numbers of a spread sea one way and would turn the heading.
 */
export const parametersPerSystem = 5
export const directionAt = 0
export const currentAt = 1
export const depthAt = 2
export const spreadAt = 3
export const crossCurrentAt = 4

/** Narrowest and widest spread that is fitted, rad (2° and 75°). */
export const leastSpread = 0.035
export const greatestSpread = 1.31

/** A sensor's own error of phase, fitted or tested: a clock (s) or a path along the leading train (m). */
export interface PhaseFault {
  kind: 'clock' | 'path'
  /** Index in the frame's order. */
  sensor: number
}

/** What is known of one parameter before the record is seen. */
export interface Prior {
  mean: number
  sd: number
  /** Degrees of freedom of a Student t; Gaussian when absent. Heavy tails yield to a record that clearly says otherwise. */
  freedom?: number
}

export interface PriorTerm {
  /** ln of the prior but for a constant, its slope, and the precision that goes into the information. */
  value: number
  slope: number
  precision: number
}

/**
 * A Student t is a Gaussian whose precision falls with the distance, (ν + 1)/(ν + z²) (Lange, Little & Taylor 1989): near its mean it
 * holds a parameter that the record leaves open, far from it it lets go.
 */
export function priorTerm({ mean, sd, freedom }: Prior, parameter: number): PriorTerm {
  const off = (parameter - mean) / sd
  const weight = freedom === undefined ? 1 : (freedom + 1) / (freedom + off * off)
  return {
    value: freedom === undefined ? -0.5 * off * off : -0.5 * (freedom + 1) * Math.log1p((off * off) / freedom),
    slope: (-weight * off) / sd,
    precision: weight / (sd * sd),
  }
}

export interface SeaModel {
  bands: BandMatrices
  /** Sensor positions in the array's frame, m. */
  x: Float64Array
  y: Float64Array
  systems: number
  gravity: number
  faults: PhaseFault[]
  priors: Prior[]
  /** ln S_jg expected from the shape of the spectrum, with its wide sd; null with a single train. */
  densityPrior: { mean: Float64Array; sd: number } | null
}

/** Values of the parameters: systems × 5, then ln N, then the faults; and ln S_jg at [j·groups + g]. */
export interface SeaState {
  parameters: Float64Array
  logDensity: Float64Array
}

export const noiseIndex = (model: SeaModel): number => model.systems * parametersPerSystem
export const parameterCount = (model: SeaModel): number => noiseIndex(model) + 1 + model.faults.length

export const copyState = (state: SeaState): SeaState => ({
  parameters: state.parameters.slice(),
  logDensity: state.logDensity.slice(),
})

/** Least ln S of a train in a group, so that a density that sinks to nothing stays a number. */
export const leastLogDensity = (bands: BandMatrices, group: number): number =>
  Math.log(1e-4 * bands.density[group] + 1e-300)
