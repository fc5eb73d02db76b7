/** What the plan of the coast draws of a station: nothing but its place and words once its figures are old. */
import { livePicture } from '../../../../shared/livePicture.ts'
import type { StationView } from '../../../../shared/schemas/station.ts'
import { momentUtc } from '../../../../shared/times.ts'
import { age, heightPlaces } from '../../../../shared/units.ts'
import { heightWords, speedWords } from '../../../figures/shown.ts'
import { systemSign, systemTitle } from '../../../../shared/waveSystemNames.ts'
import type { SystemSign } from '../../../../shared/waveSystemNames.ts'

export interface PlanVector {
  key: number
  sign: SystemSign
  toward: number
  speed: number
  headingSd: number
  speedSd: number
}

export interface PlanStation {
  id: number
  code: string
  name: string
  latitude: number
  longitude: number
  isStale: boolean
  /** Second line of the label. */
  words: string
  /** Leading system first; empty unless live. */
  vectors: PlanVector[]
  /** Crest spacing of the leading system, m. */
  spacing: number | null
}

export function planStation(station: StationView, nowMs: number): PlanStation {
  const picture = livePicture(station, nowMs)
  const place = {
    id: station.id,
    code: station.code,
    name: station.shortName,
    latitude: station.latitude,
    longitude: station.longitude,
    isStale: picture.kind === 'stale',
  }
  if (picture.kind !== 'live') return { ...place, words: wordsFor(picture, nowMs), vectors: [], spacing: null }
  const { systems } = picture.estimate
  const lead = systems[0]
  const height = lead.significantWaveHeight
  const name = systemTitle(lead, systems).toLowerCase()
  const doubt = picture.isSuspect ? ', Suspect' : ''
  return {
    ...place,
    words: `${name} ${heightWords(height, heightPlaces(height))}, ${speedWords(lead.speed)}${doubt}`,
    spacing: lead.speed * lead.peakPeriod,
    vectors: systems.map((system) => ({
      key: system.key,
      sign: systemSign(system, systems),
      toward: system.toward,
      speed: system.speed,
      headingSd: system.headingSd,
      speedSd: system.speedSd,
    })),
  }
}

function wordsFor(picture: Exclude<ReturnType<typeof livePicture>, { kind: 'live' }>, nowMs: number): string {
  switch (picture.kind) {
    case 'stale': {
      const last = picture.lastGood
      const lastWords = last ? `, last ${momentUtc(Date.parse(last.windowEndsAt), nowMs)}` : ', no good figure before'
      return `stale ${age(picture.ageSeconds)}${lastWords}`
    }
    case 'unresolved':
      return picture.estimate.reason === 'no-resolvable-wave' ? 'no resolvable wave' : 'no vector'
    case 'frozen':
      return 'frozen: geometry doubtful'
    case 'failed':
      return 'failed, figures withdrawn'
    case 'loading':
      return 'record too short yet'
    case 'empty':
      return 'nothing received yet'
  }
}
