/**
 * Linear waves over a level bed: ω² = g k tanh(k h).
 * Sources: Hunt 1979 (J. Waterway Port Coastal Ocean Div. ASCE 105) for the first guess; Dean & Dalrymple 1991, ch. 3-4.
 */

/** Standard gravity used where a station names none, m/s². */
export const standardGravity = 9.81

function positive(value: number, name: string): void {
  if (!(value > 0)) throw new RangeError(`${name} must be above zero, not ${value}`)
}

/**
 * Wave number in rad/m for an angular frequency in rad/s and a still water depth in m. Hunt's rational form is
 * within 0.2 %; two Newton steps bring it to rounding. A zero frequency has the wave number zero.
 * Errors: RangeError when depth or gravity is not above zero or the frequency is negative.
 */
export function waveNumber(angularFrequency: number, depth: number, gravity = standardGravity): number {
  positive(depth, 'depth')
  positive(gravity, 'gravity')
  if (!(angularFrequency >= 0)) throw new RangeError(`angular frequency must not be negative: ${angularFrequency}`)
  if (angularFrequency === 0) return 0
  const y = (angularFrequency * angularFrequency * depth) / gravity
  if (y > 40) return (angularFrequency * angularFrequency) / gravity
  const rational =
    1 +
    y *
      (0.6666666667 +
        y * (0.3555555556 + y * (0.1608465608 + y * (0.0632098765 + y * (0.0217540484 + y * 0.0065407983)))))
  let x = Math.sqrt(y * y + y / rational)
  for (let step = 0; step < 2; step++) {
    const t = Math.tanh(x)
    x -= (x * t - y) / (t + x * (1 - t * t))
  }
  return x / depth
}

/** Phase speed ω/k in m/s of a wave of the given period, s. Errors: RangeError for a period not above zero. */
export function phaseSpeed(period: number, depth: number, gravity = standardGravity): number {
  positive(period, 'period')
  const omega = (2 * Math.PI) / period
  return omega / waveNumber(omega, depth, gravity)
}

/** n = C_g / c = ½ (1 + 2kh / sinh 2kh): 1 in shallow, ½ in deep water. */
export function groupRatio(wavenumber: number, depth: number): number {
  const twoKh = 2 * wavenumber * depth
  if (twoKh < 1e-6) return 1
  return twoKh > 80 ? 0.5 : 0.5 * (1 + twoKh / Math.sinh(twoKh))
}

/** Group speed in m/s of a wave of the given period. */
export function groupSpeed(period: number, depth: number, gravity = standardGravity): number {
  const omega = (2 * Math.PI) / period
  return phaseSpeed(period, depth, gravity) * groupRatio(waveNumber(omega, depth, gravity), depth)
}

/**
 * Pressure response K_p = cosh(k z) / cosh(k h) at z metres above the bed: dynamic pressure there as a share of
 * ρ g times the surface height. 0 to 1.
 */
export function pressureResponse(wavenumber: number, depth: number, heightAboveBed: number): number {
  positive(depth, 'depth')
  const kz = wavenumber * Math.min(heightAboveBed, depth)
  const kh = wavenumber * depth
  return Math.exp(kz - kh) * ((1 + Math.exp(-2 * kz)) / (1 + Math.exp(-2 * kh)))
}
