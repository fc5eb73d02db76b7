/**
 * Directional spreading D(θ) ∝ cos^2s(θ/2) (Longuet-Higgins, Cartwright & Smith 1963), drawn from by its inverse
 * distribution. Its first moment is m1 = s / (s + 1), so the spread √(2(1 − m1)) is √(2 / (s + 1)).
 */
const steps = 720

/** Exponent s for a spread in degrees: 12° gives 44.6, 30° gives 6.3. */
export function exponentFromSpread(spreadDegrees: number): number {
  const spread = (spreadDegrees * Math.PI) / 180
  return 2 / (spread * spread) - 1
}

/** Returns the angle off the mean direction, rad, below which a share `u` (0 to 1) of the energy lies. */
export function inverseSpreading(spreadDegrees: number): (u: number) => number {
  const exponent = 2 * exponentFromSpread(spreadDegrees)
  const reach = Math.min(Math.PI, (7 * spreadDegrees * Math.PI) / 180)
  const angles = new Float64Array(steps + 1)
  const shares = new Float64Array(steps + 1)
  for (let index = 1; index <= steps; index++) {
    angles[index] = -reach + (2 * reach * index) / steps
    const middle = angles[index] - reach / steps
    shares[index] = shares[index - 1] + Math.cos(middle / 2) ** exponent
  }
  angles[0] = -reach
  const whole = shares[steps]
  return (u) => {
    const wanted = u * whole
    let low = 0
    let high = steps
    while (high - low > 1) {
      const middle = (low + high) >> 1
      if (shares[middle] <= wanted) low = middle
      else high = middle
    }
    const width = shares[high] - shares[low]
    return angles[low] + (width > 0 ? ((wanted - shares[low]) / width) * (angles[high] - angles[low]) : 0)
  }
}
