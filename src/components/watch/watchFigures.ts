/** The drawings of the Watch page as tables. */
import { opposite, threeDigits } from '../../../shared/directions.ts'
import type { SeriesPoint } from '../../../shared/schemas/station.ts'
import { clockUtc, momentUtc } from '../../../shared/times.ts'
import { age, decimals, heightPlaces, noValue } from '../../../shared/units.ts'
import { systemTitle } from '../../../shared/waveSystemNames.ts'
import type { SeenStation } from '../../composables/useLivePictures.ts'
import { qualityWord } from '../drawings/geometry/qualityWord.ts'
import type { FiguresTable } from '../station/figures/figuresTable.ts'
import { ribbonFigures } from '../station/figures/ribbonFigures.ts'
import { noVectorWords } from './noVectorWords.ts'

/** Every system of every station now; a station without a vector says why. */
export function planFigures(seen: readonly SeenStation[], nowMs: number): FiguresTable {
  const rows = seen.flatMap(({ station, picture }) => {
    if (picture.kind !== 'live') {
      const late = picture.kind === 'stale' ? `, stale ${age(picture.ageSeconds)}` : ''
      const words = `${noVectorWords(station, picture, nowMs).title}${late}`
      return [[station.name, words, ...new Array<string>(9).fill(noValue)]]
    }
    const { estimate } = picture
    return estimate.systems.map((system) => [
      station.name,
      systemTitle(system, estimate.systems),
      threeDigits(opposite(system.toward)),
      threeDigits(system.toward),
      String(Math.max(1, Math.round(system.headingSd))),
      decimals(system.speed, 1),
      decimals(Math.max(0.1, system.speedSd), 1),
      decimals(system.significantWaveHeight, heightPlaces(system.significantWaveHeight)),
      decimals(system.peakPeriod, 1),
      qualityWord(estimate.qualityFlag),
      momentUtc(Date.parse(estimate.windowEndsAt), nowMs),
    ])
  })
  return {
    of: 'plan',
    note: `wave velocities at ${clockUtc(nowMs)} UTC, ± is one sigma, ${rows.length} rows`,
    columns: [
      { heading: 'Station' },
      { heading: 'System' },
      { heading: 'From T' },
      { heading: 'Toward T' },
      { heading: '± °', isNumber: true },
      { heading: 'Speed m/s', isNumber: true },
      { heading: '± m/s', isNumber: true },
      { heading: 'System H m', isNumber: true },
      { heading: 'Tp s', isNumber: true },
      { heading: 'Quality' },
      { heading: 'Window end' },
    ],
    rows,
  }
}

/** The ribbons of all stations in one table, station after station. */
export function ribbonsFigures(
  seen: readonly SeenStation[],
  series: (id: number) => readonly SeriesPoint[],
  nowMs: number,
): FiguresTable {
  const tables = seen.map(({ station }) => ({ name: station.name, table: ribbonFigures(series(station.id), nowMs) }))
  const { columns } = ribbonFigures([], nowMs)
  return {
    of: 'bearing ribbons',
    note: 'UTC, last 12 h, every 20 min; the copy has every window',
    columns: [{ heading: 'Station', fileHeading: 'station' }, ...columns],
    rows: tables.flatMap(({ name, table }) => table.rows.map((row) => [name, ...row])),
    fileRows: tables.flatMap(({ name, table }) => (table.fileRows ?? []).map((row) => [name, ...row])),
  }
}
