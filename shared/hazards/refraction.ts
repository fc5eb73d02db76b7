/**
 * Snell's law over straight parallel contours: sin α / c stays the same, H = H₁ √(C_g1/C_g2) √(cos α₁/cos α₂)
 * (CEM EM 1110-2-1100, 2002, II-3-12 to 14). α is the angle of travel against the onshore normal, rad, positive anticlockwise.
 */
import { groupSpeed, phaseSpeed, standardGravity } from '../waves/dispersion.ts'

export interface Refracted {
  /** rad, of the same sign as before. */
  angle: number
  /** √(C_g1/C_g2), √(cos α₁/cos α₂) and their product. */
  shoaling: number
  refraction: number
  heightRatio: number
  /** How much a small difference of direction before becomes one after: dα₂/dα₁. */
  turning: number
  /** m/s */
  phaseSpeed: number
  groupSpeed: number
}

export interface Refused {
  refused: string
}

export const isRefused = (answer: object): answer is Refused => 'refused' in answer

/** Into −π to π. */
export const wrap = (angle: number): number => Math.atan2(Math.sin(angle), Math.cos(angle))

/**
 * Angle of a heading against the onshore normal, rad. `seaward` is the shore normal pointing out to sea; both rad from east. Beyond π/2
 * the waves run away from the shore.
 */
export const incidenceAngle = (heading: number, seaward: number): number => wrap(heading - seaward - Math.PI)

/** The heading that has this angle against the onshore normal. */
export const headingOf = (angle: number, seaward: number): number => wrap(angle + seaward + Math.PI)

/**
 * From one depth (m) to another. Refused for waves that run along or away from the shore, and where they are turned back before they
 * reach deeper water (caustic).
 */
export function refract(
  angle: number,
  period: number,
  from: number,
  to: number,
  gravity = standardGravity,
): Refracted | Refused {
  if (!(from > 0)) return { refused: 'no water where the waves are measured' }
  if (!(to > 0)) return { refused: 'dry at this depth' }
  if (!(period > 0)) return { refused: 'no period' }
  if (Math.abs(angle) >= Math.PI / 2) return { refused: 'the waves run along or away from the shore' }
  const before = phaseSpeed(period, from, gravity)
  const after = phaseSpeed(period, to, gravity)
  const sine = (Math.sin(angle) * after) / before
  if (Math.abs(sine) >= 1) return { refused: 'the waves are turned back before they reach this depth' }
  const turned = Math.asin(sine)
  const speed = groupSpeed(period, to, gravity)
  const shoaling = Math.sqrt(groupSpeed(period, from, gravity) / speed)
  const refraction = Math.sqrt(Math.cos(angle) / Math.cos(turned))
  return {
    angle: turned,
    shoaling,
    refraction,
    heightRatio: shoaling * refraction,
    turning: (after * Math.cos(angle)) / (before * Math.cos(turned)),
    phaseSpeed: after,
    groupSpeed: speed,
  }
}
