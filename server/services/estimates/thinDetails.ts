/** The bulky detail of old estimates: all of it for a season, then that of every tenth minute. The estimates themselves stay. */
import type { Parts } from '../../config/parts.ts'
import { execute } from '../../models/sql.ts'

const wholeDays = 90
const dayMs = 24 * 3_600_000
/** Small enough that no write of the watch waits for it. */
const rowsAtOnce = 2_000

/** Answers how many details went. May be stopped and run again at any time. */
export async function thinDetails({ sequelize, clock }: Pick<Parts, 'sequelize' | 'clock'>): Promise<number> {
  const before = new Date(clock.now().getTime() - wholeDays * dayMs)
  let gone = 0
  for (;;) {
    const rows = await execute(
      sequelize,
      `DELETE FROM estimateDetails WHERE runId = 0 AND windowEndsAt < :before AND MINUTE(windowEndsAt) MOD 10 <> 0
       LIMIT ${rowsAtOnce}`,
      { before },
    )
    gone += rows
    if (rows < rowsAtOnce) return gone
  }
}
