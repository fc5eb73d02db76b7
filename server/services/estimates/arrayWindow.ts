/** Puts together what the estimator is given from stored readings and the versions in force; pure. */
import { surgeLevel } from '../../../shared/waves/surgeLevel.ts'
import { waterDepthNow } from '../../../shared/waves/waterDepthNow.ts'
import type { ArraySensor, ArrayWindow } from '../../../shared/waves/window.ts'
import { inForce } from './timeline.ts'
import type { ClockOffsetVersion, DeployedSensor, DeploymentVersion, SettingsVersion } from './timeline.ts'

/** Readings of the deployment's sensors in its order, metres or decibars as the instruments gave them. */
export interface WindowReadings {
  /** Hz. */
  sampleRate: number
  /** Time of the first sample, ms since 1970 UTC. */
  startMs: number
  series: Float64Array[]
}

export interface WindowQuestion {
  windowEndsAt: number
  deployment: DeploymentVersion
  settings: SettingsVersion
  clockOffsets: ClockOffsetVersion[]
  /** From the beginning of the surge span, or of the window, to the window's end. */
  readings: WindowReadings
  /** Metres above datum; null when neither gauge nor table tells it. */
  tideLevel: number | null
  /** Pascals; null when there is no barometer. */
  airPressure: number | null
}

/** Mean level over so long is looked at for the surge band, ms. */
export const surgeSpanMs = 3_600_000
const standardAtmosphere = 101_325
const pascalsPerDecibar = 1e4
/** A record with more of it missing says nothing about waves of minutes. */
const leastSurgeShare = 0.95

/** Instrument's reading to metres above datum, or to decibars above the air. */
function calibrated(sensor: DeployedSensor, series: Float64Array, airPressure: number | null): Float64Array {
  const air =
    sensor.kind === 'pressure' && sensor.pressureKind === 'absolute'
      ? (airPressure ?? standardAtmosphere) / pascalsPerDecibar
      : 0
  if (sensor.scale === 1 && sensor.offset - air === 0) return series
  return series.map((value) => value * sensor.scale + sensor.offset - air)
}

function clockOffsetOf(question: WindowQuestion, sensorId: number): number | undefined {
  const own = question.clockOffsets.filter((offset) => offset.sensorId === sensorId)
  return inForce(own, question.windowEndsAt)?.offsetSeconds
}

function arraySensor(question: WindowQuestion, sensor: DeployedSensor): ArraySensor {
  const clockOffset = clockOffsetOf(question, sensor.sensorId)
  const { letter, kind, east, north, heightAboveBed, positionSd, clockSd } = sensor
  const known = { id: letter, kind, east, north, heightAboveBed, positionSd, clockSd }
  return clockOffset === undefined ? known : { ...known, clockOffset }
}

/** Samples from before the array stood as it stands belong to another geometry and count as missing. */
function sinceDeployed(question: WindowQuestion, series: Float64Array): Float64Array {
  const { readings, deployment } = question
  const before = Math.ceil(((deployment.validFrom - readings.startMs) / 1000) * readings.sampleRate)
  return before <= 0 ? series : series.map((value, n) => (n < before ? NaN : value))
}

const presentShare = (values: Float64Array): number =>
  values.reduce((count, value) => count + (Number.isNaN(value) ? 0 : 1), 0) / Math.max(1, values.length)

/** The window, and where the record of the surge band begins (null when it is too short or has too many gaps). */
export function arrayWindowOf(question: WindowQuestion): { window: ArrayWindow; surgeStartsAt: number | null } {
  const { deployment, readings, tideLevel, airPressure } = question
  const { windowSeconds, estimate: settings } = question.settings.content
  const { sampleRate } = readings
  const whole = readings.series.map((series, index) =>
    calibrated(deployment.sensors[index], sinceDeployed(question, series), airPressure),
  )
  const samples = Math.round(windowSeconds * sampleRate)
  const series = whole.map((values) => values.slice(Math.max(0, values.length - samples)))
  const sensors = deployment.sensors.map((sensor) => arraySensor(question, sensor))
  const { waterDepth: nominalDepth, levelOfBed } = deployment
  const depth = waterDepthNow({ sensors, series, nominalDepth, levelOfBed, tideLevel, ...settings })
  const window: ArrayWindow = { sampleRate, sensors, series, ...depth, settings }
  const hour = Math.round((surgeSpanMs / 1000) * sampleRate)
  if (whole.some((values) => values.length < hour)) return { window, surgeStartsAt: null }
  const level = surgeLevel(sensors, whole, sampleRate, settings)
  if (presentShare(level) < leastSurgeShare) return { window, surgeStartsAt: null }
  return { window: { ...window, surge: { sampleRate: 1, level } }, surgeStartsAt: question.windowEndsAt - surgeSpanMs }
}
