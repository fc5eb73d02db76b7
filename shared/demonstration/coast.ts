/**
 * The demonstration's invented coast as GeoJSON. It is drawn up as a survey sheet would be, in metres east and
 * north of Outer Ledge, and turned into longitude and latitude here, on the local plane (error under 1 m at this size).
 */
import type { Coast } from '../schemas/coast.ts'
import { demonstrationStations } from './stations.ts'

export type Metres = [east: number, north: number]

const metresPerDegree = 111_180
const origin = demonstrationStations[0]

export function position([east, north]: Metres): [longitude: number, latitude: number] {
  const shrink = Math.cos((origin.latitude * Math.PI) / 180)
  const rounded = (degrees: number): number => Math.round(degrees * 1e6) / 1e6
  return [
    rounded(origin.longitude + east / (metresPerDegree * shrink)),
    rounded(origin.latitude + north / metresPerDegree),
  ]
}

type Kind = Coast['features'][number]['properties']

const line = (properties: Kind, points: Metres[]): Coast['features'][number] => ({
  type: 'Feature',
  properties,
  geometry: { type: 'LineString', coordinates: points.map(position) },
})

const place = (name: string, at: Metres, labelAt: Metres): Coast['features'][number] => ({
  type: 'Feature',
  properties: { kind: 'place', name, labelAt: position(labelAt) },
  geometry: { type: 'Point', coordinates: position(at) },
})

const land = (ring: Metres[]): Coast['features'][number] => ({
  type: 'Feature',
  properties: { kind: 'land' },
  geometry: { type: 'Polygon', coordinates: [[...ring, ring[0]].map(position)] },
})

// prettier-ignore
const shore: Metres[] = [
  [-2050, 6600], [-1400, 4900], [-1035, 3930], [-865, 3425], [-680, 3085], [-425, 2780], [-35, 2575], [405, 2540], [765, 2680], [965, 2610],
  [1070, 2390], [1355, 2355], [1680, 2170], [1815, 1830], [2120, 1540], [2525, 1205], [3120, 880], [3780, 695],
  [4220, 625], [5600, 420], [7200, 330],
]
// prettier-ignore
const fiveMetres: Metres[] = [
  [-2600, 6600], [-1900, 4800], [-1405, 3425], [-1265, 3125], [-1070, 2830], [-810, 2555], [-490, 2330], [-115, 2165], [320, 2085], [550, 2045],
  [735, 1960], [895, 1840], [1040, 1715], [1180, 1595], [1340, 1510], [1605, 1400], [1900, 1210], [2250, 970],
  [2665, 710], [3170, 450], [3780, 220], [5200, -120], [7200, -420],
]
// prettier-ignore
const tenMetres: Metres[] = [
  [-3600, 6600], [-2800, 4800], [-2220, 3425], [-2025, 2955], [-1720, 2495], [-1320, 2080], [-860, 1730], [-360, 1480], [155, 1355], [480, 1275],
  [785, 1125], [1085, 920], [1385, 695], [1690, 470], [2015, 270], [2350, 115], [2665, -10], [2970, -120],
  [3255, -210], [3525, -285], [3780, -355], [5200, -740], [7200, -1180],
]

export const demonstrationCoast: Coast = {
  type: 'FeatureCollection',
  source: 'invented coast, 2026',
  features: [
    land([...shore, [7200, 6600]]),
    line({ kind: 'contour', depth: 5 }, fiveMetres),
    line({ kind: 'contour', depth: 10 }, tenMetres),
    line({ kind: 'beach', name: 'Oldcask Bay' }, [
      [-425, 2780],
      [-35, 2575],
      [405, 2540],
      [765, 2680],
    ]),
    line({ kind: 'beach', name: 'Pennow Sands' }, [
      [2120, 1540],
      [2525, 1205],
      [3120, 880],
    ]),
    line({ kind: 'mole', name: 'Long Arm' }, [
      [1815, 1830],
      [1610, 1620],
      [1280, 1680],
    ]),
    line({ kind: 'mole', name: 'West Mole' }, [
      [1070, 2405],
      [1085, 1965],
    ]),
    line({ kind: 'axis', name: 'Entrance channel', bearing: 38 }, [
      [-545, -375],
      [1180, 1830],
    ]),
    place('Oldcask Bay', [185, 2570], [575, 2930]),
    place('Entrance', [1180, 1820], [2015, 2795]),
    place('Berths 3–6', [1540, 2070], [2015, 2390]),
    place('Long Arm walk', [1610, 1620], [2015, 1930]),
    place('Pennow Sands', [2525, 1205], [2575, 1460]),
    {
      type: 'Feature',
      properties: { kind: 'name', name: 'MARROWICK' },
      geometry: { type: 'Point', coordinates: position([3150, 3240]) },
    },
  ],
}
