/** The self-test of the estimator, run once a process before anything is published; its failure is said in the log and on the page. */
import type { Parts } from '../config/parts.ts'
import { addJob, failJob } from '../services/longJobs.ts'
import { runSelfTest } from '../workers/selfTest.ts'

/** Sentences of what failed; empty when all is well. */
export type SelfTest = () => Promise<string[]>

const kind = 'selfTest'
const title = 'Self-test of the estimator: no estimates are published'

let known: Promise<string[]> | null = null

/** Values do not change while the process lives. */
export const selfTest: SelfTest = () => (known ??= runSelfTest())

/** For what brings estimators of its own and publishes to nobody. */
export const noSelfTest: SelfTest = () => Promise.resolve([])

/** True: estimates may be published. Otherwise everyone is told why none are. */
export async function passesSelfTest(parts: Parts, run: SelfTest): Promise<boolean> {
  const faults = await run()
  if (faults.length === 0) return true
  parts.logger.fatal({ faults }, 'the self-test of the estimator failed: no estimates are published')
  const id = await addJob(parts, { kind, title, parameters: { faults } })
  await failJob(parts, id, `${faults.join('; ')}. Readings are kept and will be computed by a program that passes it.`)
  return false
}
