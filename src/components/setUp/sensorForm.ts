/** An instrument of the register and a correction of its clock, as they are typed. Pure. */
import { clockOffsetOrder, sensorChange } from '../../../shared/schemas/stationSetUpSensors.ts'
import type { ClockOffsetOrder, SensorChange, SensorRecord } from '../../../shared/schemas/stationSetUpSensors.ts'
import { numberIn } from '../limits/limitForm.ts'
import { faultsOf } from './formFaults.ts'
import { dayWords } from './stationWords.ts'

export interface SensorForm {
  serial: string
  calibrationDue: string
  cleaningDue: string
}

export const sensorLabels: Record<keyof SensorForm, string> = {
  serial: 'Serial number',
  calibrationDue: 'Calibration due',
  cleaningDue: 'Cleaning due',
}

export const sensorFormOf = (sensor: SensorRecord): SensorForm => ({
  ...{ serial: sensor.serial, calibrationDue: sensor.calibrationDue ?? '', cleaningDue: sensor.cleaningDue ?? '' },
})

const fields = sensorChange.omit({ reason: true })

export function sensorFieldsOf(form: SensorForm): {
  fields: Omit<SensorChange, 'reason'> | null
  faults: Record<string, string>
} {
  const parsed = fields.safeParse({
    ...{ serial: form.serial, calibrationDue: form.calibrationDue || null, cleaningDue: form.cleaningDue || null },
  })
  return parsed.success ? { fields: parsed.data, faults: {} } : { fields: null, faults: faultsOf(parsed.error) }
}

export interface ClockForm {
  offset: string
  sd: string
  /** Day and clock in UTC. */
  day: string
  time: string
}

const order = clockOffsetOrder.omit({ reason: true })

export function clockOffsetOf(form: ClockForm): {
  order: Omit<ClockOffsetOrder, 'reason'> | null
  faults: Record<string, string>
} {
  const moment = Date.parse(`${form.day}T${form.time}:00Z`)
  const parsed = order.safeParse({
    validFrom: Number.isFinite(moment) ? new Date(moment).toISOString() : '',
    ...{ offsetSeconds: numberIn(form.offset), sd: numberIn(form.sd) },
  })
  if (parsed.success) return { order: parsed.data, faults: {} }
  const faults = faultsOf(parsed.error)
  if (faults.validFrom) faults.validFrom = 'a day and a time are needed'
  return { order: null, faults }
}

/** `due 2 Oct 2026, overdue`; `no date` where none was set. `today` as 2026-10-02. */
export function dueWords(due: string | null, today: string): string {
  if (due === null) return 'no date set'
  return due < today ? `${dayWords(due)}, overdue` : dayWords(due)
}
