/** Figures of a place's outlooks as back-tests and histories read them: the newest revision of each window. */
import type { Sequelize } from 'sequelize'
import { z } from 'zod'
import type { SeaAtPlace } from '../../../shared/alerts/figures.ts'
import { qualityFlag } from '../../../shared/schemas/estimate.ts'
import { placeQuantityKey } from '../../../shared/schemas/placeQuantity.ts'
import { select } from '../../models/sql.ts'
import { fromJson } from '../limits/rows.ts'

export interface PlaceWindow {
  /** ms since 1970 UTC. */
  windowEndsAt: number
  revision: number
  figures: SeaAtPlace['figures']
}

const number = z.number().nullable()
/** As `outlooks.figures` keeps them: value, ±, likely from and to, flag. */
const kept = z.partialRecord(placeQuantityKey, z.tuple([z.number(), number, number, number, qualityFlag]))

function figuresOf(stored: unknown): SeaAtPlace['figures'] {
  const figures: SeaAtPlace['figures'] = {}
  for (const [key, [value, sd, from, to, flag]] of Object.entries(kept.parse(fromJson(stored)))) {
    const likely = from === null || to === null ? null : { from, to }
    figures[placeQuantityKey.parse(key)] = { value, sd, likely, qualityFlag: flag, words: null }
  }
  return figures
}

/** Windows that end after `from` and not after `to`, rising in time. */
export async function outlooksBetween(
  sequelize: Sequelize,
  placeId: number,
  from: number,
  to: number,
): Promise<PlaceWindow[]> {
  const rows = await select<{ windowEndsAt: Date; revision: number; figures: unknown }>(
    sequelize,
    `SELECT o.windowEndsAt, o.revision, o.figures FROM outlooks o
     WHERE o.placeId = :placeId AND o.windowEndsAt > :from AND o.windowEndsAt <= :to
       AND NOT EXISTS (SELECT 1 FROM outlooks newer WHERE newer.placeId = o.placeId
         AND newer.windowEndsAt = o.windowEndsAt AND newer.revision > o.revision)
     ORDER BY o.windowEndsAt`,
    { placeId, from: new Date(from), to: new Date(to) },
  )
  return rows.map(({ windowEndsAt, revision, figures }) => ({
    ...{ windowEndsAt: windowEndsAt.getTime(), revision: Number(revision) },
    figures: figuresOf(figures),
  }))
}
