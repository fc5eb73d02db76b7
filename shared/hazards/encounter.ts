/**
 * The period at which a vessel meets a system: ω_e = ω − k V cos μ, μ the angle between the vessel's course and the way the waves go
 * (0 following, π head). Linear theory at the depth given. In a following sea the vessel may be overtaken by the waves, run with them, or
 * overtake them itself.
 */
import { standardGravity, waveNumber } from '../waves/dispersion.ts'
import { check, determined, input, undetermined } from './figure.ts'
import type { Figure, FigureFrame } from './figure.ts'
import { wrap } from './refraction.ts'
import { propagate } from './uncertain.ts'
import type { Uncertain } from './uncertain.ts'

export type Meeting =
  'meets the waves' | 'beam sea' | 'overtaken by the waves' | 'runs with the waves' | 'overtakes the waves'

export interface Encounter {
  /** s */
  period: Figure
  meeting: Meeting
  /** Between course and the way the waves go, rad, 0 following to π head. */
  angle: number
  /** m */
  waveLength: number
  /** Of the crests past the vessel along its course, m/s: c / cos μ − V; null with the sea abeam. */
  relativeSpeed: number | null
}

export interface VesselCourse {
  /** m/s through the water */
  speed: Uncertain
  /** rad from east */
  course: number
}

/** Within this of the crests' own speed along the course the vessel runs with them: no period can be told. */
const runsWithShare = 0.1
/** Within this of abeam, rad. */
const beamAngle = Math.PI / 18

function encounterFrequency(
  period: number,
  depth: number,
  speed: number,
  angle: number,
  gravity = standardGravity,
): number {
  const omega = (2 * Math.PI) / period
  return omega - waveNumber(omega, depth, gravity) * speed * Math.cos(angle)
}

/** @param heading the way the waves go, rad from east; `depth` of still water, m */
export function encounter(wavePeriod: Uncertain, heading: Uncertain, depth: number, vessel: VesselCourse): Encounter {
  const omega = (2 * Math.PI) / wavePeriod.value
  const k = waveNumber(omega, depth)
  const angle = Math.abs(wrap(heading.value - vessel.course))
  const ratio = (vessel.speed.value * Math.cos(angle) * k) / omega
  const meeting = meetingOf(angle, ratio)
  const frame: FigureFrame = {
    unit: 's',
    method: {
      name: 'period of encounter',
      formula: 'T_e = 2π / |ω − k V cos μ|',
      source: 'linear theory, Doppler shift of a regular wave',
      fromMemory: false,
      assumptions: [
        'the peak period stands for the system: in a real sea a range of periods is met',
        'speed through the water, no current',
        'a calculation for guidance; what the vessel does is judged on board',
      ],
    },
    inputs: [
      input('peak period', wavePeriod.value, 's', wavePeriod.sd),
      input('angle between course and waves', angle, 'rad', heading.sd, '0 following, π head'),
      input('speed', vessel.speed.value, 'm/s', vessel.speed.sd),
      input('depth', depth, 'm', null),
    ],
    checks: [check('speed', vessel.speed.value, 'm/s', 0, 30)],
  }
  const rest = {
    ...{ meeting, angle, waveLength: (2 * Math.PI) / k },
    relativeSpeed:
      Math.abs(Math.cos(angle)) < Math.sin(beamAngle) ? null : omega / k / Math.cos(angle) - vessel.speed.value,
  }
  if (meeting === 'runs with the waves')
    return { ...rest, period: undetermined(frame, 'the vessel runs with the waves: no period of encounter') }
  const period = determined(frame, {
    value: (2 * Math.PI) / Math.abs(encounterFrequency(wavePeriod.value, depth, vessel.speed.value, angle)),
    words: meeting,
    sd: propagate([wavePeriod, { value: angle, sd: heading.sd }, vessel.speed], ([t, mu, v]) => {
      const met = t > 0 ? encounterFrequency(t, depth, v, mu) : 0
      return met === 0 ? null : (2 * Math.PI) / Math.abs(met)
    }),
    uncertaintyFrom: 'period, direction and speed, moved one standard deviation each',
  })
  return { ...rest, period }
}

function meetingOf(angle: number, ratio: number): Meeting {
  if (Math.abs(angle - Math.PI / 2) <= beamAngle) return 'beam sea'
  if (angle > Math.PI / 2) return 'meets the waves'
  if (Math.abs(ratio - 1) <= runsWithShare) return 'runs with the waves'
  return ratio < 1 ? 'overtaken by the waves' : 'overtakes the waves'
}
