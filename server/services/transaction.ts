/** One transaction, tried again where the database asked for it (deadlock, lock wait). */
import type { Sequelize, Transaction } from 'sequelize'
import { isRepeatable } from '../config/databaseFaults.ts'

const mostTries = 3

/** `work` may run more than once, so it changes nothing outside the database: news is published after it. */
export async function inTransaction<Result>(
  sequelize: Sequelize,
  work: (transaction: Transaction) => Promise<Result>,
): Promise<Result> {
  for (let tries = 1; ; tries += 1) {
    try {
      return await sequelize.transaction(work)
    } catch (error) {
      if (tries >= mostTries || !isRepeatable(error)) throw error
    }
  }
}
