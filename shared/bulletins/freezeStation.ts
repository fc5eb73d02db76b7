/** What a bulletin takes of a station, frozen at a moment. */
import { livePicture } from '../livePicture.ts'
import type { MissingFigure, StationFigure } from '../schemas/bulletin.ts'
import type { StationView } from '../schemas/station.ts'
import { clockUtc } from '../times.ts'
import { unresolvedWords } from '../unresolvedWords.ts'
import { age } from '../units.ts'
import { systemTitle } from '../waveSystemNames.ts'

const lower = (text: string): string => text.charAt(0).toLowerCase() + text.slice(1)

const missingWords = (station: StationView, nowMs: number): string => {
  const picture = livePicture(station, nowMs)
  switch (picture.kind) {
    case 'empty':
      return 'no reading was ever received'
    case 'loading':
      return 'the record is still too short'
    case 'stale': {
      const last = picture.lastGood ? `, last good ${clockUtc(Date.parse(picture.lastGood.windowEndsAt))} UTC` : ''
      return `stale ${age(picture.ageSeconds)}${last}`
    }
    case 'frozen':
      return 'parts of the array disagree, geometry doubtful'
    case 'failed':
      return 'a test of its record failed'
    default:
      return picture.estimate.reason === null
        ? 'no resolvable wave'
        : lower(unresolvedWords(picture.estimate.reason).title)
  }
}

/** `nowMs`: server time, ms since 1970 UTC. A station out of use, stale or without a vector is missing, with the reason in words. */
export function freezeStation(station: StationView, nowMs: number): StationFigure | MissingFigure {
  const missing = (reason: string): MissingFigure => ({
    ...{ kind: 'missing', subject: 'station', subjectId: station.id, name: station.name, reason },
  })
  if (station.state !== 'active') return missing(station.state === 'retired' ? 'retired' : 'under maintenance')
  const picture = livePicture(station, nowMs)
  if (picture.kind !== 'live') return missing(missingWords(station, nowMs))
  const { estimate } = picture
  const [leading] = estimate.systems
  return {
    kind: 'station',
    stationId: station.id,
    name: station.name,
    windowEndsAt: estimate.windowEndsAt,
    windowSeconds: (Date.parse(estimate.windowEndsAt) - Date.parse(estimate.windowStartsAt)) / 1000,
    revision: estimate.revision,
    qualityFlag: estimate.qualityFlag,
    system: {
      name: systemTitle(leading, estimate.systems),
      toward: leading.toward,
      towardSd: leading.headingSd,
      speed: leading.speed,
      speedSd: leading.speedSd,
      height: leading.significantWaveHeight,
      heightSd: leading.significantWaveHeightSd,
      period: leading.peakPeriod,
    },
    totalHeight: estimate.significantWaveHeight,
    totalHeightSd: estimate.significantWaveHeightSd,
    ...(station.deployment && {
      plan: {
        sensors: station.deployment.sensors.map(({ letter, east, north }) => ({ name: letter, east, north })),
        landSectors: station.landSectors,
      },
    }),
  }
}
