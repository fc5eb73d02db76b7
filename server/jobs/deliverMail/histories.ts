/** The last hours of an alert's quantity, as its e-mails draw them: read once for all who get them. */
import { quantityOf } from '../../../shared/alerts/quantities.ts'
import type { Parts } from '../../config/parts.ts'
import type { Surroundings } from '../../mail/letter.ts'
import { quantityBetween } from '../../services/alerts/quantityHistory.ts'
import type { Leased } from '../../services/deliveries.ts'

type History = Surroundings['history']

const longMs = 12 * 3_600_000

export interface Histories {
  /** Null: there is none to draw. */
  of(letter: Leased): Promise<History>
}

export function createHistories({ sequelize, logger }: Pick<Parts, 'sequelize' | 'logger'>): Histories {
  const known = new Map<string, Promise<History>>()

  async function read({ content, drawing }: Leased): Promise<History> {
    if (!content || !drawing) return null
    const quantity = quantityOf(content.quantity)
    const to = Date.parse(content.windowEndsAt)
    const found = await quantityBetween(sequelize, drawing, quantity, to - longMs, to)
    const { unit, decimals, toUnit, isCircular } = quantity
    const points = found.map(({ at, value }) => ({ at, value: value * toUnit }))
    const raise = drawing.raise === null ? null : drawing.raise * toUnit
    return points.length < 2 ? null : { points, raise, isCircular, unit, decimals }
  }

  return {
    of(letter) {
      const key = `${letter.alertId}/${letter.content?.windowEndsAt}`
      let history = known.get(key)
      if (!history) {
        // The e-mail goes out without its drawing rather than not at all.
        history = read(letter).catch((error: unknown) => {
          logger.warn({ error, alertId: letter.alertId }, 'an e-mail goes without its drawing')
          return null
        })
        known.set(key, history)
      }
      return history
    },
  }
}
