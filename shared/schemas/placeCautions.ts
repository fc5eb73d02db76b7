/**
 * The cautions that stand beside figures of places: a setting of the office, never absent.
 *
 * GET /api/placeCautions  places.read    -> placeCautions
 * PUT /api/placeCautions  places.change  { cautions, reason } -> placeCautions
 */
import { z } from 'zod'
import { placeQuantityKey } from './placeQuantity.ts'

const caution = z.string().trim().min(20, 'must not be left out: at least 20 characters').max(400)

export const placeCautions = z.strictObject({
  ...(Object.fromEntries(placeQuantityKey.options.map((key) => [key, caution])) as Record<
    (typeof placeQuantityKey.options)[number],
    typeof caution
  >),
  /** Beside the reasons for a rip caution. */
  rip: caution,
  /** Beside the flag, while the beach is patrolled; `{until}` and `{from}` are local times of the patrol. */
  onDuty: caution,
  offDuty: caution,
})
export type PlaceCautions = z.infer<typeof placeCautions>
export const placeCautionsChange = z.strictObject({
  cautions: placeCautions,
  reason: z.string().trim().min(3).max(500),
})
