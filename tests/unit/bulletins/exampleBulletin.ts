import type { BulletinContent, PlaceFigure, StationFigure } from '../../../shared/schemas/bulletin.ts'

const measured = { windowEndsAt: '2026-11-12T14:30:00.000Z', windowSeconds: 1200, revision: 0 }

export const outerLedge: StationFigure = {
  kind: 'station',
  stationId: 1,
  name: 'Outer Ledge',
  ...measured,
  qualityFlag: 1,
  system: {
    name: 'Swell',
    toward: 67,
    towardSd: 3,
    speed: 11.4,
    speedSd: 0.3,
    height: 2.1,
    heightSd: 0.1,
    period: 12.4,
  },
  totalHeight: 2.4,
  totalHeightSd: 0.1,
}

export const entrance: PlaceFigure = {
  kind: 'place',
  placeId: 1,
  name: 'Marrowick Entrance',
  ...measured,
  qualityFlag: 1,
  quantity: 'crossSea',
  value: 1.11,
  sd: 0.09,
  likely: null,
  words: 'inbound 038° T, from the port quarter, setting to starboard',
  substitute: null,
  priority: 'high',
}

export const longArm: PlaceFigure = {
  ...entrance,
  placeId: 2,
  name: 'Long Arm walk',
  quantity: 'overtopping',
  value: 0.0012,
  sd: null,
  likely: { from: 0.0004, to: 0.0036 },
  words: null,
  priority: 'urgent',
}

export const exampleBulletin: BulletinContent = {
  marker: 'warning',
  number: '2026-316',
  portName: 'Marrowick harbour watch',
  timeZone: 'Europe/Paris',
  audience: 'Entrance and beaches',
  headline: 'Building swell, hazardous cross-sea at the entrance',
  meaning: 'Cross-sea above 1.0 m. The Long Arm walk is closed.',
  issuedAt: '2026-11-12T14:40:00.000Z',
  validFrom: '2026-11-12T15:00:00.000Z',
  validUntil: '2026-11-12T21:00:00.000Z',
  nextIssueAt: '2026-11-12T21:00:00.000Z',
  figures: [
    outerLedge,
    entrance,
    longArm,
    {
      kind: 'missing',
      subject: 'station',
      subjectId: 3,
      name: 'Pennow Bar',
      reason: 'stale 22 min, last good 14:10 UTC',
    },
  ],
  cautions: ['Single waves reach nearly twice the significant height.'],
  replaces: '2026-315',
  cancelled: null,
  isExercise: false,
  isDemonstration: true,
}
