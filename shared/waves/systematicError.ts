/**
 * What a survey and clocks of limited accuracy do to a vector: they do not average out, so they are added in quadrature. A sensor's
 * time error σ_t² = σ_clock² + (σ_position / c)² goes into the slowness as σ_t² Q⁻¹ with Q = Σ (r − r̄)(r − r̄)'.
 */
import type { ArraySensor } from './window.ts'

/** Survey by tape or total station where nothing is stated: two millimetres a metre of aperture, at most 5 cm. */
export const defaultPositionSd = (aperture: number): number => Math.min(0.05, 0.002 * aperture)
/** Clocks kept by satellite or network time where nothing is stated, s. */
export const defaultClockSd = 0.002

export interface SystematicVariance {
  direction: number
  logSpeed: number
  cross: number
}

export function systematicVariance(
  sensors: readonly ArraySensor[],
  x: Float64Array,
  y: Float64Array,
  aperture: number,
  direction: number,
  speed: number,
): SystematicVariance {
  let time = 0
  let xx = 0
  let xy = 0
  let yy = 0
  let meanX = 0
  let meanY = 0
  for (let i = 0; i < x.length; i++) {
    meanX += x[i] / x.length
    meanY += y[i] / x.length
  }
  sensors.forEach((sensor, i) => {
    const position = sensor.positionSd ?? defaultPositionSd(aperture)
    const clock = sensor.clockSd ?? defaultClockSd
    time += (clock * clock + (position / speed) ** 2) / sensors.length
    xx += (x[i] - meanX) ** 2
    xy += (x[i] - meanX) * (y[i] - meanY)
    yy += (y[i] - meanY) ** 2
  })
  const determinant = xx * yy - xy * xy
  const cxx = (time * yy) / determinant
  const cxy = (-time * xy) / determinant
  const cyy = (time * xx) / determinant
  const cos = Math.cos(direction)
  const sin = Math.sin(direction)
  const c2 = speed * speed
  return {
    direction: c2 * (sin * sin * cxx - 2 * sin * cos * cxy + cos * cos * cyy),
    logSpeed: c2 * (cos * cos * cxx + 2 * sin * cos * cxy + sin * sin * cyy),
    // d ln c = −c u·ds, dθ = c n·ds
    cross: -c2 * (-sin * cos * cxx + (cos * cos - sin * sin) * cxy + sin * cos * cyy),
  }
}
