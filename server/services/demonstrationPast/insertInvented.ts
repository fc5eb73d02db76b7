/** Past sea states into the table of estimates, some hundreds of rows a statement, with room for live work in between. */
import { setTimeout as pause } from 'node:timers/promises'
import type { PastSeaState } from '../../../shared/demonstration/past.ts'
import type { Parts } from '../../config/parts.ts'
import { softwareVersion } from '../../config/softwareVersion.ts'
import { execute } from '../../models/sql.ts'
import { inventEstimate } from './inventedEstimate.ts'
import { columns, rowText, sharedText } from './inventedRow.ts'

export const rowsAtOnce = 400
/** The live path gets its turn for so long after each statement. */
const pauseMilliseconds = 10

/** What an estimate of that time names. */
export interface VersionsThen {
  settingsId: number
  windowSeconds: number
  deploymentId: number
  sensorsDeployed: number
}

export interface Invention {
  /** `versionsAt`: null before the station had an array or settings. */
  station: { id: number; code: string; versionsAt(time: number): VersionsThen | null }
  /** Rising in time. */
  batches: AsyncIterable<PastSeaState[]>
  /** What is as late or later stands already. ms since 1970 UTC, as all times here. */
  before: number
  madeAt: number
  /** Of the manifest: stands where other estimates have the digest of their result. */
  hash: string
}

/**
 * What stands already is left as it is, so that it may be done again. Answers the span that was inserted, null for
 * nothing; stops early, with an answer of `halted`, when asked to.
 */
export async function insertInvented(
  parts: Parts,
  invention: Invention,
  isStopped: () => boolean,
): Promise<{ oldest: number; newest: number } | 'halted' | null> {
  const span = { oldest: Infinity, newest: -Infinity }
  for await (const batch of invention.batches) {
    if (isStopped()) return 'halted'
    const states = batch.filter(({ at }) => Date.parse(at) < invention.before)
    const [oldest, newest] = [states[0], states.at(-1)]
    if (!oldest || !newest) continue
    await insert(parts, invention, states)
    span.oldest = Math.min(span.oldest, Date.parse(oldest.at))
    span.newest = Date.parse(newest.at)
    await pause(pauseMilliseconds)
  }
  return Number.isFinite(span.oldest) ? span : null
}

/** What stands before the station had an array or settings is left out. */
async function insert({ sequelize }: Parts, invention: Invention, states: PastSeaState[]): Promise<void> {
  const { station, madeAt, hash } = invention
  const escape = (text: string) => sequelize.escape(text)
  const rows: string[] = []
  for (const state of states) {
    const windowEndsAt = Date.parse(state.at)
    const versions = station.versionsAt(windowEndsAt)
    if (!versions) continue
    const { windowSeconds, ...named } = versions
    const constant = { stationId: station.id, computedAt: madeAt, softwareVersion, resultDigest: hash }
    const shared = sharedText({ ...constant, ...named }, escape)
    rows.push(rowText(shared, windowEndsAt, windowSeconds, inventEstimate(station.code, state), escape))
  }
  if (rows.length > 0) await execute(sequelize, `INSERT IGNORE INTO estimates (${columns}) VALUES ${rows.join(',')}`)
}
