/** Figures of the whole sea beside height and period: single waves, energy, cut-off and tail, surge. */
import type { EstimateResult } from '../../../shared/schemas/estimate.ts'
import { decimals, heightPlaces, seconds } from '../../../shared/units.ts'
import { heightWords } from '../../figures/shown.ts'

export interface SeaFigure {
  name: string
  help: string
  figure: string
}

/** Fewer waves than this say little of the highest third (IAHR list of sea-state parameters). */
const enoughWaves = 100

/** What is not known has no line. */
export function seaFigures({ waveByWave, energyFlux, spectrum, surgeHeight }: EstimateResult): SeaFigure[] {
  const rows: SeaFigure[] = []
  if (waveByWave) {
    const { significantHeight, greatestHeight, greatestAt, meanPeriod, waves } = waveByWave
    const count = Math.round(waves)
    const few = count < enoughWaves ? `, few: ${enoughWaves} are wanted` : ''
    const places = heightPlaces(significantHeight)
    rows.push(
      { name: 'H 1/3', help: `of ${count} waves${few}`, figure: heightWords(significantHeight, places) },
      { name: 'Highest wave', help: `at ${greatestAt}`, figure: heightWords(greatestHeight, places) },
      { name: 'T z', help: 'between up-crossings', figure: seconds(meanPeriod) },
    )
  }
  if (energyFlux !== null)
    rows.push({ name: 'Energy flux', help: 'per metre of crest', figure: `${decimals(energyFlux / 1000, 1)} kW/m` })
  if (spectrum) {
    const { cutoff, tail } = spectrum
    rows.push({ name: 'Cut-off', help: 'no energy claimed above', figure: `${decimals(cutoff, 2)} Hz` })
    if (tail) {
      const places = heightPlaces(tail.significantWaveHeight)
      rows.push({
        name: 'With a tail',
        help: `f${superscript(tail.exponent)} above the cut-off, not in H m0`,
        figure: heightWords(tail.significantWaveHeight, places),
      })
    }
  }
  if (surgeHeight !== null)
    rows.push({ name: 'Surge', help: '0.004 to 0.04 Hz, one hour', figure: heightWords(surgeHeight, 2) })
  return rows
}

const superscript = (exponent: number): string => (exponent === -4 ? '⁻⁴' : ` to the power ${exponent}`)
