/** The history of an alert as a table. */
import { quantityOf } from '../../../shared/alerts/quantities.ts'
import { threeDigits } from '../../../shared/directions.ts'
import type { AlertHistory } from '../../../shared/schemas/alert.ts'
import { dateUtc, clockUtc } from '../../../shared/times.ts'
import { decimals, plusMinus } from '../../../shared/units.ts'
import type { FiguresTable } from '../station/figures/figuresTable.ts'

export function historyFigures(history: AlertHistory, name: string): FiguresTable {
  const quantity = quantityOf(history.quantity)
  const unit = quantity.unit || 'number'
  const newestFirst = [...history.points].reverse()
  return {
    of: name.toLowerCase(),
    note: `UTC, ${newestFirst.length} rows`,
    columns: [
      { heading: 'Time UTC', fileHeading: 'time' },
      { heading: `${name}, ${unit}`, isNumber: true },
      { heading: '±', isNumber: true, fileHeading: 'standard deviation' },
    ],
    rows: newestFirst.map(({ at, value, sd }) => [
      `${dateUtc(Date.parse(at))} ${clockUtc(Date.parse(at))}`,
      quantity.isCircular ? `from ${threeDigits(value)} T` : decimals(value * quantity.toUnit, quantity.decimals),
      sd === null ? 'not known' : plusMinus(sd * quantity.toUnit, quantity.decimals),
    ]),
    fileRows: newestFirst.map(({ at, value, sd }) => [
      at,
      value * quantity.toUnit,
      sd === null ? null : sd * quantity.toUnit,
    ]),
  }
}
