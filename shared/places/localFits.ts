/**
 * Coefficients of the place's own, applied to its figures: a factor on a height, and how often something was logged here at such figures.
 * What was adopted, from how many observations, stands in the figure's method.
 */
import { input } from '../hazards/figure.ts'
import { logistic } from '../hazards/logisticFit.ts'
import type { AdoptedFit, ObservationKind } from '../schemas/placeLocalFit.ts'
import { observationFields } from '../schemas/placeObservation.ts'
import type { ObservationField } from '../schemas/placeObservation.ts'
import type { OutlookContent, OutlookFigure } from '../schemas/placeOutlook.ts'
import type { PlaceKind, PlaceQuantityKey } from '../schemas/placeQuantity.ts'
import { decimals, percent } from '../units.ts'

/** Discharges span decades: their logarithm is what a log of yes and no follows. */
export const isLogarithmic = (quantity: PlaceQuantityKey): boolean => quantity === 'overtopping'
/** Below this a discharge counts as this, m³/s per m. */
const leastDischarge = 1e-9
export const predictorOf = (quantity: PlaceQuantityKey, value: number): number =>
  isLogarithmic(quantity) ? Math.log10(Math.max(leastDischarge, value)) : value

export const fieldOf = (kind: PlaceKind, observed: ObservationKind): ObservationField | null =>
  observationFields[kind].find((field) => field.kind === observed) ?? null

type Heights = Extract<AdoptedFit, { kind: 'heights' }>
type Sightings = Extract<AdoptedFit, { kind: 'sightings' }>

function scaled(one: OutlookFigure, fit: Heights): OutlookFigure {
  const { figure } = one
  if (figure.value === null) return one
  const { value: factor, standardError } = fit.factor
  const sd = figure.sd === null ? null : Math.hypot(factor * figure.sd, standardError * figure.value)
  const likely = figure.likely && { from: factor * figure.likely.from, to: factor * figure.likely.to }
  return {
    ...one,
    figure: {
      ...figure,
      ...{ value: factor * figure.value, sd, likely },
      method: {
        ...figure.method,
        name: `${figure.method.name}, times the local factor`,
        formula: `${decimals(factor, 2)} · (${figure.method.formula})`,
        assumptions: [
          ...figure.method.assumptions,
          `factor of this place fitted to ${fit.count} observations of ${fit.from.slice(0, 10)} to ${fit.to.slice(0, 10)}`,
        ],
      },
      inputs: [...figure.inputs, input('local factor', factor, '1', standardError, `${fit.count} observations`)],
    },
  }
}

function chanceOf(
  figures: OutlookFigure[],
  fit: Sightings,
  { label, predictedBy }: ObservationField,
): OutlookContent['chances'][number] {
  const value = figures.find(({ quantity }) => quantity === predictedBy)?.figure.value ?? null
  const about = { observed: fit.observed, label, count: fit.count }
  if (value === null) return { ...about, chance: null, words: 'not told: the figure it goes by is not known' }
  const x = predictorOf(predictedBy, value)
  if (x < fit.range.from || x > fit.range.to) {
    return { ...about, chance: null, words: 'not told: such figures were not among the observations' }
  }
  const chance = logistic(fit.intercept + fit.slope * x)
  return { ...about, chance, words: `logged in ${percent(chance)} of such seas, by ${fit.count} observations here` }
}

export function withLocalFits(
  figures: OutlookFigure[],
  { kind, localFits }: { kind: PlaceKind; localFits: AdoptedFit[] },
): Pick<OutlookContent, 'figures' | 'chances'> {
  let changed = figures
  const chances: OutlookContent['chances'] = []
  for (const fit of localFits) {
    const field = fieldOf(kind, fit.observed)
    if (!field) continue
    // Sightings were fitted to figures before any factor of theirs.
    if (fit.kind === 'sightings') chances.push(chanceOf(figures, fit, field))
    else changed = changed.map((one) => (one.quantity === field.predictedBy ? scaled(one, fit) : one))
  }
  return { figures: changed, chances }
}
