/** Which limits lie on the shelf. */
import { Op } from 'sequelize'
import { Shelving } from '../../models/index.ts'
import type { Desk } from './desk.ts'

export async function shelvedAmong({ now, transaction }: Desk, limitIds: number[]): Promise<Set<number>> {
  if (limitIds.length === 0) return new Set()
  const where = { limitId: limitIds, endedAt: null, endsAt: { [Op.gt]: new Date(now) } }
  return new Set((await Shelving.findAll({ where, transaction })).map(({ limitId }) => limitId))
}

/** Takes a limit off the shelf in the records. */
export async function endShelvings(
  { now, transaction }: Desk,
  limitId: number,
  personId: number | null,
): Promise<void> {
  const change = { endedAt: new Date(now), endedById: personId }
  await Shelving.update(change, { where: { limitId, endedAt: null }, transaction })
}
