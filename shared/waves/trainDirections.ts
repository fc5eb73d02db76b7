/**
 * Directional density of the trains fitted: each train's own spectrum times its cos^{2s} spreading. Parametric: it shows what the
 * maximum-likelihood fit found, no more detail than that.
 */
import { degreesTrue } from '../directions.ts'
import type { EstimateResult } from '../schemas/estimate.ts'
import type { SeaFit } from './seaFit.ts'
import { directionAt, parametersPerSystem, spreadAt } from './seaModel.ts'
import { spreadExponent } from './spreading.ts'

/** Degrees between directions; at most so many frequencies. */
const step = 5
const mostFrequencies = 32

/** `axis` is the bearing of the frame's x axis, radians from east. Densities in m²/Hz/degree with four digits. */
export function trainDirections(fit: SeaFit, axis: number): NonNullable<EstimateResult['directionalSpectrum']> {
  const { bands, systems } = fit.model
  const directions = Array.from({ length: 360 / step }, (_, n) => n * step)
  const spreading = Array.from({ length: systems }, (_, j) => {
    const at = j * parametersPerSystem
    const toward = degreesTrue(fit.state.parameters[at + directionAt] + axis)
    const s = spreadExponent(Math.exp(fit.state.parameters[at + spreadAt]))
    const shape = directions.map((d) => Math.pow(Math.abs(Math.cos(((d - toward) * Math.PI) / 360)), 2 * s))
    const sum = shape.reduce((total, value) => total + value, 0) * step
    return shape.map((value) => value / sum)
  })
  const stride = Math.max(1, Math.ceil(bands.groups / mostFrequencies))
  const groups = Array.from({ length: Math.floor((bands.groups - 1) / stride) + 1 }, (_, n) => n * stride)
  return {
    method: 'maximum likelihood of cos-2s trains',
    converged: fit.converged,
    frequency: groups.map((g) => bands.frequency[g]),
    directions,
    density: groups.map((g) =>
      directions.map((_, d) => {
        let density = 0
        for (let j = 0; j < systems; j++)
          density += Math.exp(fit.state.logDensity[j * bands.groups + g]) * spreading[j][d]
        return Number(density.toPrecision(4))
      }),
    ),
  }
}
