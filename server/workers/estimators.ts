/**
 * Worker threads that estimate windows. A thread that does not answer in time, or dies, is ended and replaced; the
 * window it had is handed back with the reason, and the next one goes on.
 */
import { Worker } from 'node:worker_threads'
import type { EstimateAnswer, EstimateTask, WorkerReply, WorkerRequest } from './estimateTask.ts'

export class EstimationFailed extends Error {
  constructor(
    readonly kind: 'deadline' | 'died' | 'fault' | 'stopped',
    message: string,
  ) {
    super(message)
  }
}

export interface Estimators {
  /** How many windows can be worked on at the same time. */
  readonly threads: number
  /** Waits for a free thread. Rejects with `EstimationFailed`. */
  run(task: EstimateTask): Promise<EstimateAnswer>
  stop(): Promise<void>
}

export interface EstimatorsOptions {
  threads: number
  deadlineMs: number
  /** The thread's program; another one in tests of what a broken thread does. */
  program?: URL
  /** Hears of every thread that had to be ended. */
  onLost?: (failure: EstimationFailed) => void
}

interface Thread {
  worker: Worker
  current: Job | null
}

interface Job {
  id: number
  task: EstimateTask
  settle: (outcome: EstimateAnswer | EstimationFailed) => void
  timer: NodeJS.Timeout | null
}

const bootstrap = new URL('./thread.mjs', import.meta.url)
const ownProgram = new URL('./estimateWindow.ts', import.meta.url)

export function startEstimators({ threads, deadlineMs, program = ownProgram, onLost }: EstimatorsOptions): Estimators {
  const waiting: Job[] = []
  const crew = new Set<Thread>()
  let lastId = 0
  let isStopped = false

  function hire(): void {
    const worker = new Worker(bootstrap, { workerData: { program: program.href }, execArgv: [] })
    const thread: Thread = { worker, current: null }
    crew.add(thread)
    worker.on('message', (reply: WorkerReply) => receive(thread, reply))
    worker.on('error', (error) => lose(thread, new EstimationFailed('died', error.message)))
    worker.on('exit', (code) => lose(thread, new EstimationFailed('died', `thread ended with code ${code}`)))
  }

  function receive(thread: Thread, reply: WorkerReply): void {
    const job = thread.current
    if (job === null || job.id !== reply.id) return
    release(thread, 'answer' in reply ? reply.answer : new EstimationFailed('fault', reply.fault))
    handOut()
  }

  function release(thread: Thread, outcome: EstimateAnswer | EstimationFailed): void {
    const job = thread.current
    thread.current = null
    if (job === null) return
    if (job.timer) clearTimeout(job.timer)
    job.settle(outcome)
  }

  /** Ends a thread for good and puts another in its place. */
  function lose(thread: Thread, failure: EstimationFailed): void {
    if (!crew.delete(thread)) return
    void thread.worker.terminate()
    const hadWork = thread.current !== null
    release(thread, failure)
    if (isStopped) return
    onLost?.(failure)
    // A thread that dies before it had any work would be replaced for ever: the next window hires again.
    if (hadWork) hire()
    handOut()
  }

  function handOut(): void {
    if (waiting.length > 0 && crew.size < threads) hire()
    for (const thread of crew) {
      if (thread.current !== null) continue
      const job = waiting.shift()
      if (!job) return
      thread.current = job
      job.timer = setTimeout(() => {
        lose(thread, new EstimationFailed('deadline', `no answer within ${deadlineMs / 1000} s`))
      }, deadlineMs)
      const request: WorkerRequest = { id: job.id, task: job.task }
      thread.worker.postMessage(request)
    }
  }

  for (let n = 0; n < threads; n += 1) hire()

  return {
    threads,
    run: (task) =>
      new Promise((resolve, reject) => {
        if (isStopped) return reject(new EstimationFailed('stopped', 'the server is stopping'))
        const settle: Job['settle'] = (outcome) =>
          outcome instanceof EstimationFailed ? reject(outcome) : resolve(outcome)
        waiting.push({ id: (lastId += 1), task, settle, timer: null })
        handOut()
      }),
    async stop() {
      isStopped = true
      const failure = new EstimationFailed('stopped', 'the server is stopping')
      for (const job of waiting.splice(0)) job.settle(failure)
      const ended = [...crew].map((thread) => {
        lose(thread, failure)
        return thread.worker.terminate()
      })
      await Promise.all(ended)
    },
  }
}
