/** A fit to logged observations in words, and its calibration as a table. Pure. */
import type { AdoptedFit, LocalFitView } from '../../../shared/schemas/placeLocalFit.ts'
import { dateUtc } from '../../../shared/times.ts'
import { decimals, plusMinus } from '../../../shared/units.ts'
import type { FiguresTable } from '../station/figures/figuresTable.ts'

type Fitted = Extract<LocalFitView['outcome'], { kind: 'fitted' }>

const day = (iso: string): string => dateUtc(Date.parse(iso)).split(' ').slice(1).join(' ')

/** What is in force: `times 1.12 ± 0.02, from 140 observations`. */
export function adoptedWords(adopted: AdoptedFit): string {
  const from = `from ${adopted.count} observations, ${day(adopted.from)} to ${day(adopted.to)}`
  return adopted.kind === 'heights'
    ? `figures times ${decimals(adopted.factor.value, 3)} ${plusMinus(adopted.factor.standardError, 3)}, ${from}`
    : `chance of a sighting by ln(p/(1−p)) = ${decimals(adopted.intercept.value, 2)} + ${decimals(adopted.slope.value, 2)} · x, ${from}`
}

/** What the fit would change, and the evidence for it. */
export function fitRows({ fit, days, from, to }: Fitted): { name: string; words: string }[] {
  const span = { name: 'Observations', words: `${fit.count} on ${days} days, ${day(from)} to ${day(to)}` }
  const gain = {
    name: 'Gain',
    words: `${decimals(fit.gain.mean, 4)} ${plusMinus(fit.gain.standardError, 4)} (${fit.gain.isEvident ? 'more than two standard errors' : 'no evidence'})`,
  }
  if (fit.kind === 'heights') {
    const { asPredicted, crossValidated, factor } = fit
    return [
      span,
      {
        name: 'As figured now',
        words: `bias ${decimals(asPredicted.bias, 2)} m, error ${decimals(asPredicted.rmse, 2)} m`,
      },
      { name: 'Factor', words: `${decimals(factor.value, 3)} ${plusMinus(factor.standardError, 3)}` },
      {
        name: 'With it, each tenth from the others',
        words: `bias ${decimals(crossValidated.bias, 2)} m, error ${decimals(crossValidated.rmse, 2)} m`,
      },
      gain,
    ]
  }
  return [
    span,
    { name: 'Seen', words: `${fit.seen} of ${fit.count}` },
    { name: 'Intercept', words: `${decimals(fit.intercept.value, 2)} ${plusMinus(fit.intercept.standardError, 2)}` },
    ...fit.coefficients.map(({ value, standardError }) => ({
      name: 'Slope',
      words: `${decimals(value, 2)} ${plusMinus(standardError, 2)}`,
    })),
    {
      name: 'Log loss, without and with it',
      words: `${decimals(fit.withoutPrediction.logLoss, 3)}, ${decimals(fit.crossValidated.logLoss, 3)}`,
    },
    gain,
  ]
}

export const binsOf = ({ fit }: Fitted) => (fit.kind === 'heights' ? fit.bins : fit.calibration)

export function calibrationTable(label: string, fitted: Fitted): FiguresTable {
  return {
    of: `calibration, ${label.toLowerCase()}`,
    note: fitted.fit.kind === 'heights' ? 'metres' : 'chances and shares, each tenth of the time from the others',
    columns: [
      { heading: 'Observations', isNumber: true },
      { heading: 'Figured', isNumber: true },
      { heading: 'Seen', isNumber: true },
      { heading: '± of the mean', isNumber: true },
    ],
    rows: binsOf(fitted).map(({ count, meanPredicted, meanObserved, standardError }) => [
      String(count),
      decimals(meanPredicted, 3),
      decimals(meanObserved, 3),
      decimals(standardError, 3),
    ]),
  }
}
