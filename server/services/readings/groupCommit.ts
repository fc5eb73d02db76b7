/**
 * Group commits: what all stations send within a quarter of a second becomes durable in one transaction, and only
 * then is it acknowledged. While the database is away everything waits, in order; senders are held back by
 * `waitingOf`, and what they were not told of they send again.
 */
import { setTimeout as pause } from 'node:timers/promises'
import type { Logger } from 'pino'
import type { Clock } from '../../config/clock.ts'
import { isDatabaseUnavailable, isRepeatable } from '../../config/databaseFaults.ts'
import type { Bus } from '../bus.ts'
import { announce } from './announce.ts'
import type { Arrival } from './arrival.ts'
import { takeCommitId } from './commitIds.ts'
import type { CommitTimes } from './commitIds.ts'
import { commitArrivals } from './commit.ts'
import type { Committed } from './commit.ts'
import { database } from './database.ts'
import { createHealthCounts } from './healthCounts.ts'
import { createKeepAsideLimit } from './keepAsideLimit.ts'
import { durableUntil } from './links.ts'
import { groupBy } from './groupBy.ts'
import { isHeld, joinLanes, nextRelease } from './lanes.ts'

const usuallyBetweenCommitsMs = 250
const mostArrivals = 2000
const mostBytes = 4 * 1024 * 1024
const stopWithinMs = 3_000
const betweenHealthMs = 10_000
const retriesMs = [50, 250, 1000, 2000, 5000]

/** Whether the same commit may succeed later. All else (a value that is not taken) would fail for ever. */
const mayPass = (error: unknown): boolean => isDatabaseUnavailable(error) || isRepeatable(error)

export interface GroupCommit {
  enqueue(arrival: Arrival): void
  /** Frames of a station that wait for their commit. */
  waitingOf(stationId: number): number
  /** Resolves when everything that waits now has been settled. */
  flush(): Promise<void>
  /** Commits what waits, if the database answers, and ends. */
  stop(): Promise<void>
}

export interface GroupCommitOptions {
  bus: Bus
  clock: Clock
  logger: Logger
  commitTimes: CommitTimes
  betweenCommitsMs?: number | undefined
}

