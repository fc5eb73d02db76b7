/** The drawings of the Watch page as tables. */
import { opposite, threeDigits } from '../../../shared/directions.ts'
import { qualityWord } from '../drawings/geometry/qualityWord.ts'
import type { SeriesPoint } from '../../../shared/schemas/station.ts'
import { momentUtc } from '../../../shared/times.ts'
import { age, decimals, heightPlaces } from '../../../shared/units.ts'
import { systemTitle } from '../../../shared/waveSystemNames.ts'
import type { SeenStation } from '../../composables/useLivePictures.ts'
import type { Figures } from '../frame/figures.ts'
import { noVectorWords } from './noVectorWords.ts'

const directed = (toward: number | null): [string, string] =>
  toward === null ? ['none', 'none'] : [threeDigits(opposite(toward)), threeDigits(toward)]

/** Every system of every station now; a station without a vector says why. */
export function planFigures(seen: readonly SeenStation[], nowMs: number): Figures {
  return {
    caption: 'Wave velocities now',
    columns: [
      { title: 'Station' },
      { title: 'System' },
      { title: 'From T' },
      { title: 'Toward T' },
      { title: '± °', numeric: true },
      { title: 'Speed m/s', numeric: true },
      { title: '±', numeric: true },
      { title: 'H m0 m', numeric: true },
      { title: 'T p s', numeric: true },
      { title: 'Quality' },
      { title: 'Window ends UTC' },
    ],
    rows: seen.flatMap(({ station, picture }) => {
      if (picture.kind !== 'live') {
        const { title } = noVectorWords(station, picture, nowMs)
        const late = picture.kind === 'stale' ? `, ${age(picture.ageSeconds)} old` : ''
        return [
          [station.name, `${title}${late}`, 'none', 'none', 'none', 'none', 'none', 'none', 'none', 'none', 'none'],
        ]
      }
      const { estimate } = picture
      return estimate.systems.map((system) => [
        station.name,
        systemTitle(system, estimate.systems),
        ...directed(system.toward),
        String(Math.max(1, Math.round(system.headingSd))),
        decimals(system.speed, 1),
        decimals(Math.max(0.1, system.speedSd), 1),
        decimals(system.significantWaveHeight, heightPlaces(system.significantWaveHeight)),
        decimals(system.peakPeriod, 1),
        qualityWord(estimate.qualityFlag),
        momentUtc(Date.parse(estimate.windowEndsAt), nowMs),
      ])
    }),
  }
}

/** The ribbons' points, newest first, station after station. */
export function ribbonFigures(
  seen: readonly SeenStation[],
  series: (id: number) => readonly SeriesPoint[],
  nowMs: number,
): Figures {
  return {
    caption: 'Leading systems, last 12 h',
    columns: [
      { title: 'Station' },
      { title: 'Window ends UTC' },
      { title: 'From T' },
      { title: 'Toward T' },
      { title: 'H m0 m', numeric: true },
      { title: 'T p s', numeric: true },
      { title: 'Speed m/s', numeric: true },
      { title: 'Spread °', numeric: true },
      { title: 'Quality' },
    ],
    rows: seen.flatMap(({ station }) =>
      [...series(station.id)]
        .reverse()
        .map((point) => [
          station.name,
          momentUtc(Date.parse(point.at), nowMs),
          ...directed(point.toward),
          decimals(point.height, heightPlaces(point.height)),
          decimals(point.period, 1),
          decimals(point.speed, 1),
          decimals(point.spread, 0),
          point.resolved ? qualityWord(point.qualityFlag) : `${qualityWord(point.qualityFlag)}, no vector`,
        ]),
    ),
  }
}
