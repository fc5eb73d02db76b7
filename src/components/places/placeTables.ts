/** The drawings of places as tables: what is shown, and what a file gets. */
import type { CsvCell } from '../../../shared/csv.ts'
import { opposite, threeDigits } from '../../../shared/directions.ts'
import { placeQuantityOf } from '../../../shared/places/quantities.ts'
import type { OutlookView, PlaceSeriesPoint } from '../../../shared/schemas/placeOutlook.ts'
import type { PlaceQuantityKey } from '../../../shared/schemas/placeQuantity.ts'
import { momentUtc } from '../../../shared/times.ts'
import { decimals, noValue } from '../../../shared/units.ts'
import { heightNumber, heightUnit } from '../../figures/shown.ts'
import { qualityWord } from '../drawings/geometry/qualityWord.ts'
import type { FiguresTable } from '../station/figures/figuresTable.ts'
import { isNonePredicted, numberOf, uncertaintyOf, unitOf } from './placeFigures.ts'

/** Every figure of an outlook. */
export function outlookTable(outlook: OutlookView, of: string): FiguresTable {
  const rows = outlook.figures.map(({ quantity, figure, qualityFlag }) => {
    const isNone = isNonePredicted(figure)
    return [
      placeQuantityOf(quantity).name,
      isNone ? 'none predicted' : figure.value === null ? noValue : numberOf(quantity, figure.value),
      unitOf(quantity),
      figure.value === null ? (figure.reason ?? '') : uncertaintyOf(quantity, figure),
      isNone ? '' : (figure.words ?? ''),
      qualityWord(qualityFlag),
    ]
  })
  return {
    of,
    note: `window to ${momentUtc(Date.parse(outlook.windowEndsAt), Date.parse(outlook.computedAt))} UTC${outlook.source ? `, from ${outlook.source.name}` : ''}`,
    columns: [
      { heading: 'Quantity' },
      { heading: 'Value', isNumber: true },
      { heading: 'Unit' },
      { heading: '± or why not' },
      { heading: 'Words' },
      { heading: 'Quality' },
    ],
    rows,
    fileRows: outlook.figures.map(({ quantity, figure, qualityFlag }): CsvCell[] => [
      quantity,
      figure.value,
      figure.unit,
      figure.sd,
      figure.words ?? figure.reason ?? '',
      qualityFlag,
    ]),
  }
}

/** Systems at the station and as they come here. */
export function systemsTable(outlook: OutlookView): FiguresTable | null {
  if (!outlook.sea) return null
  const bearing = (toward: number | null, sense: 'from' | 'toward'): string =>
    toward === null ? noValue : threeDigits(sense === 'from' ? opposite(toward) : toward)
  return {
    of: `waves at ${outlook.source?.name ?? 'the station'}`,
    note: `${heightUnit()} and degrees true; here: as carried to the place`,
    columns: [
      { heading: 'System' },
      { heading: `H ${heightUnit()}`, isNumber: true },
      { heading: 'From T', isNumber: true },
      { heading: 'Toward T', isNumber: true },
      { heading: 'Spread', isNumber: true },
      { heading: 'Tp s', isNumber: true },
      { heading: `H here ${heightUnit()}`, isNumber: true },
      { heading: 'From T here', isNumber: true },
      { heading: 'Toward T here', isNumber: true },
      { heading: 'Across', isNumber: true },
      { heading: 'Along', isNumber: true },
    ],
    rows: outlook.sea.systems.map((system) => [
      system.name,
      heightNumber(system.height, 2),
      bearing(system.toward, 'from'),
      bearing(system.toward, 'toward'),
      system.spread === null ? noValue : `${Math.round(system.spread)}°`,
      decimals(system.period, 1),
      system.notCarried ?? heightNumber(system.heightHere, 2),
      bearing(system.towardHere, 'from'),
      bearing(system.towardHere, 'toward'),
      heightNumber(system.across, 2),
      heightNumber(system.along, 2),
    ]),
  }
}

/** Quantities over 12 h, newest first. */
export function trendTable(
  of: string,
  series: readonly { quantity: PlaceQuantityKey; points: readonly PlaceSeriesPoint[] }[],
  stationName: (id: number | null) => string,
  nowMs: number,
): FiguresTable {
  const times = [...new Set(series.flatMap(({ points }) => points.map(({ at }) => at)))].sort().reverse()
  const maps = series.map(({ points }) => new Map(points.map((point) => [point.at, point])))
  const first = (at: string): PlaceSeriesPoint | undefined => maps.map((map) => map.get(at)).find(Boolean)
  return {
    of,
    note: `UTC, ${times.length} rows; what is missing has none`,
    columns: [
      { heading: 'UTC', fileHeading: 'time_utc' },
      ...series.flatMap(({ quantity }) => [
        {
          heading: `${placeQuantityOf(quantity).name} ${unitOf(quantity)}`,
          isNumber: true,
          fileHeading: `${quantity}_si`,
        },
        { heading: '± or likely', fileHeading: `${quantity}_sd` },
      ]),
      { heading: 'From station' },
      { heading: 'Quality' },
    ],
    rows: times.map((at) => [
      momentUtc(Date.parse(at), nowMs),
      ...series.flatMap(({ quantity }, n) => {
        const point = maps[n].get(at)
        if (!point || point.value === null) return [noValue, '']
        const likely = point.likelyFrom === null || point.likelyTo === null ? null : { from: point.likelyFrom, to: point.likelyTo } // prettier-ignore
        return [numberOf(quantity, point.value), uncertaintyOf(quantity, { value: point.value, sd: point.sd, likely })]
      }),
      `${stationName(first(at)?.stationId ?? null)}${first(at)?.isSubstitute ? ', stands in' : ''}`,
      qualityWord(first(at)?.qualityFlag ?? 9),
    ]),
    fileRows: times.map((at): CsvCell[] => [
      at,
      ...maps.flatMap((map): CsvCell[] => [map.get(at)?.value ?? null, map.get(at)?.sd ?? null]),
      stationName(first(at)?.stationId ?? null),
      first(at)?.qualityFlag ?? 9,
    ]),
  }
}
