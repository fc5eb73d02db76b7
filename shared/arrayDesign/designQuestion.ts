/** What a station's array is asked about: the periods it is to read, and the sea by which its errors are told. */
import type { DesignQuestion } from '../schemas/stationSetUpDesign.ts'
import type { StationSettingsContent } from '../schemas/stationSettings.ts'

const usualPeriods: [number, number] = [4, 20]
/** A moderate swell: 1 m, 10 s, spread 20°, each reading sure to a centimetre. Said beside the figures. */
const usualSea = { significantWaveHeight: 1, peakPeriod: 10, directionalSpread: 20, noiseSd: 0.01 }

/** `waterDepth` in m, `sampleRate` in Hz. */
export function designQuestionOf(
  { windowSeconds, periodRange = usualPeriods, openSeaSector, landSectors, estimate }: StationSettingsContent,
  waterDepth: number,
  sampleRate: number,
): DesignQuestion {
  const [periodFrom, periodTo] = periodRange
  const peakPeriod = Math.min(periodTo, Math.max(periodFrom, usualSea.peakPeriod))
  return {
    waterDepth,
    gravity: estimate.gravity,
    periodFrom,
    periodTo,
    windowSeconds,
    sea: { ...usualSea, peakPeriod, sampleRate },
    openSeaSector: openSeaSector ?? besideLand(landSectors),
  }
}

/** With land on one side the sea is all the rest; with several pieces of land waves are asked for from all round. */
function besideLand([land, ...others]: StationSettingsContent['landSectors']): [number, number] | null {
  return land && others.length === 0 ? [land[1], land[0]] : null
}
