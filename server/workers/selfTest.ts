/** The self-test of the estimator, in a thread of its own: it takes a second of work, and pages must not wait for it. */
import { Worker } from 'node:worker_threads'
import { hasPassed } from '../../shared/waves/selfTest.ts'
import type { SelfCheck } from '../../shared/waves/selfTest.ts'

const bootstrap = new URL('./thread.mjs', import.meta.url)
const program = new URL('./selfTestThread.ts', import.meta.url)

/** Sentences of what failed; empty when all is well. A check that throws is a check that failed. */
export function faultsOf(checks: () => SelfCheck[]): string[] {
  try {
    return checks()
      .filter((check) => !hasPassed(check))
      .map(({ name, found, wanted, tolerance }) => `${name}: ${found}, not ${wanted} ± ${tolerance}`)
  } catch (error) {
    return [notRun(error)]
  }
}

const notRun = (error: unknown): string =>
  `it could not be run (${error instanceof Error ? error.message : String(error)})`

/** Runs the checks once and answers what failed. */
export function runSelfTest(): Promise<string[]> {
  const worker = new Worker(bootstrap, { workerData: { program: program.href }, execArgv: [] })
  return new Promise<string[]>((resolve) => {
    worker.once('message', (faults: string[]) => resolve(faults))
    worker.once('error', (error) => resolve([notRun(error)]))
    worker.once('exit', (code) => resolve([notRun(`the thread ended with code ${code}`)]))
  }).finally(() => worker.terminate())
}
