/** A limit's quantity over a while, as pages and e-mails draw it: of a station by its estimates, of a place by its outlooks. */
import type { Sequelize } from 'sequelize'
import type { Quantity } from '../../../shared/alerts/quantities.ts'
import type { SubjectKind } from '../../../shared/schemas/limit.ts'
import { outlooksBetween } from './placeFigures.ts'
import { seaBetween } from './seaFigures.ts'

export interface HistoryPoint {
  /** End of the window, ms since 1970 UTC. */
  at: number
  /** SI; bearings from. */
  value: number
  sd: number | null
}

const finite = (value: number): number | null => (Number.isNaN(value) ? null : value)

/** Rising in time; windows without the figure are left out. Data health has none. */
export async function quantityBetween(
  sequelize: Sequelize,
  { subjectKind, subjectId }: { subjectKind: SubjectKind; subjectId: number | null },
  quantity: Quantity,
  from: number,
  to: number,
): Promise<HistoryPoint[]> {
  if (quantity.limitClass !== 'wave' || subjectId === null || subjectKind === 'system') return []
  const { ofPlace } = quantity
  if (ofPlace !== undefined) {
    const windows = await outlooksBetween(sequelize, subjectId, from, to)
    return windows.flatMap(({ windowEndsAt: at, figures }) => {
      const figure = figures[ofPlace]
      return figure ? [{ at, value: figure.value, sd: figure.sd }] : []
    })
  }
  const windows = await seaBetween(sequelize, subjectId, from, to)
  return windows.flatMap(({ windowEndsAt: at, sea }) => {
    const { value, sd } = quantity.read({ sea, health: null })
    return Number.isNaN(value) ? [] : [{ at, value, sd: finite(sd) }]
  })
}