export function createGroupCommit(options: GroupCommitOptions): GroupCommit {
  const { bus, clock, logger, commitTimes, betweenCommitsMs = usuallyBetweenCommitsMs } = options
  let waiting: Arrival[] = []
  const counts = new Map<number, number>()
  /** Stations whose last commit may have happened though it failed: what is stored is looked up, not remembered. */
  const unsure = new Set<number>()
  const health = createHealthCounts()
  const mayKeepAside = createKeepAsideLimit(clock)
  let healthWrittenAt = -Infinity
  let lastStart = -Infinity
  let timer: NodeJS.Timeout | null = null
  let running: Promise<void> | null = null
  let failures = 0
  let stopped = false

  function schedule(afterMs: number): void {
    if (timer || running || stopped) return
    timer = setTimeout(() => {
      timer = null
      void run()
    }, afterMs)
  }

  function scheduleNext(): void {
    if (waiting.some(({ station }) => !isHeld(station.id))) {
      schedule(Math.max(0, betweenCommitsMs - (clock.monotonic() - lastStart)))
    }
  }

  async function run(): Promise<void> {
    running ??= commitOnce().finally(() => {
      running = null
      if (failures > 0) schedule(retriesMs[Math.min(failures, retriesMs.length) - 1] ?? 0)
      else scheduleNext()
    })
    return running
  }

  function takeGroup(): Arrival[] {
    const group: Arrival[] = []
    const rest: Arrival[] = []
    let bytes = 0
    for (const arrival of waiting) {
      const fits = group.length < mostArrivals && bytes < mostBytes
      if (!fits || isHeld(arrival.station.id)) rest.push(arrival)
      else {
        group.push(arrival)
        bytes += arrival.kind === 'frame' ? arrival.payload.length : arrival.raw.length
      }
    }
    waiting = rest
    return group
  }

  async function commitOnce(): Promise<void> {
    lastStart = clock.monotonic()
    const group = takeGroup()
    if (group.length === 0) return
    try {
      settle(await commit(group))
      failures = 0
    } catch (error) {
      failures += 1
      waiting = [...group, ...waiting]
      if (mayPass(error)) return logger.warn({ error, waiting: waiting.length }, 'readings wait')
      logger.error({ error }, 'a group of readings was refused by the database')
      await commitByStation(takeGroup())
    }
  }

  /** One station's frames cannot be stored: the others' must not wait for them. */
  async function commitByStation(group: Arrival[]): Promise<void> {
    for (const [stationId, ofStation] of groupBy(group, ({ station }) => station.id)) {
      try {
        settle(await commit(ofStation))
        failures = 0
      } catch (error) {
        if (mayPass(error)) waiting = [...ofStation, ...waiting]
        else {
          logger.error({ error, stationId }, 'readings of a station were refused by the database')
          for (const arrival of ofStation) leave(arrival, () => arrival.settled({ kind: 'failed' }, arrival.stream.ledger.contiguous)) // prettier-ignore
        }
      }
    }
  }

  async function commit(group: readonly Arrival[]): Promise<Committed> {
    const commitId = await takeCommitId()
    const stations = new Set(group.map(({ station }) => station.id))
    const compare = new Set([...stations].filter((id) => unsure.has(id)))
    for (const id of stations) unsure.add(id)
    const healthIsDue = clock.monotonic() - healthWrittenAt >= betweenHealthMs
    let written = (): void => undefined
    const committed = await commitArrivals(group, {
      commitId,
      now: clock.now().getTime(),
      durableUntil,
      mustCompare: (stationId) => compare.has(stationId),
      mayKeepAside,
      also: async (transaction) => {
        if (healthIsDue) written = (await health.write(transaction)).written
      },
    })
    for (const id of stations) unsure.delete(id)
    commitTimes.note(commitId, clock.monotonic())
    written()
    if (healthIsDue) healthWrittenAt = clock.monotonic()
    return committed
  }

  function settle({ outcomes, ledgers, judged }: Committed): void {
    for (const [stream, ledger] of ledgers) stream.ledger = ledger
    announce(judged, { bus, health, now: clock.now().getTime() })
    for (const [arrival, outcome] of outcomes) {
      leave(arrival, () => arrival.settled(outcome, arrival.stream.ledger.contiguous))
    }
  }

  function leave({ station }: Arrival, tell: () => void): void {
    const left = (counts.get(station.id) ?? 1) - 1
    if (left > 0) counts.set(station.id, left)
    else counts.delete(station.id)
    try {
      tell()
    } catch (error) {
      logger.error({ error, stationId: station.id }, 'a sender could not be told')
    }
  }

  async function flush(): Promise<void> {
    while (waiting.length > 0 || running) {
      if (running) await running
      else if (waiting.every(({ station }) => isHeld(station.id))) await nextRelease()
      else await run()
      if (failures > 0) return
    }
  }

  /** The counts since the last time; without them the hour would show less than came. */
  async function writeHealth(): Promise<void> {
    try {
      const { written } = await database().transaction((transaction) => health.write(transaction))
      written()
    } catch (error) {
      logger.warn({ error }, 'the last counts of health were not written')
    }
  }

  const leaveLanes = joinLanes({ idle: async () => running, resume: scheduleNext })

  return {
    enqueue(arrival) {
      waiting.push(arrival)
      counts.set(arrival.station.id, (counts.get(arrival.station.id) ?? 0) + 1)
      scheduleNext()
    },
    waitingOf: (stationId) => counts.get(stationId) ?? 0,
    flush,
    async stop() {
      if (timer) clearTimeout(timer)
      timer = null
      // A database that hangs must not keep the server from stopping: what was not acknowledged is sent again.
      await Promise.race([flush(), pause(stopWithinMs, undefined, { ref: false })])
      stopped = true
      leaveLanes()
      if (failures === 0 && !running) await writeHealth()
    },
  }
}
