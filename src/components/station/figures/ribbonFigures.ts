/** The bearing ribbon as a table: every 20 minutes on the page, every window in the file. */
import { opposite, threeDigits } from '../../../../shared/directions.ts'
import type { SeriesPoint } from '../../../../shared/schemas/station.ts'
import { momentUtc } from '../../../../shared/times.ts'
import { decimals, heightPlaces, noValue } from '../../../../shared/units.ts'
import { qualityWord } from '../../drawings/geometry/qualityWord.ts'
import type { FiguresTable } from './figuresTable.ts'

const noDirection = 'no direction'
const stepMs = 20 * 60_000

/** Points rising in time; `nowMs` server time. */
export function ribbonFigures(points: readonly SeriesPoint[], nowMs: number): FiguresTable {
  const newestFirst = [...points].reverse()
  const shown = everyStep(newestFirst)
  return {
    of: 'bearing ribbon',
    note: `UTC, every 20 min, ${shown.length} rows; the copy has all ${points.length} windows`,
    columns: [
      { heading: 'Window end', fileHeading: 'window_end_utc' },
      { heading: 'From T', fileHeading: 'sea_surface_wave_from_direction_degree' },
      { heading: 'Toward T', fileHeading: 'sea_surface_wave_to_direction_degree' },
      { heading: 'Spread', isNumber: true, fileHeading: 'directional_spread_degree' },
      { heading: 'Speed m/s', isNumber: true, fileHeading: 'wave_speed_m_s-1' },
      { heading: 'System H m', isNumber: true, fileHeading: 'system_significant_height_m' },
      { heading: 'All H m', isNumber: true, fileHeading: 'sea_surface_wave_significant_height_m' },
      { heading: 'Tp s', isNumber: true, fileHeading: 'peak_period_s' },
      { heading: 'Quality', fileHeading: 'qartod_flag' },
    ],
    rows: shown.map((point) => [
      momentUtc(Date.parse(point.at), nowMs),
      point.toward === null ? noDirection : threeDigits(opposite(point.toward)),
      point.toward === null ? noDirection : threeDigits(point.toward),
      point.spread === null ? noValue : `${decimals(point.spread, 0)}°`,
      decimals(point.speed, 1),
      decimals(point.height, heightPlaces(point.height)),
      decimals(point.significantWaveHeight, heightPlaces(point.significantWaveHeight)),
      decimals(point.period, 1),
      qualityWord(point.qualityFlag),
    ]),
    fileRows: newestFirst.map((point) => [
      point.at,
      point.toward === null ? null : opposite(point.toward),
      point.toward,
      point.spread,
      point.speed,
      point.height,
      point.significantWaveHeight,
      point.period,
      point.qualityFlag,
    ]),
  }
}

/** The newest point, and from then on one at least 20 minutes older than the one before. */
function everyStep(newestFirst: readonly SeriesPoint[]): SeriesPoint[] {
  const kept: SeriesPoint[] = []
  let last = Infinity
  for (const point of newestFirst) {
    const at = Date.parse(point.at)
    if (last - at < stepMs) continue
    kept.push(point)
    last = at
  }
  return kept
}
