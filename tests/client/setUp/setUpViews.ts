/** What the server would give to the pages of set-up, to be changed by each test. */
import type { DraftSensor } from '../../../shared/schemas/stationSetUpDeployments.ts'
import type { ConnectionAttempt } from '../../../shared/schemas/stationSetUpLink.ts'

export const draftSensor = (letter: string, east: number, north: number): DraftSensor => ({
  ...{ letter, serial: `S-${letter}`, kind: 'surface', position: { by: 'grid', east, north }, heightAboveBed: 10 },
  ...{ positionSd: 0.05, clockSd: 0.005, scale: 1, offset: 0, pressureKind: 'gauge' },
})

export const connection = (changes: Partial<ConnectionAttempt> = {}): ConnectionAttempt => ({
  ...{ id: 1, stationId: 4, stationCode: 'TR', keyPrefix: 'd37f', keyState: 'valid', remoteAddress: '10.0.0.7' },
  ...{ startedAt: '2026-11-12T14:30:00.000Z', endedAt: null, reached: 'streaming', closeCode: null, closeReason: null },
  ...{ trouble: null, hello: null, differences: [], frames: 12, acknowledged: 12, refusals: [], lastFrame: null },
  ...changes,
})
