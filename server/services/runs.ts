/** Recompute runs: ordered by an administrator, worked off by a job, read beside the operational record. */
export { orderRun } from './runs/order.ts'
export { listRuns, readRun } from './runs/read.ts'
export { readRunChoices } from './runs/choices.ts'
export { compareRun } from './runs/compare.ts'
export { endRun, lastWindowOf, readRunWork, saveRunEstimate } from './runs/work.ts'
export type { RunWork } from './runs/work.ts'
