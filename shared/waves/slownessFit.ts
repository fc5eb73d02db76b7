/**
 * Slowness vector from lags: τ_ij = s·(r_j − r_i). Pair lags share their sensors' errors, so the fit is made on one arrival time a
 * sensor and the covariance is σ_t² Q⁻¹ with Q = Σ (r − r̄)(r − r̄)'; counting every pair as independent would give too small an error
 * by √(2/M).
 */

export interface PairLag {
  i: number
  j: number
  /** s, positive when j is reached later. */
  lag: number
  /** Weight, 1/s². */
  weight: number
}

export interface SlownessFit {
  /** s/m along x and y. */
  x: number
  y: number
  /** Covariance in s²/m². */
  xx: number
  xy: number
  yy: number
  /** Root mean square of lag less fit, s. */
  residual: number
}

/** Weighted least squares over all pairs. Null when the pairs do not span the plane. */
export function fitSlowness(x: ArrayLike<number>, y: ArrayLike<number>, lags: readonly PairLag[]): SlownessFit | null {
  let xx = 0
  let xy = 0
  let yy = 0
  let tx = 0
  let ty = 0
  for (const { i, j, lag, weight } of lags) {
    const bx = x[j] - x[i]
    const by = y[j] - y[i]
    xx += weight * bx * bx
    xy += weight * bx * by
    yy += weight * by * by
    tx += weight * bx * lag
    ty += weight * by * lag
  }
  const determinant = xx * yy - xy * xy
  if (!(determinant > 1e-9 * xx * yy)) return null
  const sx = (yy * tx - xy * ty) / determinant
  const sy = (xx * ty - xy * tx) / determinant
  let squares = 0
  let weights = 0
  for (const { i, j, lag, weight } of lags) {
    const off = lag - sx * (x[j] - x[i]) - sy * (y[j] - y[i])
    squares += weight * off * off
    weights += weight
  }
  const sensors = x.length
  const residual = Math.sqrt(squares / weights)
  // Pairs of sensor errors: Σ over pairs of (e_j − e_i)² = M Σ e²; M − 3 degrees of freedom are left. With three sensors what is left
  // is their closure.
  const sensorVariance = (residual * residual * (lags.length / sensors)) / Math.max(1, sensors - 3)
  const q = spreadOfSensors(x, y)
  const qDeterminant = q.xx * q.yy - q.xy * q.xy
  return {
    x: sx,
    y: sy,
    xx: (sensorVariance * q.yy) / qDeterminant,
    xy: (-sensorVariance * q.xy) / qDeterminant,
    yy: (sensorVariance * q.xx) / qDeterminant,
    residual,
  }
}

function spreadOfSensors(x: ArrayLike<number>, y: ArrayLike<number>): { xx: number; xy: number; yy: number } {
  let meanX = 0
  let meanY = 0
  for (let i = 0; i < x.length; i++) {
    meanX += x[i] / x.length
    meanY += y[i] / x.length
  }
  let xx = 0
  let xy = 0
  let yy = 0
  for (let i = 0; i < x.length; i++) {
    xx += (x[i] - meanX) ** 2
    xy += (x[i] - meanX) * (y[i] - meanY)
    yy += (y[i] - meanY) ** 2
  }
  return { xx, xy, yy }
}

/** A velocity from its slowness: c = 1/|s|, along s. The two trace speeds along the axes are no components of it. */
export function velocityOf(x: number, y: number): { speed: number; direction: number } {
  return { speed: 1 / Math.hypot(x, y), direction: Math.atan2(y, x) }
}
