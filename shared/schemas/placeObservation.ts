/**
 * Observations: what people saw at a place, logged to be held against what was figured. SI units.
 *
 * GET  /api/places/:placeId/observations?before=  places.read           -> { observations: observationView[], next, counts }
 * POST /api/places/:placeId/observations          observations.change   observationDraft -> 201 observationView
 * POST /api/observations/:observationId/withdraw  observations.change   { reason } -> observationView (kept, left out of fits)
 * GET  /api/places/:placeId/localFits             places.read           -> { fits: localFitView[] } one for each kind of observation of the place's form
 * POST /api/places/:placeId/localFits             places.change         localFitAdoption, If-Match -> placeView (a new settings version)
 * Partners log at places of their team (403 `observation.notYourTeam`).
 */
import { z } from 'zod'
import { personName } from './limit.ts'
import { observationKind } from './placeLocalFit.ts'
import type { ObservationKind } from './placeLocalFit.ts'
import type { PlaceKind, PlaceQuantityKey } from './placeQuantity.ts'

export type { ObservationKind } from './placeLocalFit.ts'

const time = z.iso.datetime()

/** Heights are metres; sightings are yes or no. */
export const isSighting = (kind: ObservationKind): boolean => /^(ripSeen|overtoppingSeen|surgeTrouble)$/.test(kind)

export interface ObservationField {
  kind: ObservationKind
  label: string
  /** Beside the field. */
  help: string
  /** Null: yes or no. */
  unit: 'm' | null
  /** The figure it is held against. */
  predictedBy: PlaceQuantityKey
}

/** The form of each kind of place. */
export const observationFields: Record<PlaceKind, readonly ObservationField[]> = {
  entrance: [
    {
      kind: 'crossSea',
      label: 'Sea across the axis',
      help: 'Height, trough to crest, of the higher third of the waves across the channel.',
      unit: 'm',
      predictedBy: 'crossSea',
    },
  ],
  breakwater: [
    {
      kind: 'overtoppingSeen',
      label: 'Water over the crest',
      help: 'Yes where green water or heavy spray came over within ten minutes.',
      unit: null,
      predictedBy: 'overtopping',
    },
  ],
  berth: [
    {
      kind: 'longSwell',
      label: 'Slow rise and fall at the quay',
      help: 'Height between the lowest and highest level within ten minutes, waves of seconds left out.',
      unit: 'm',
      predictedBy: 'longSwell',
    },
    {
      kind: 'surgeTrouble',
      label: 'Ships moved by surge',
      help: 'Yes where lines had to be tended or work was stopped.',
      unit: null,
      predictedBy: 'longSwell',
    },
  ],
  beach: [
    {
      kind: 'breakerHeight',
      label: 'Breaker height',
      help: 'Height of the higher third of the breakers, trough to crest.',
      unit: 'm',
      predictedBy: 'breakerHeight',
    },
    {
      kind: 'runUp',
      label: 'Run-up above still water',
      help: 'Highest wetting within ten minutes, as height above still water.',
      unit: 'm',
      predictedBy: 'runUp',
    },
    {
      kind: 'ripSeen',
      label: 'Rip current seen',
      help: 'Yes where a rip was seen or somebody was carried out.',
      unit: null,
      predictedBy: 'breakerHeight',
    },
  ],
}

export const observationDraft = z
  .strictObject({
    kind: observationKind,
    at: time,
    value: z.union([z.number().min(0).max(30), z.boolean()]),
    note: z.string().trim().max(500),
  })
  .superRefine(({ kind, value }, context) => {
    const isYesOrNo = isSighting(kind)
    if (isYesOrNo !== (typeof value === 'boolean')) {
      context.addIssue({
        code: 'custom',
        path: ['value'],
        message: isYesOrNo ? 'must be yes or no' : 'must be metres',
      })
    }
  })
export type ObservationDraft = z.infer<typeof observationDraft>

export const observationView = z.object({
  id: z.number().int(),
  placeId: z.number().int(),
  at: time,
  kind: observationKind,
  value: z.union([z.number(), z.boolean()]),
  note: z.string(),
  by: personName.nullable(),
  /** What the outlook nearest in time (30 min at most) had said; null where there was none. */
  predicted: z.number().nullable(),
  withdrawnAt: time.nullable(),
  withdrawReason: z.string().nullable(),
})
export type ObservationView = z.infer<typeof observationView>

export const observationList = z.object({
  observations: z.array(observationView),
  next: z.number().int().nullable(),
  counts: z.array(z.object({ kind: observationKind, count: z.number().int(), withPrediction: z.number().int() })),
})
export type ObservationList = z.infer<typeof observationList>
