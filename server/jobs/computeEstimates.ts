/**
 * The scheduled job: node-cron wakes it every minute, stored readings wake it sooner, and stored watermarks say what
 * is due, so that lost wakes and restarts lose no window. Live windows go first; late ones fill what is left of the
 * worker threads, the newest first.
 */
import { schedule } from 'node-cron'
import type { Parts, RunningPart } from '../config/parts.ts'
import { countLate, readTimelines, Superseded } from '../services/estimates.ts'
import { EstimationFailed, startEstimators } from '../workers/estimators.ts'
import type { Estimators } from '../workers/estimators.ts'
import { lateTurn, liveTurn, noteTurn, openDesk } from './computeEstimates/desk.ts'
import type { Desk } from './computeEstimates/desk.ts'
import { createPastProgress } from './computeEstimates/pastProgress.ts'
import { takeTurn } from './computeEstimates/turn.ts'
import type { Turn } from './computeEstimates/turn.ts'
import { noSelfTest, passesSelfTest, selfTest } from './selfTest.ts'
import type { SelfTest } from './selfTest.ts'

/**
 * A window takes a second at most; a thread that is silent for so long hangs, even on a busy machine. Two tries stay
 * within the two minutes for which readings that were just read are left uncompacted.
 */
const deadlineMs = 50_000
/** The grace of most stations: the second of the minute at which time alone makes a window due. */
const wakeAtSecond = 10

export interface ComputeEstimatesOptions {
  /** Others than the usual worker threads. */
  estimators?: Estimators
  /** Without node-cron: only `wake` and stored readings wake it. */
  isUnscheduled?: boolean
  /** Another than the usual self-test. */
  selfTest?: SelfTest
}

export interface ComputeEstimates extends RunningPart {
  /** Resolves when nothing is due any more. */
  wake(): Promise<void>
}

export async function startComputeEstimates(
  parts: Parts,
  options: ComputeEstimatesOptions = {},
): Promise<ComputeEstimates> {
  const { bus, clock, logger } = parts
  // Pages need not wait for it, estimates must.
  const passes = passesSelfTest(parts, options.selfTest ?? (options.estimators ? noSelfTest : selfTest))
  passes.catch((error: unknown) => logger.error({ error }, 'the outcome of the self-test could not be told'))
  const estimators =
    options.estimators ??
    startEstimators({
      threads: parts.environment.workers,
      deadlineMs,
      onLost: ({ kind, message }) => logger.error({ kind, detail: message }, 'an estimating thread was ended'),
    })
  const desks = new Map<number, Desk>()
  const progress = createPastProgress(parts)
  let isStopped = false
  let isAskedAgain = false
  let running: Promise<void> | null = null

  async function refreshDesks(): Promise<void> {
    const timelines = await readTimelines(parts.sequelize)
    const ids = new Set(timelines.map(({ id }) => id))
    for (const id of desks.keys()) if (!ids.has(id)) desks.delete(id)
    for (const timeline of timelines) {
      const desk = desks.get(timeline.id)
      if (desk) Object.assign(desk, { timeline, isOut: false })
      else desks.set(timeline.id, await openDesk(parts, timeline))
    }
  }

  async function nextTurn(): Promise<Turn | null> {
    const free = [...desks.values()].filter((desk) => !desk.isBusy && !desk.isOut)
    for (const desk of free) {
      const turn = await liveTurn(parts, desk)
      if (turn) return turn
    }
    if (progress.isDue()) await progress.report(await countLate(parts, [...desks.keys()]))
    const late = (await Promise.all(free.map((desk) => lateTurn(parts, desk)))).filter((turn) => turn !== null)
    return late.sort((a, b) => b.windowEndsAt - a.windowEndsAt)[0] ?? null
  }

  async function work(desk: Desk, turn: Turn): Promise<void> {
    desk.isBusy = true
    try {
      noteTurn(desk, turn, await takeTurn(parts, estimators, turn))
    } catch (error) {
      desk.isOut = true
      handle(error, turn)
    } finally {
      desk.isBusy = false
    }
  }

  function handle(error: unknown, turn: Turn | null): void {
    if (isStopped || (error instanceof EstimationFailed && error.kind === 'stopped')) return
    const window = turn && `${turn.timeline.code}/${new Date(turn.windowEndsAt).toISOString()}`
    logger.error({ error, window }, 'an estimate could not be made now; it stays due')
    if (error instanceof Superseded) isStopped = true
  }

  /** Until nothing is due: one window more in hand than threads, so that none waits for the database. */
  async function drain(): Promise<void> {
    const inHand = new Set<Promise<void>>()
    try {
      // Windows stay due: a program that passes its self-test computes them.
      if (!(await passes)) return
      while (!isStopped) {
        if (isAskedAgain) {
          isAskedAgain = false
          await refreshDesks()
        }
        const before = inHand.size
        const turn = before <= estimators.threads ? await nextTurn() : null
        const desk = turn && desks.get(turn.timeline.id)
        if (turn && desk) {
          const done = work(desk, turn).finally(() => inHand.delete(done))
          inHand.add(done)
        } else if (inHand.size > 0) await Promise.race(inHand)
        // A window that was finished while the next was looked for may have freed its station for another.
        else if (before === 0 && !isAskedAgain) break
      }
      if (!isStopped) await progress.report(await countLate(parts, [...desks.keys()]))
    } catch (error) {
      handle(error, null)
    } finally {
      await Promise.all(inHand)
    }
  }

  function wake(): Promise<void> {
    isAskedAgain = true
    running ??= drain().finally(() => (running = null))
    return running
  }

  const unsubscribe = bus.subscribe('readings.stored', ({ stationId, to, late }) => {
    const desk = desks.get(stationId)
    if (desk) desk.storedAt = clock.now().getTime()
    if (late || !desk || closesWindow(desk, to)) void wake()
  })
  const task = options.isUnscheduled
    ? null
    : schedule(`${wakeAtSecond} * * * * *`, () => void wake(), { timezone: 'UTC', name: 'computeEstimates' })

  // What became due while the program was not running.
  if (!options.isUnscheduled) void wake()

  return {
    wake,
    async stop() {
      isStopped = true
      unsubscribe()
      await task?.destroy()
      await estimators.stop()
      await running
    },
  }
}

/** Do readings up to `to` reach the end of a window that was not dealt with yet? */
function closesWindow({ mark, timeline }: Desk, to: number): boolean {
  const hopMs = (timeline.settings.at(-1)?.content.hopSeconds ?? 60) * 1000
  return mark.doneUpTo === null || to >= mark.doneUpTo + hopMs
}
