/** An estimate as a table for a person at a terminal. */
import { bothSenses } from '../../shared/directions.ts'
import type { EstimateResult } from '../../shared/schemas/estimate.ts'

const figure = (value: number | null, digits: number, unit: string): string =>
  value === null ? '–' : `${value.toFixed(digits)} ${unit}`

const row = (name: string, text: string): string => `${name.padEnd(26)} ${text}`

/** Lines of text with a line end at the end. */
export function estimateTable(result: EstimateResult): string {
  const lines = [
    row('Answer', result.resolved ? 'resolved' : `not resolved: ${result.reason}`),
    row('Quality flag (QARTOD)', String(result.qualityFlag)),
    row(
      'Significant height H_m0',
      `${figure(result.significantWaveHeight, 2, 'm')} ± ${figure(result.significantWaveHeightSd, 2, 'm')}`,
    ),
    row('Peak period, mean period', `${figure(result.peakPeriod, 1, 's')}, ${figure(result.meanPeriod, 1, 's')}`),
    row('Energy flux', result.energyFlux === null ? '–' : `${(result.energyFlux / 1000).toFixed(1)} kW/m`),
    row('Water depth', `${result.waterDepth.toFixed(2)} m (${result.waterDepthSource})`),
  ]
  for (const system of result.systems) {
    lines.push(
      '',
      row(
        `System ${system.key}: ${system.name}`,
        `${figure(system.significantWaveHeight, 2, 'm')}, ${figure(system.peakPeriod, 1, 's')}`,
      ),
      row('  direction', `${bothSenses(system.toward)} ± ${system.headingSd.toFixed(1)}°`),
      row('  speed of the crests', `${system.speed.toFixed(2)} ± ${figure(system.speedSd, 2, 'm/s')}`),
      row(
        '  as lags say, by theory',
        `${system.measuredSpeed.toFixed(2)}, ${figure(system.linearSpeed, 2, 'm/s')}, ratio ${system.speedRatio.toFixed(3)}`,
      ),
      row('  directional spread', figure(system.directionalSpread, 0, '°')),
    )
  }
  lines.push('', 'Sensor   used  flag  complete  H_m0     findings')
  for (const s of result.sensors) {
    const height = figure(s.significantWaveHeight, 2, 'm').padEnd(7)
    lines.push(
      `${s.id.padEnd(8)} ${s.used ? 'yes ' : 'no  '}  ${s.qualityFlag}     ${`${(100 * s.completeness).toFixed(0)} %`.padEnd(8)}  ${height}  ${s.findings.join(', ')}`,
    )
  }
  if (result.traceSpeeds.length > 0) lines.push('', 'Trace speeds along pairs (never components of the vector)')
  for (const t of result.traceSpeeds) {
    lines.push(
      row(
        `  ${t.between.join('–')}, ${t.distance.toFixed(1)} m`,
        `lag ${t.lag.toFixed(3)} s, ${figure(t.speed, 1, 'm/s')}`,
      ),
    )
  }
  return `${lines.join('\n')}\n`
}
