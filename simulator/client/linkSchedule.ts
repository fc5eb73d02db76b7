import type { LinkSchedule } from '../scenarios/scenario.ts'

/** Whether the link stands at a time (ms since 1970); it always does before the anchor and without a schedule. */
export function linkStandsAt(schedule: LinkSchedule | undefined, anchor: number, time: number): boolean {
  if (!schedule) return true
  const since = (time - anchor) / 1000 - schedule.firstAfterSeconds
  return since < 0 || since % schedule.everySeconds >= schedule.downSeconds
}
