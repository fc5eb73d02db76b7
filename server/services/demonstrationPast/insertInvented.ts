/** Past sea states into the table of estimates, some hundreds of rows a statement, with room for live work in between. */
import { setTimeout as pause } from 'node:timers/promises'
import type { PastSeaState } from '../../../shared/demonstration/past.ts'
import type { Parts } from '../../config/parts.ts'
import { softwareVersion } from '../../config/softwareVersion.ts'
import { execute } from '../../models/sql.ts'
import type { SqlValue } from '../../models/sql.ts'
import { estimateRow, inForce } from '../estimates.ts'
import type { StationTimeline } from '../estimates.ts'
import { inventEstimate } from './inventedEstimate.ts'

const rowsAtOnce = 400
/** The live path gets its turn for so long after each statement. */
const pauseMilliseconds = 15

export interface Invention {
  timeline: StationTimeline
  states: PastSeaState[]
  /** ms since 1970 UTC. */
  madeAt: number
  /** Of the manifest: stands where other estimates have the digest of their result. */
  hash: string
}

/** What stands already is left as it is, so that it may be done again. Stops early when asked to; answers whether it did all. */
export async function insertInvented(parts: Parts, invention: Invention, isStopped: () => boolean): Promise<boolean> {
  const { states } = invention
  for (let n = 0; n < states.length; n += rowsAtOnce) {
    if (isStopped()) return false
    const rows = states.slice(n, n + rowsAtOnce).flatMap((state) => rowOf(invention, state) ?? [])
    const [first] = rows
    if (first) {
      const columns = Object.keys(first)
      await execute(parts.sequelize, `INSERT IGNORE INTO estimates (${columns.join(', ')}) VALUES :rows`, {
        rows: rows.map((row) => Object.values(row).map(asSql)),
      })
    }
    await pause(pauseMilliseconds)
  }
  return true
}

/** Null before the station had an array or settings. */
function rowOf({ timeline, madeAt, hash }: Invention, state: PastSeaState) {
  const windowEndsAt = Date.parse(state.at)
  const settings = inForce(timeline.settings, windowEndsAt)
  const deployment = inForce(timeline.deployments, windowEndsAt)
  if (!settings || !deployment) return null
  const sensorsDeployed = deployment.sensors.length
  const row = estimateRow(inventEstimate(timeline.code, state), {
    stationId: timeline.id,
    windowStartsAt: windowEndsAt - settings.content.windowSeconds * 1000,
    windowEndsAt,
    surgeStartsAt: null,
    computedAt: madeAt,
    origin: 'demonstration',
    deploymentId: deployment.id,
    sensorsDeployed,
    settingsId: settings.id,
    softwareVersion,
    inputCommitId: null,
    resultDigest: hash,
  })
  return { ...row, revision: 1, sensorsUsed: sensorsDeployed }
}

/** Times as text: turning a quarter of a million dates into text is cheap here and dear in the driver. */
const asSql = (value: string | number | boolean | Date | null): SqlValue =>
  value instanceof Date ? value.toISOString().slice(0, 23).replace('T', ' ') : value
