/**
 * The demonstration's three stations: an invented coast in the open ocean, invented names. The seeder and the
 * simulator read the same list, as a real station's technician and the office would share a survey.
 */
export interface DemonstrationSensor {
  letter: string
  serial: string
  kind: 'pressure' | 'surface'
  /** Metres from the station's position, true north. */
  east: number
  north: number
  heightAboveBed: number
}

export interface DemonstrationStation {
  code: string
  shortName: string
  name: string
  latitude: number
  longitude: number
  /** Still water depth below datum, m. */
  waterDepth: number
  sampleRate: number
  staleAfterSeconds: number
  /** Bearings (degrees true, clockwise from first to second) from which no wave can come: land. */
  landSectors: [number, number][]
  sensors: DemonstrationSensor[]
}

const array = (
  code: string,
  kind: 'pressure' | 'surface',
  heightAboveBed: number,
  positions: [number, number][],
): DemonstrationSensor[] =>
  positions.map(([east, north], index) => ({
    letter: `${code}-${index + 1}`,
    serial: `${code}${kind === 'pressure' ? 'P' : 'S'}${String(4101 + index * 7)}`,
    kind,
    east,
    north,
    heightAboveBed,
  }))

export const demonstrationPort = { portName: 'Marrowick', timeZone: 'Etc/GMT-1' }

export const demonstrationStations: DemonstrationStation[] = [
  {
    code: 'OL',
    shortName: 'Outer Ledge',
    name: 'Outer Ledge',
    latitude: 47.4865,
    longitude: -21.0222,
    waterDepth: 14.2,
    sampleRate: 4,
    staleAfterSeconds: 900,
    landSectors: [[330, 150]],
    sensors: array('OL', 'pressure', 0.6, [
      [-40, -18],
      [-8, -30],
      [6, -14],
      [30, 34],
      [-18, 22],
    ]),
  },
  {
    code: 'FW',
    shortName: 'Fairway',
    name: 'Fairway',
    latitude: 47.4952,
    longitude: -21.0092,
    waterDepth: 11.6,
    sampleRate: 2,
    staleAfterSeconds: 900,
    landSectors: [[325, 155]],
    sensors: array('FW', 'pressure', 0.5, [
      [-16, -9],
      [14, -14],
      [-3, 20],
      [4, 2],
    ]),
  },
  {
    code: 'PB',
    shortName: 'Pennow Bar',
    name: 'Pennow Bar',
    latitude: 47.4925,
    longitude: -20.9965,
    waterDepth: 7.4,
    sampleRate: 4,
    staleAfterSeconds: 900,
    landSectors: [[310, 140]],
    sensors: array('PB', 'surface', 7.4, [
      [-7, -3],
      [2, -8],
      [8, 1],
      [3, 7],
      [-5, 6],
      [0.5, -0.5],
    ]),
  },
]
