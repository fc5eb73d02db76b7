/** How old outlooks were made: all of it for a season, then that of every tenth minute. Their values stay. */
import type { Parts } from '../../config/parts.ts'
import { execute } from '../../models/sql.ts'

const wholeDays = 90
const dayMs = 24 * 3_600_000
/** Small enough that no write of the watch waits for it. */
const rowsAtOnce = 2_000

/** Answers how many were thinned. May be stopped and run again at any time. */
export async function thinOutlooks({ sequelize, clock }: Pick<Parts, 'sequelize' | 'clock'>): Promise<number> {
  const before = new Date(clock.now().getTime() - wholeDays * dayMs)
  let thinned = 0
  for (;;) {
    const rows = await execute(
      sequelize,
      `UPDATE outlooks SET payload = NULL
       WHERE windowEndsAt < :before AND MINUTE(windowEndsAt) MOD 10 <> 0 AND payload IS NOT NULL LIMIT ${rowsAtOnce}`,
      { before },
    )
    thinned += rows
    if (rows < rowsAtOnce) return thinned
  }
}
