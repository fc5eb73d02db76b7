/**
 * Honest covariance of a fit: the information says what an exact model could know; the scatter of the groups' own gradients says
 * what this sea, whose realised directions wander, allows (infinitesimal jackknife over independent frequency groups: Jaeckel 1972;
 * White 1982). The published covariance is their element-wise mean, the larger variance ruling.
 */
import { parameterCount } from './seaModel.ts'
import type { SeaFit } from './seaFit.ts'

export function sandwichCovariance(fit: SeaFit): Float64Array {
  const count = parameterCount(fit.model)
  const groups = fit.model.bands.groups
  const scatter = new Float64Array(count * count)
  const gradient = fit.evaluation.groupGradient
  for (let g = 0; g < groups; g++) {
    for (let a = 0; a < count; a++) {
      for (let b = 0; b < count; b++) scatter[a * count + b] += gradient[g * count + a] * gradient[g * count + b]
    }
  }
  const degrees = Math.max(1, groups - count)
  const half = product(count, fit.covariance, scatter)
  const full = product(count, half, fit.covariance)
  for (let n = 0; n < full.length; n++) full[n] *= groups / degrees
  return full
}

function product(n: number, a: Float64Array, b: Float64Array): Float64Array {
  const out = new Float64Array(n * n)
  for (let i = 0; i < n; i++)
    for (let k = 0; k < n; k++) for (let j = 0; j < n; j++) out[i * n + j] += a[i * n + k] * b[k * n + j]
  return out
}
