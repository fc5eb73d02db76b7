/**
 * Wording to think of in following and quartering seas, after the IMO's revised guidance to the master (MSC.1/Circ.1228, 2007); bounds
 * written down from memory. Wording alone: nothing here is a limit, and no caution does not mean that there is no danger.
 */
import type { Encounter } from './encounter.ts'

export interface MasterCaution {
  key: 'surfRiding' | 'highWaveGroups' | 'synchronousRoll' | 'parametricRoll'
  words: string
  /** How it came: the condition with its numbers. */
  grounds: string
  source: string
  fromMemory: true
}

export interface Vessel {
  /** Between perpendiculars, m. */
  length: number
  /** m/s */
  speed: number
  /** Natural roll period, s; null where it is not known. */
  rollPeriod: number | null
}

export const masterCautionNote =
  'Decisions stay on board. That no caution is listed does not mean that there is no danger.'

const source = 'IMO MSC.1/Circ.1228 (2007), bounds from memory'
const knots = 1852 / 3600
/** Periods closer than this share are called nearly equal. */
const nearShare = 0.2
/** Following to quartering: within 45° of the stern. */
const followingAngle = Math.PI / 4

/** @param height significant height of the system, m */
export function masterCautions(met: Encounter, height: number, vessel: Vessel): MasterCaution[] {
  const cautions: MasterCaution[] = []
  const add = (key: MasterCaution['key'], words: string, grounds: string) =>
    cautions.push({ key, words, grounds, source, fromMemory: true })
  const isFollowing = met.angle <= followingAngle
  const inKnots = vessel.speed / knots
  const bound = (1.8 * Math.sqrt(vessel.length)) / Math.cos(met.angle)
  if (isFollowing && inKnots > bound) {
    add(
      'surfRiding',
      'Surf-riding and broaching can occur: the speed is high for this length in a following sea.',
      `${inKnots.toFixed(1)} kn against 1.8 √L / cos = ${bound.toFixed(1)} kn`,
    )
  }
  if (isFollowing && met.waveLength > 0.8 * vessel.length && height > 0.04 * vessel.length) {
    add(
      'highWaveGroups',
      'Groups of high waves can stay with the vessel.',
      `length of waves ${Math.round(met.waveLength)} m against 0.8 L, height ${height.toFixed(1)} m against 0.04 L`,
    )
  }
  const { rollPeriod } = vessel
  const { value: period } = met.period
  if (rollPeriod !== null && period !== null) {
    const near = (other: number): boolean => Math.abs(period / other - 1) <= nearShare
    const grounds = `encounter ${period.toFixed(1)} s, own roll period ${rollPeriod.toFixed(1)} s`
    if (near(rollPeriod))
      add('synchronousRoll', 'The encounter is close to the roll period: rolling can build up.', grounds)
    if (near(rollPeriod / 2) && met.meeting !== 'beam sea')
      add(
        'parametricRoll',
        'The encounter is close to half the roll period: rolling can build up in head and following seas.',
        grounds,
      )
  }
  return cautions
}
