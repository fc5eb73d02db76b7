/** Local fits of a place: computed when asked for, adopted by an administrator as a new version of its settings. */
import { localFitOfHeights, localFitOfSightings } from '../../../shared/hazards/localFit.ts'
import { fieldOf, isLogarithmic, predictorOf } from '../../../shared/places/localFits.ts'
import type { AdoptedFit, LocalFitAdoption, LocalFitView } from '../../../shared/schemas/placeLocalFit.ts'
import { isSighting, observationFields } from '../../../shared/schemas/placeObservation.ts'
import type { ObservationField } from '../../../shared/schemas/placeObservation.ts'
import { placeQuantityOf } from '../../../shared/places/quantities.ts'
import type { PlaceSettingsVersion } from '../../../shared/schemas/place.ts'
import type { PlaceKind, PlaceQuantityKey } from '../../../shared/schemas/placeQuantity.ts'
import type { Parts } from '../../config/parts.ts'
import { changePlaceSettings, listPlaceSettings, readPlace } from '../places.ts'
import type { PlaceOrder } from '../places.ts'
import { invalidInput, Refused } from '../problems.ts'
import { pairsOf } from './pairs.ts'

type Fitting = Pick<Parts, 'bus' | 'clock' | 'sequelize'>

/** A factor in force is in the stored figures: it is taken out again, so that a fit is of the bare prediction. */
function factorIn(versions: PlaceSettingsVersion[], settingsId: number | null, quantity: PlaceQuantityKey): number {
  const content = versions.find(({ id }) => id === settingsId)?.content
  const fit = content?.localFits.find(
    (one) => one.kind === 'heights' && fieldOf(content.kind, one.observed)?.predictedBy === quantity,
  )
  return fit?.kind === 'heights' ? fit.factor.value : 1
}

async function outcomeOf(
  { sequelize }: Pick<Fitting, 'sequelize'>,
  place: { id: number; kind: PlaceKind },
  field: ObservationField,
  versions: PlaceSettingsVersion[],
): Promise<LocalFitView['outcome']> {
  const pairs = await pairsOf(sequelize, place, field.kind, { isFitted: true })
  const rows = pairs.flatMap(
    ({ at, value, predicted, placeSettingsId }) =>
    predicted === null ? [] : [{ at, value, predicted: predicted / factorIn(versions, placeSettingsId, field.predictedBy) }], // prettier-ignore
  )
  const found = isSighting(field.kind)
    ? localFitOfSightings(
        rows.map(({ at, value, predicted }) => ({
          at,
          seen: value > 0,
          values: [predictorOf(field.predictedBy, predicted)],
        })),
        [placeQuantityOf(field.predictedBy).name],
      )
    : localFitOfHeights(rows.map(({ at, value, predicted }) => ({ at, observed: value, predicted })))
  if (found.kind === 'refused') return found
  const span = { from: new Date(found.from).toISOString(), to: new Date(found.to).toISOString() }
  return { ...found, ...span }
}

async function fitsOf(parts: Pick<Fitting, 'clock' | 'sequelize'>, placeId: number): Promise<LocalFitView[]> {
  const { id, kind, settings } = await readPlace(parts, placeId)
  const versions = await listPlaceSettings(parts, placeId)
  return Promise.all(
    observationFields[kind].map(async (field) => ({
      ...{ observed: field.kind, label: field.label, predictedBy: field.predictedBy },
      isLogarithmic: isSighting(field.kind) && isLogarithmic(field.predictedBy),
      outcome: await outcomeOf(parts, { id, kind }, field, versions),
      adopted: settings.content.localFits.find(({ observed }) => observed === field.kind) ?? null,
    })),
  )
}

/** One for each kind of observation of the place. */
export const listLocalFits = fitsOf

function proposalOf({ observed, outcome }: LocalFitView): AdoptedFit {
  if (outcome.kind === 'refused') {
    throw new Refused({ status: 409, code: 'localFit.refused', title: 'Nothing to adopt', detail: outcome.reason })
  }
  if (outcome.verdict !== 'better') {
    throw new Refused({ status: 409, code: 'localFit.noEvidence', title: 'Nothing to adopt', detail: outcome.words })
  }
  const { fit, from, to } = outcome
  if (fit.kind === 'heights') return { kind: 'heights', observed, count: fit.count, from, to, factor: fit.factor }
  const [slope] = fit.coefficients
  const [range] = fit.observedRange
  if (!slope || !range) throw new RangeError('a fit of sightings has one predictor')
  const { intercept, covariance, count } = fit
  return { kind: 'sightings', observed, count, from, to, intercept, slope, covariance, range }
}

/** What the newest fit proposes, or its removal, as a new version of the settings from now on. */
export async function adoptLocalFit(
  parts: Fitting,
  order: PlaceOrder,
  { observed, adopt, reason }: LocalFitAdoption,
): Promise<void> {
  const { kind, settings } = await readPlace(parts, order.placeId)
  if (!fieldOf(kind, observed)) {
    throw invalidInput([{ path: 'observed', message: `is not observed at a place of kind ${kind}` }])
  }
  const others = settings.content.localFits.filter((fit) => fit.observed !== observed)
  const view = adopt ? (await fitsOf(parts, order.placeId)).find((fit) => fit.observed === observed) : undefined
  const localFits = view ? [...others, proposalOf(view)] : others
  await changePlaceSettings(parts, order, { content: { ...settings.content, localFits }, validFrom: null, reason })
}
