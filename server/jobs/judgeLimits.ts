/**
 * Judges limits: a saved estimate wakes it for its station, node-cron each minute for all of them, for the health of
 * the data and for what time alone changes. Stored watermarks say what is due, so that a lost wake loses nothing.
 */
import { statfs } from 'node:fs/promises'
import { schedule } from 'node-cron'
import type { Parts, RunningPart } from '../config/parts.ts'
import { officeOf } from '../presenters/office.ts'
import { judgeHealth, judgePlace, judgeStation, keepTimers, logFlood, noteLateWindows } from '../services/alerts.ts'
import { listPlaces } from '../services/places.ts'
import { linkOf } from '../services/readings.ts'
import { listStations } from '../services/stations.ts'

export interface JudgeLimits extends RunningPart {
  /** Everything that is due now; resolves when it is done. */
  wake(): Promise<void>
}

async function freeShare(folder: string): Promise<number | null> {
  try {
    const { bavail, blocks } = await statfs(folder)
    return blocks > 0 ? bavail / blocks : null
  } catch {
    return null
  }
}

/** So long after its start the program waits for stations to catch up, before it calls their figures stale. */
const settlesForMs = 180_000

export interface JudgeLimitsOptions {
  /** Only `wake` is called: no clock. */
  isUnscheduled?: boolean
  settlesForMs?: number
}

export function startJudgeLimits(parts: Parts, options: JudgeLimitsOptions = {}): JudgeLimits {
  const { isUnscheduled = false } = options
  const settlesFor = options.settlesForMs ?? (isUnscheduled ? 0 : settlesForMs)
  const startedAt = parts.clock.monotonic()
  const { bus, environment, logger } = parts
  /** Stations with a new estimate, and whether one of them may have come late. */
  const saved = new Set<number>()
  /** Places with a new outlook. */
  const lookedOut = new Set<number>()
  let isAllDue = false
  let isStopped = false
  let running: Promise<void> | null = null

  const guarded = async (what: string, work: () => Promise<unknown>): Promise<void> => {
    try {
      if (!isStopped) await work()
    } catch (error) {
      logger.error({ error, what }, 'limits could not be judged now; they stay due')
    }
  }

  async function judgeOne(stationId: number): Promise<void> {
    const office = await officeOf(parts)
    await guarded(`station ${stationId}`, () => judgeStation(parts, office, stationId))
  }

  async function judgeOnePlace(placeId: number): Promise<void> {
    const office = await officeOf(parts)
    await guarded(`place ${placeId}`, () => judgePlace(parts, office, placeId))
  }

  async function judgeAll(): Promise<void> {
    const office = await officeOf(parts)
    const diskFree = await freeShare(environment.dataFolder)
    await guarded('timers', () => keepTimers(parts, office))
    for (const { id } of await listStations(parts)) {
      saved.delete(id)
      await judgeOne(id)
      await guarded(`late windows of station ${id}`, () => noteLateWindows(parts, office, id))
    }
    for (const { id } of await listPlaces(parts)) {
      lookedOut.delete(id)
      await judgeOnePlace(id)
    }
    const clockOffsetOf = (stationId: number) => linkOf(stationId).clockOffsetSeconds
    const isSettling = parts.clock.monotonic() - startedAt < settlesFor
    await guarded('data health', () => judgeHealth(parts, office, { clockOffsetOf, diskFree, isSettling }))
    await guarded('flood', () => logFlood(parts))
  }

  async function drain(): Promise<void> {
    while (!isStopped && (isAllDue || saved.size > 0 || lookedOut.size > 0)) {
      const [stationId] = saved
      const [placeId] = lookedOut
      if (isAllDue) {
        isAllDue = false
        await guarded('all', judgeAll)
      } else if (stationId !== undefined) {
        saved.delete(stationId)
        await guarded(`station ${stationId}`, () => judgeOne(stationId))
      } else if (placeId !== undefined) {
        lookedOut.delete(placeId)
        await guarded(`place ${placeId}`, () => judgeOnePlace(placeId))
      }
    }
  }

  const wakeUp = (): Promise<void> => (running ??= drain().finally(() => (running = null)))
  function wake(): Promise<void> {
    isAllDue = true
    return wakeUp()
  }

  const subscriptions = [
    bus.subscribe('estimate.saved', ({ stationId }) => {
      saved.add(stationId)
      if (!isUnscheduled) void wakeUp()
    }),
    bus.subscribe('outlook.saved', ({ placeId }) => {
      lookedOut.add(placeId)
      if (!isUnscheduled) void wakeUp()
    }),
  ]
  const task = isUnscheduled
    ? null
    : schedule('35 * * * * *', () => void wake(), { timezone: 'UTC', name: 'judgeLimits' })
  // What became due while the program was not running.
  if (!isUnscheduled) void wake()

  return {
    wake,
    async stop() {
      isStopped = true
      for (const unsubscribe of subscriptions) unsubscribe()
      await task?.destroy()
      await running
    },
  }
}
