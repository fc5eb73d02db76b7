/**
 * Local fit: with enough logged observations predictions are compared with them, and coefficients of the place are proposed with the
 * evidence for them. A proposal is adopted by a person or not at all. Refused with the count where there are too few, where they come
 * from too few days, or where a fit cannot be told.
 */
import { fitHeights } from './heightFit.ts'
import type { HeightFit } from './heightFit.ts'
import type { LogisticRefusal } from './logisticFit.ts'
import { fitSightings } from './sightingFit.ts'
import type { SightingFit } from './sightingFit.ts'

/** Fewer observations with a prediction say nothing that would hold next season. */
export const leastObservations = 100
/** From at least so many days: a hundred sightings of one storm are one. */
export const leastDays = 10
/** Of the rarer outcome of a sighting, for each coefficient fitted (Peduzzi et al. 1996, from memory). */
export const leastOutcomesEach = 10
/** Predicted heights must reach at least this many times the smallest: one height tells no factor. */
const leastRange = 1.5
/** Stretches of time for cross-validation. */
export const foldCount = 10

export interface ObservedHeight {
  /** ms since 1970 UTC */
  at: number
  predicted: number
  observed: number
}

export interface ObservedSighting {
  at: number
  /** In the order of the predictors' names. */
  values: readonly number[]
  seen: boolean
}

export interface LocalFitRefusal {
  kind: 'refused'
  /** Words for the page. */
  reason: string
  count: number
  needed: number
  days: number
}

export type ProposalVerdict = 'better' | 'no evidence'

export interface LocalFit<Fit> {
  kind: 'fitted'
  fit: Fit
  days: number
  from: number
  to: number
  /** `better`: cross-validated gain of more than two standard errors. Only then is adopting proposed. */
  verdict: ProposalVerdict
  words: string
}

const dayMs = 86_400_000
const daysOf = (rows: readonly { at: number }[]): number => new Set(rows.map(({ at }) => Math.floor(at / dayMs))).size
const oldestFirst = <T extends { at: number }>(rows: readonly T[]): T[] => [...rows].sort((a, b) => a.at - b.at)

function tooLittle(rows: readonly { at: number }[]): LocalFitRefusal | null {
  const days = daysOf(rows)
  const refuse = (reason: string): LocalFitRefusal => ({
    kind: 'refused',
    reason,
    count: rows.length,
    needed: leastObservations,
    days,
  })
  if (rows.length < leastObservations)
    return refuse(`${rows.length} of ${leastObservations} observations that stand beside a prediction`)
  return days < leastDays ? refuse(`observations from ${days} of at least ${leastDays} days`) : null
}

export function localFitOfHeights(observations: readonly ObservedHeight[]): LocalFit<HeightFit> | LocalFitRefusal {
  const rows = oldestFirst(
    observations.filter(({ predicted, observed }) => Number.isFinite(predicted) && Number.isFinite(observed)),
  )
  const refused = tooLittle(rows)
  if (refused) return refused
  const predicted = rows.map((row) => row.predicted).sort((a, b) => a - b)
  // Between the tenth and the ninetieth per cent, so that one storm alone does not make a range.
  const [low, high] = [predicted[Math.floor(0.1 * rows.length)], predicted[Math.floor(0.9 * rows.length)]]
  const fit = high >= leastRange * low && high > 0 ? fitHeights(rows, foldCount) : null
  if (!fit) {
    const reason = 'the predicted heights are too much alike to tell a factor'
    return { kind: 'refused', reason, count: rows.length, needed: leastObservations, days: daysOf(rows) }
  }
  return fitted(rows, fit, fit.gain.isEvident)
}

export function localFitOfSightings(
  observations: readonly ObservedSighting[],
  predictors: string[],
): LocalFit<SightingFit> | LocalFitRefusal {
  const rows = oldestFirst(observations.filter(({ values }) => values.every(Number.isFinite)))
  const refused = tooLittle(rows)
  if (refused) return refused
  const seen = rows.filter((row) => row.seen).length
  const rarer = Math.min(seen, rows.length - seen)
  const needed = leastOutcomesEach * (predictors.length + 1)
  const refuse = (reason: string): LocalFitRefusal => ({
    kind: 'refused',
    reason,
    count: rows.length,
    needed: leastObservations,
    days: daysOf(rows),
  })
  if (rarer < needed) {
    const which = seen <= rows.length - seen ? 'yes' : 'no'
    return refuse(`${rarer} of at least ${needed} observations with ${which} for ${predictors.length + 1} coefficients`)
  }
  const fit = fitSightings(rows, predictors, foldCount)
  return 'refused' in fit ? refuse(refusalWords[fit.refused]) : fitted(rows, fit, fit.gain.isEvident)
}

const refusalWords: Record<LogisticRefusal, string> = {
  separated: 'yes and no do not overlap: the chance between them cannot be told',
  'does not vary': 'a prediction is the same for all observations',
  'no answer': 'the fit does not settle: predictions say the same thing, or too few sightings in a stretch of time',
}

function fitted<Fit>(rows: readonly { at: number }[], fit: Fit, isEvident: boolean): LocalFit<Fit> {
  return {
    ...{ kind: 'fitted', fit, days: daysOf(rows), from: rows[0].at, to: rows[rows.length - 1].at },
    verdict: isEvident ? 'better' : 'no evidence',
    words: isEvident
      ? 'Predicting each tenth of the time from the others, the fit is better by more than two standard errors.'
      : 'Predicting each tenth of the time from the others, the fit is not shown to be better: keep what is in force.',
  }
}
