/** Estimates: which windows are due, what is saved of them, and how they are shown. */
export { dueWindows, longestOrderlyCatchUp } from './estimates/dueWindows.ts'
export type { WindowGrid } from './estimates/dueWindows.ts'
export { inForce, readDeploymentVersion, readTimelines } from './estimates/timeline.ts'
export type { DeploymentVersion, SettingsVersion, StationTimeline } from './estimates/timeline.ts'
export { assembleWindow, readingsFrom } from './estimates/assemble.ts'
export { chanceEstimates, commitSeenBy } from './estimates/again.ts'
export type { StoredEstimate } from './estimates/again.ts'
export { readLevelDrift } from './estimates/levelDrift.ts'
export { pastFigures } from './estimates/past.ts'
export { confirmClockOffset, listClockOffsets } from './estimates/clockOffsets.ts'
export { beginMark, countLate, firstReadingAt, newestLate, noteLate } from './estimates/late.ts'
export type { LateWindow } from './estimates/late.ts'
export { Superseded, takeOver } from './estimates/watermark.ts'
export type { Mark } from './estimates/watermark.ts'
export { passOver, saveEstimate } from './estimates/save.ts'
export type { ComputedEstimate, WindowOutcome } from './estimates/save.ts'
export { thinDetails } from './estimates/thinDetails.ts'
export { estimateRow, inventedNote } from './estimates/row.ts'
export type { EstimateFigures, EstimateMaking, Origin } from './estimates/row.ts'
export {
  currentEstimateOf,
  estimatesBetween,
  hasSeen,
  lastGoodEstimateOf,
  wholeEstimate,
  wholeLatestEstimate,
} from './estimates/read.ts'
