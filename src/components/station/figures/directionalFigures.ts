/** The directional spectrum as a table: each period with its density, mean bearing and where most of it comes from. */
import { opposite, threeDigits } from '../../../../shared/directions.ts'
import { decimals } from '../../../../shared/units.ts'
import type { DirectionalByMethod } from '../directionalChoice.ts'
import type { FiguresTable } from './figuresTable.ts'

/** The file holds the whole grid, with columns of its own, the page a line a period. */
export function directionalFigures(shown: DirectionalByMethod): FiguresTable {
  const { method, frequency, directions, density } = shown
  const step = 360 / directions.length
  const lines = frequency.map((hertz, g) => {
    const row = density[g]
    const sum = row.reduce((all, value) => all + value, 0) * step
    const top = row.reduce((best, value, d) => (value > row[best] ? d : best), 0)
    return { hertz, sum, from: meanFrom(row, directions), top: opposite(directions[top]), highest: row[top] }
  })
  return {
    of: 'directional spectrum',
    note: `${method}, ${directions.length} directions; the file holds every one of them`,
    columns: [
      { heading: 'Frequency Hz', isNumber: true, fileHeading: 'wave_frequency_s-1' },
      { heading: 'Period s', isNumber: true, fileHeading: 'period_s' },
      { heading: 'Mean from T', fileHeading: 'wave_from_direction_degree' },
      { heading: 'Most from T', fileHeading: 'directional_variance_spectral_density_m2_s_degree-1' },
      { heading: 'Density m²/Hz', isNumber: true, fileHeading: 'method' },
      { heading: 'Highest m²/Hz/°', isNumber: true, fileHeading: 'toward_degree' },
    ],
    rows: lines.map(({ hertz, sum, from, top, highest }) => [
      decimals(hertz, 4),
      decimals(1 / hertz, 1),
      from === null ? 'none' : threeDigits(from),
      threeDigits(top),
      decimals(sum, 3),
      decimals(highest, 4),
    ]),
    fileRows: frequency.flatMap((hertz, g) =>
      directions.map((toward, d) => [hertz, 1 / hertz, opposite(toward), density[g][d], method, toward]),
    ),
  }
}

/** Bearing of the energy's mean vector; null where it cancels. */
function meanFrom(row: readonly number[], directions: readonly number[]): number | null {
  let east = 0
  let north = 0
  row.forEach((value, d) => {
    east += value * Math.sin((directions[d] * Math.PI) / 180)
    north += value * Math.cos((directions[d] * Math.PI) / 180)
  })
  if (Math.hypot(east, north) < 1e-12) return null
  return opposite((Math.atan2(east, north) * 180) / Math.PI)
}
