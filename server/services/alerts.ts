/** Alerts: judged, acknowledged, put aside, shown, measured. */
export type { Office } from './alerts/office.ts'
export { noConsent } from './alerts/consent.ts'
export type { Consent } from './alerts/consent.ts'
export { judgePlace, judgeStation } from './alerts/judge.ts'
export { judgeHealth } from './alerts/health.ts'
export type { OutsideHealth } from './alerts/health.ts'
export { keepTimers } from './alerts/timers.ts'
export { noteLateWindows } from './alerts/late.ts'
export {
  acknowledgeAlert,
  resetLimit,
  returnToService,
  shelveLimit,
  takeOutOfService,
  unshelveLimit,
} from './alerts/acts.ts'
export { beginDrill, endDrill } from './alerts/drill.ts'
export { readBoard } from './alerts/board.ts'
export { readAlert, readAlertDetail, readAlertHistory } from './alerts/detail.ts'
export { acknowledgementsOf, listAlerts } from './alerts/list.ts'
export { atDesk } from './alerts/desk.ts'
export type { Desk } from './alerts/desk.ts'
export { measurePerformance } from './alerts/performance.ts'
export { readCapMessages } from './alerts/cap.ts'
export { logFlood } from './alerts/floodLine.ts'
