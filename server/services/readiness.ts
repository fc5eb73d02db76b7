/** Whether the program can do its work now, and if not, why. */
import type { Parts } from '../config/parts.ts'
import { select } from '../models/sql.ts'

export interface Readiness {
  /** Something that must be over before the program is ready; the same reason twice is one. */
  wait(reason: string): void
  over(reason: string): void
  reasons(): string[]
}

/** Before the database is held, migrated and filled. */
export const starting = 'starting'

export function createReadiness(): Readiness {
  const reasons = new Set<string>()
  return {
    wait: (reason) => void reasons.add(reason),
    over: (reason) => void reasons.delete(reason),
    reasons: () => [...reasons],
  }
}

const patienceMilliseconds = 2_000

/** Asks the database too. Empty: ready. */
export async function reasonsNotReady(
  { sequelize }: Pick<Parts, 'sequelize'>,
  readiness: Readiness,
): Promise<string[]> {
  const answers = select(sequelize, 'SELECT 1 AS one').then(
    () => true,
    () => false,
  )
  let timer: NodeJS.Timeout | undefined
  const late = new Promise<false>((resolve) => {
    timer = setTimeout(() => resolve(false), patienceMilliseconds)
  })
  const database = await Promise.race([answers, late])
  clearTimeout(timer)
  return [...readiness.reasons(), ...(database ? [] : ['the database does not answer'])]
}
