/** Observations with the figure that stood beside them: of the outlook nearest in time, half an hour at most. */
import type { Sequelize, Transaction } from 'sequelize'
import { fieldOf } from '../../../shared/places/localFits.ts'
import type { ObservationKind } from '../../../shared/schemas/placeLocalFit.ts'
import type { PlaceKind } from '../../../shared/schemas/placeQuantity.ts'
import { select } from '../../models/sql.ts'

export interface ObservationPair {
  id: number
  /** ms since 1970 UTC. */
  at: number
  kind: ObservationKind
  value: number
  note: string
  personId: number | null
  withdrawnAt: Date | null
  withdrawReason: string | null
  /** SI; null where no outlook with this figure stood near. */
  predicted: number | null
  /** The version of the settings behind it. */
  placeSettingsId: number | null
}

interface Row extends Omit<ObservationPair, 'at' | 'predicted' | 'placeSettingsId'> {
  at: Date
  before: number | null
  beforeAt: Date | null
  after: number | null
  afterAt: Date | null
  settingsBefore: number | null
  settingsAfter: number | null
}

const reachMinutes = 30

/** One figure of the newest revision of the nearest window on one side. */
const nearest = (side: 'before' | 'after', column: string): string => `
  (SELECT ${column} FROM outlooks w WHERE w.placeId = o.placeId
     AND w.windowEndsAt ${side === 'before' ? '<=' : '>'} o.at
     AND w.windowEndsAt ${side === 'before' ? '>=' : '<='} o.at ${side === 'before' ? '-' : '+'} INTERVAL ${reachMinutes} MINUTE
   ORDER BY w.windowEndsAt ${side === 'before' ? 'DESC' : 'ASC'}, w.revision DESC LIMIT 1)`

const value = "JSON_VALUE(w.figures, CONCAT('$.', :quantity, '[0]')) + 0"

/** Of one kind, newest first; `which` is a condition on `o`. */
export async function pairsOf(
  sequelize: Sequelize,
  place: { id: number; kind: PlaceKind },
  observed: ObservationKind,
  {
    before = null,
    most = 100_000,
    isFitted = false,
  }: { before?: number | null; most?: number; isFitted?: boolean } = {},
  transaction?: Transaction,
): Promise<ObservationPair[]> {
  const quantity = fieldOf(place.kind, observed)?.predictedBy
  if (!quantity) return []
  const rows = await select<Row>(
    sequelize,
    `SELECT o.id, o.at, o.kind, o.value, o.note, o.personId, o.withdrawnAt, o.withdrawReason,
       ${nearest('before', value)} AS \`before\`, ${nearest('before', 'w.windowEndsAt')} AS beforeAt,
       ${nearest('after', value)} AS \`after\`, ${nearest('after', 'w.windowEndsAt')} AS afterAt,
       ${nearest('before', 'w.placeSettingsId')} AS settingsBefore, ${nearest('after', 'w.placeSettingsId')} AS settingsAfter
     FROM observations o WHERE o.placeId = :placeId AND o.kind = :observed AND (:before IS NULL OR o.id < :before)
       ${isFitted ? 'AND o.withdrawnAt IS NULL' : ''} ORDER BY o.id DESC LIMIT :most`,
    { placeId: place.id, observed, quantity, before, most },
    transaction,
  )
  return rows.map(({ before: earlier, beforeAt, after: later, afterAt, settingsBefore, settingsAfter, at, ...row }) => {
    const away = (end: Date | null): number => (end === null ? Infinity : Math.abs(end.getTime() - at.getTime()))
    const isEarlier = away(beforeAt) <= away(afterAt)
    const near = isEarlier ? earlier : later
    const placeSettingsId = isEarlier ? settingsBefore : settingsAfter
    return { ...row, at: at.getTime(), predicted: near === null ? null : Number(near), placeSettingsId }
  })
}
