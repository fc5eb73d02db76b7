/** What the form of a recomputation holds, and the order it makes. */
import type { RunOrder } from '../../../shared/schemas/run.ts'

export interface RecomputeForm {
  label: string
  reason: string
  /** UTC, as the input writes it: `2026-12-01T06:30`. */
  from: string
  to: string
  stepSeconds: string
  /** Row numbers as text; empty for those in force at each window. */
  settingsId: string
  deploymentId: string
  windowMinutes: string
  bandFrom: string
  bandTo: string
}

const utc = (ms: number): string => new Date(ms).toISOString().slice(0, 16)
const isoOf = (text: string): string => {
  const ms = Date.parse(`${text}Z`)
  return Number.isNaN(ms) ? '' : new Date(ms).toISOString()
}
const numberOf = (text: string): number | null => (text.trim() === '' ? null : Number(text.replace(',', '.')))

/** The last hour that ended before `nowMs`. */
export const emptyForm = (nowMs: number, hopSeconds: number): RecomputeForm => ({
  label: '',
  reason: '',
  from: utc(nowMs - 7_200_000),
  to: utc(nowMs - 3_600_000),
  stepSeconds: String(hopSeconds),
  settingsId: '',
  deploymentId: '',
  windowMinutes: '',
  bandFrom: '',
  bandTo: '',
})

/** Fields left empty change nothing. */
export function orderOf(form: RecomputeForm): RunOrder {
  const [minutes, bandFrom, bandTo] = [form.windowMinutes, form.bandFrom, form.bandTo].map(numberOf)
  return {
    label: form.label.trim(),
    reason: form.reason.trim(),
    startsAt: isoOf(form.from),
    endsAt: isoOf(form.to),
    stepSeconds: Number(form.stepSeconds),
    settingsId: form.settingsId === '' ? null : Number(form.settingsId),
    deploymentId: form.deploymentId === '' ? null : Number(form.deploymentId),
    changes: {
      ...(minutes !== null && { windowSeconds: Math.round(60 * minutes) }),
      ...(bandFrom !== null && { bandFrom }),
      ...(bandTo !== null && { bandTo }),
    },
  }
}
