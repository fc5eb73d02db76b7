import { afterEach, describe, expect, it } from 'vitest'
import { startEstimators } from '../../server/workers/estimators.ts'
import type { Estimators } from '../../server/workers/estimators.ts'
import type { EstimateTask } from '../../server/workers/estimateTask.ts'
import { defaultEstimateSettings } from '../../shared/waves/window.ts'
import { dies, hangs, throws } from '../support/unrulyEstimator.ts'

const task = (sampleRate: number): EstimateTask => ({
  window: {
    sampleRate,
    sensors: [],
    series: [],
    waterDepth: 10,
    waterDepthSource: 'nominal',
    settings: defaultEstimateSettings,
  },
  windowEndsAt: 0,
  clockOffset: null,
  known: { tracks: [], nextKey: 1 },
  past: [],
})
const fine = 2
const program = new URL('../support/unrulyEstimator.ts', import.meta.url)
let estimators: Estimators | null = null
afterEach(() => estimators?.stop())

function start(threads: number, lost: string[] = []) {
  estimators = startEstimators({ threads, deadlineMs: 2_000, program, onLost: ({ kind }) => void lost.push(kind) })
  return estimators
}

describe('worker threads that estimate', () => {
  it('a hung one is ended after the deadline, and the windows behind it go on', async () => {
    const lost: string[] = []
    const { run } = start(1, lost)
    const outcomes = await Promise.allSettled([run(task(fine)), run(task(hangs)), run(task(fine)), run(task(fine))])
    expect(outcomes.map(({ status }) => status)).toEqual(['fulfilled', 'rejected', 'fulfilled', 'fulfilled'])
    expect(outcomes[1]).toMatchObject({ reason: { kind: 'deadline', message: 'no answer within 2 s' } })
    expect(lost).toEqual(['deadline'])
  })

  it('one that dies hands its window back with the reason and is replaced', async () => {
    const { run } = start(2)
    const outcomes = await Promise.allSettled([run(task(dies)), run(task(dies)), run(task(fine)), run(task(fine))])
    expect(outcomes.map(({ status }) => status)).toEqual(['rejected', 'rejected', 'fulfilled', 'fulfilled'])
    expect(outcomes[0]).toMatchObject({ reason: { kind: 'died' } })
  })

  it('a fault in the computation costs the window, not the thread', async () => {
    const lost: string[] = []
    const { run } = start(1, lost)
    await expect(run(task(throws))).rejects.toMatchObject({ kind: 'fault', message: 'matrix is singular' })
    await expect(run(task(fine))).resolves.toMatchObject({ figures: { completeness: 1 } })
    expect(lost).toEqual([])
  })

  it('stopping hands back what was not done', async () => {
    const { run, stop } = start(1)
    const outcome = run(task(hangs)).catch((error: unknown) => error)
    await stop()
    expect(await outcome).toMatchObject({ kind: 'stopped' })
    await expect(run(task(fine))).rejects.toMatchObject({ kind: 'stopped' })
  })
})
