/** The watch log. Entries are added and never altered. */
import type { Transaction } from 'sequelize'
import type { Parts } from '../config/parts.ts'
import { LogEntry } from '../models/index.ts'

export interface SystemLine {
  /** What the line is about: `station`, `estimate`, `system`. */
  kind: string
  /** One sentence for people. */
  text: string
  figures?: unknown
  /** Who signed for it; without one the program itself says it. */
  personId?: number
  /** Resources it speaks of, such as `{ stationId: 3 }`. */
  links?: Record<string, number | string>
}

const longestText = 4000

/** A line by the program itself; in the transaction of what it tells, where there is one. */
export async function writeSystemLine(
  { clock }: Pick<Parts, 'clock'>,
  line: SystemLine,
  transaction?: Transaction,
): Promise<void> {
  await LogEntry.create(
    {
      at: clock.now(),
      kind: line.kind,
      personId: line.personId ?? null,
      text: line.text.slice(0, longestText),
      figures: line.figures ?? null,
      links: line.links ?? null,
    },
    transaction ? { transaction } : {},
  )
}
