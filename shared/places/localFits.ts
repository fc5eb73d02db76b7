/**
 * Coefficients of the place's own, applied to its figures: a factor on a height, and how often something was logged here at such figures.
 * What was adopted, from how many observations, stands in the figure's method.
 */
import { localChance, withLocalFactor } from '../hazards/localFigures.ts'
import type { AdoptedFit, ObservationKind } from '../schemas/placeLocalFit.ts'
import { observationFields } from '../schemas/placeObservation.ts'
import type { ObservationField } from '../schemas/placeObservation.ts'
import type { OutlookContent, OutlookFigure } from '../schemas/placeOutlook.ts'
import type { PlaceKind, PlaceQuantityKey } from '../schemas/placeQuantity.ts'
import { placeQuantityOf } from './quantities.ts'

/** Discharges span decades: their logarithm is what a log of yes and no follows. */
export const isLogarithmic = (quantity: PlaceQuantityKey): boolean => quantity === 'overtopping'
/** Below this a discharge counts as this, m³/s per m. */
const leastDischarge = 1e-9
export const predictorOf = (quantity: PlaceQuantityKey, value: number): number =>
  isLogarithmic(quantity) ? Math.log10(Math.max(leastDischarge, value)) : value

export const fieldOf = (kind: PlaceKind, observed: ObservationKind): ObservationField | null =>
  observationFields[kind].find((field) => field.kind === observed) ?? null

type Sightings = Extract<AdoptedFit, { kind: 'sightings' }>

function chanceOf(
  figures: OutlookFigure[],
  { intercept, slope, covariance, count, range, observed }: Sightings,
  { label, predictedBy }: ObservationField,
): OutlookContent['chances'][number] {
  const { value = null, sd = null } = figures.find(({ quantity }) => quantity === predictedBy)?.figure ?? {}
  const { name } = placeQuantityOf(predictedBy)
  const adopted = {
    predictors: [isLogarithmic(predictedBy) ? `logarithm of ${name.toLowerCase()}` : name],
    ...{ intercept, coefficients: [slope], covariance, count, observedRange: [range] },
  }
  // A discharge has a likely band, not ±: its logarithm is taken as it stands.
  const x = value === null ? null : { value: predictorOf(predictedBy, value), sd: isLogarithmic(predictedBy) ? 0 : sd }
  return { observed, label, count, figure: localChance(adopted, [x]) }
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
    else {
      const factor = { ...fit.factor, count: fit.count }
      changed = changed.map((one) =>
        one.quantity === field.predictedBy ? { ...one, figure: withLocalFactor(one.figure, factor) } : one,
      )
    }
  }
  return { figures: changed, chances }
}
