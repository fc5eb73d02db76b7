/** Faults of clock or position put into the words of the answer. */
import type { EstimateResult, SensorFinding } from '../schemas/estimate.ts'
import type { PreparedArray } from './preparedArray.ts'
import type { RandomSea } from './randomSea.ts'
import { findFault } from './sensorFaults.ts'
import { defaultClockSd, defaultPositionSd } from './systematicError.ts'
import type { ArrayWindow } from './window.ts'

export interface FaultVerdict {
  /** Index in the window's sensors. */
  sensor: number
  finding: Extract<SensorFinding, 'clock' | 'position'>
  clockOffset: number | null
  clockOffsetSd: number | null
  positionOffset: number | null
  positionOffsetSd: number | null
  detail: string
  value: number
  limit: number
}

export function judgeSensors(
  window: ArrayWindow,
  prepared: PreparedArray,
  sea: RandomSea,
): { fault: FaultVerdict | null; ambiguous: boolean } {
  const { frame, usable } = prepared
  const ordered = frame.order.map((n) => usable[n])
  const lead = sea.trains.reduce((best, train) => (train.m0 > best.m0 ? train : best))
  const usual = ordered.map((index) => {
    const sensor = window.sensors[index]
    const position = sensor.positionSd ?? defaultPositionSd(frame.aperture)
    return Math.hypot(sensor.clockSd ?? defaultClockSd, position / lead.speed)
  })
  const { fault, ambiguous } = findFault(sea.found.fit, usual, 1 / lead.peak)
  if (!fault) return { fault: null, ambiguous }
  const isClock = fault.kind === 'clock'
  const size = isClock
    ? `${fault.value.toFixed(2)} ± ${fault.sd.toFixed(2)} s`
    : `${fault.value.toFixed(1)} ± ${fault.sd.toFixed(1)} m`
  const id = window.sensors[ordered[fault.sensor]].id
  return {
    ambiguous: false,
    fault: {
      sensor: ordered[fault.sensor],
      finding: isClock ? 'clock' : 'position',
      clockOffset: isClock ? fault.value : null,
      clockOffsetSd: isClock ? fault.sd : null,
      positionOffset: isClock ? null : fault.value,
      positionOffsetSd: isClock ? null : fault.sd,
      detail: `${id}: ${isClock ? 'clock off by' : 'position off along the waves by'} ${size}; left out`,
      value: fault.value,
      limit: 4 * fault.sd,
    },
  }
}

/** Names the sensors left out, with what is thought to be wrong. */
export function blameFaults(result: EstimateResult, faults: readonly FaultVerdict[]): EstimateResult {
  if (faults.length === 0) return result
  return {
    ...result,
    sensors: result.sensors.map((sensor, index) => {
      const fault = faults.find((f) => f.sensor === index)
      if (!fault) return sensor
      const { clockOffset, clockOffsetSd, positionOffset, positionOffsetSd } = fault
      return {
        ...sensor,
        qualityFlag: 4 as const,
        findings: [...sensor.findings, fault.finding],
        clockOffset,
        clockOffsetSd,
        positionOffset,
        positionOffsetSd,
      }
    }),
    tests: [
      ...result.tests,
      ...faults.map(({ value, limit, detail }) => ({ test: 'sensor phases', flag: 4 as const, value, limit, detail })),
    ],
  }
}

/** Something is wrong with a clock or a position, but not which. */
export function doubtGeometry(result: EstimateResult): EstimateResult {
  const detail = 'the sensors do not agree on plane waves, and no single one explains it'
  return { ...result, tests: [...result.tests, { test: 'sensor phases', flag: 3, value: null, limit: null, detail }] }
}
