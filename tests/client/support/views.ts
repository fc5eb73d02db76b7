/** Stations and estimates as the server would give them, to be changed by each test. */
import type { WaveSystem } from '../../../shared/schemas/estimate.ts'
import { usualPreferences } from '../../../shared/schemas/preferences.ts'
import type { SessionView } from '../../../shared/schemas/session.ts'
import type { CurrentEstimate, StationView } from '../../../shared/schemas/station.ts'

export const swell = (changes: Partial<WaveSystem> = {}): WaveSystem => ({
  key: 1,
  name: 'swell',
  significantWaveHeight: 2.1,
  significantWaveHeightSd: 0.1,
  peakPeriod: 12.4,
  from: 247,
  toward: 67,
  headingSd: 3,
  measuredSpeed: 11.6,
  speed: 11.4,
  speedSd: 0.3,
  linearSpeed: 11.1,
  speedRatio: 1.03,
  directionalSpread: 14,
  slownessEast: 0.081,
  slownessNorth: 0.034,
  slownessCovariance: { eastEast: 1e-6, eastNorth: 0, northNorth: 1e-6 },
  band: { from: 0.05, to: 0.12 },
  ...changes,
})

export const estimate = (changes: Partial<CurrentEstimate> = {}): CurrentEstimate => ({
  stationId: 1,
  windowStartsAt: '2026-11-12T14:10:00.000Z',
  windowEndsAt: '2026-11-12T14:30:00.000Z',
  revision: 1,
  computedAt: '2026-11-12T14:30:12.000Z',
  origin: 'live',
  resolved: true,
  reason: null,
  qualityFlag: 1,
  completeness: 1,
  significantWaveHeight: 2.4,
  significantWaveHeightSd: 0.1,
  peakPeriod: 12.4,
  meanPeriod: 8.1,
  waterDepth: 14.2,
  surgeHeight: null,
  sensorsUsed: 5,
  sensorsDeployed: 5,
  systems: [swell()],
  ...changes,
})

export const station = (changes: Partial<StationView> = {}): StationView => ({
  id: 1,
  code: 'OL',
  shortName: 'Outer Ledge',
  name: 'Outer Ledge',
  latitude: 47.4865,
  longitude: -21.0222,
  state: 'active',
  isLead: true,
  staleAfterSeconds: 900,
  sampleRate: 4,
  windowSeconds: 1200,
  hopSeconds: 60,
  landSectors: [[330, 150]],
  deployment: null,
  link: { state: 'connected', lastReadingAt: '2026-11-12T14:32:06.000Z', clockOffsetSeconds: 0, recordShare: 1 },
  estimate: estimate(),
  lastGood: estimate(),
  ...changes,
})

export const session = (changes: Partial<SessionView> = {}): SessionView => ({
  person: {
    id: 7,
    name: 'B-2',
    email: 'b2@marrowick.example',
    role: 'operator',
    team: null,
    timeZone: 'Etc/GMT-1',
  },
  readOnly: false,
  preferences: usualPreferences,
  mustEnrol: false,
  absoluteUntil: '2026-11-12T20:00:00.000Z',
  serverTime: '2026-11-12T14:32:07.000Z',
  ...changes,
})
