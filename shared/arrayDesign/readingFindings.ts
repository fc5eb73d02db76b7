/** What an array can read, in words: false peaks, errors, loss of a sensor, survey, clocks, pressure at the bed. */
import { isWithin, ambiguousPower } from './falsePeaks.ts'
import type { FalsePeakSweep } from './falsePeaks.ts'
import { curveDirections } from './expectedErrors.ts'
import type { ErrorCurve } from './expectedErrors.ts'
import { threeDigits } from '../directions.ts'
import type { PlacedSensor } from '../schemas/stationSetUpDeployments.ts'
import type { DesignFinding, DesignQuestion } from '../schemas/stationSetUpDesign.ts'
import { pressureResponse, waveNumber } from '../waves/dispersion.ts'
import { defaultEstimateSettings } from '../waves/window.ts'

type Quality = DesignFinding['quality']

/** From the first a figure is suspect, from the second it fails. */
export const designLimits = {
  falsePeak: [0.7, ambiguousPower],
  heading: [5, 15],
  speed: [0.1, 0.3],
  survey: [0.5, 2],
} as const

const grade = (value: number, [suspect, fail]: readonly [number, number]): Quality =>
  value >= fail ? 'fail' : value >= suspect ? 'suspect' : 'good'

export interface ReadingFigures {
  sweep: FalsePeakSweep
  curves: readonly ErrorCurve[]
  /** Degrees; null where it cannot be determined. */
  systematicHeading: number | null
  /** s */
  clockSkewAllowed: number | null
}

export function readingFindings(
  sensors: readonly PlacedSensor[],
  question: DesignQuestion,
  { sweep, curves, systematicHeading, clockSkewAllowed }: ReadingFigures,
): DesignFinding[] {
  const [whole, ...without] = curves
  return [
    falsePeakFinding(sweep, question),
    errorFinding('heading', worstOf(whole.headingSd, question), whole.reason),
    errorFinding('speed', worstOf(whole.speedSd, question), whole.reason),
    ...lossFindings(whole, without, question),
    ...surveyFindings(systematicHeading),
    ...clockFindings(sensors, clockSkewAllowed),
    ...responseFindings(sensors, question),
  ]
}

/** The largest over the directions that waves can come from; null where one of them cannot be determined. */
export function worstOf(
  curve: readonly (number | null)[],
  { openSeaSector }: DesignQuestion,
): { value: number; from: number } | null {
  const open = curveDirections.map((from, n) => ({ from, value: curve[n] })).filter(({ from }) => isWithin(from, openSeaSector)) // prettier-ignore
  const known = open.flatMap(({ from, value }) => (value === null ? [] : [{ from, value }]))
  if (known.length === 0 || known.length < open.length) return null
  return known.reduce((worst, one) => (one.value > worst.value ? one : worst))
}

function falsePeakFinding({ worst, aliasFreePeriod }: FalsePeakSweep, question: DesignQuestion): DesignFinding {
  const limit = designLimits.falsePeak[0]
  if (!worst || worst.power < limit) {
    const sentence = `No direction is mistaken for another from ${question.periodFrom} to ${question.periodTo} s`
    return { check: 'falsePeak', quality: 'good', sentence, value: worst?.power ?? 0, limit, unit: '' }
  }
  const isFree = aliasFreePeriod !== null && aliasFreePeriod <= question.sea.peakPeriod
  const quality = worst.power >= ambiguousPower && !isFree ? 'fail' : 'suspect'
  const mistaken = `waves of ${worst.period.toFixed(1)} s from ${threeDigits(worst.from)} T can be read as from ${threeDigits(worst.readsFrom)} T` // prettier-ignore
  const until = aliasFreePeriod === null ? '' : `, from ${aliasFreePeriod.toFixed(1)} s up none`
  return { check: 'falsePeak', quality, sentence: `At a single period ${mistaken}${until}`, value: worst.power, limit, unit: '' } // prettier-ignore
}

function errorFinding(
  check: 'heading' | 'speed',
  worst: { value: number; from: number } | null,
  reason: string | null,
): DesignFinding {
  const unit = check === 'heading' ? '°' : ' %'
  const factor = check === 'heading' ? 1 : 100
  const limits = designLimits[check]
  const limit = limits[0] * factor
  const subject = check === 'heading' ? 'Heading' : 'Speed'
  if (!worst) {
    const sentence = `${subject} cannot be determined: ${reason ?? 'the sea is not read from some direction'}`
    return { check, quality: 'fail', sentence, value: null, limit, unit: unit.trim() }
  }
  const value = worst.value * factor
  const sentence = `${subject} to ± ${value.toFixed(1)}${unit} at the worst, from ${threeDigits(worst.from)} T`
  return { check, quality: grade(worst.value, limits), sentence, value, limit, unit: unit.trim() }
}

function lossFindings(whole: ErrorCurve, without: readonly ErrorCurve[], question: DesignQuestion): DesignFinding[] {
  if (whole.reason !== null) return []
  const worst = without.map((curve) => ({ letter: curve.without ?? '', error: worstOf(curve.headingSd, question) }))
  const [limit] = designLimits.heading
  const lost = worst.filter(({ error }) => error === null).map(({ letter }) => letter)
  const shape = { check: 'loss', limit, unit: '°' }
  if (lost.length === without.length) return [{ ...shape, quality: 'suspect', sentence: 'Without any one of them no direction is left', value: null }] // prettier-ignore
  if (lost.length > 0) return [{ ...shape, quality: 'suspect', sentence: `Without ${lost.join(', or ')} no direction is left`, value: null }] // prettier-ignore
  const weakest = worst.reduce((most, one) => ((one.error?.value ?? 0) > (most.error?.value ?? 0) ? one : most))
  const value = weakest.error?.value ?? 0
  const sentence = `Without ${weakest.letter}, the one missed most, heading to ± ${value.toFixed(1)}°`
  return [{ ...shape, quality: value >= limit ? 'suspect' : 'good', sentence, value }]
}

function surveyFindings(heading: number | null): DesignFinding[] {
  if (heading === null) return []
  const quality = grade(heading, designLimits.survey)
  const [limit] = designLimits.survey
  const bound = quality === 'good' ? `less than ${(Math.ceil(heading * 10) / 10).toFixed(1)}` : heading.toFixed(1)
  const sentence = `Survey and clock errors add ${bound}° to heading`
  return [{ check: 'survey', quality, sentence, value: heading, limit, unit: '°' }]
}

function clockFindings(sensors: readonly PlacedSensor[], allowed: number | null): DesignFinding[] {
  if (allowed === null) return []
  const worst = sensors.reduce((most, sensor) => (sensor.clockSd > most.clockSd ? sensor : most))
  const shape = { check: 'clock', value: worst.clockSd, limit: allowed, unit: 's' }
  return worst.clockSd > allowed
    ? [{ ...shape, quality: 'suspect', sentence: `The clock of ${worst.letter} is sure to ${worst.clockSd} s; from ${allowed.toFixed(3)} s on it turns a heading by half a degree` }] // prettier-ignore
    : [{ ...shape, quality: 'good', sentence: `Clocks are sure enough: ${allowed.toFixed(3)} s would turn a heading by half a degree` }] // prettier-ignore
}

/** The shortest waves die out before they reach a sensor at the bed. */
function responseFindings(sensors: readonly PlacedSensor[], question: DesignQuestion): DesignFinding[] {
  const pressure = sensors.filter(({ kind }) => kind === 'pressure')
  if (pressure.length === 0) return []
  const lowest = pressure.reduce((low, sensor) => (sensor.heightAboveBed < low.heightAboveBed ? sensor : low))
  const k = waveNumber((2 * Math.PI) / question.periodFrom, question.waterDepth, question.gravity)
  const value = pressureResponse(k, question.waterDepth, lowest.heightAboveBed)
  const limit = defaultEstimateSettings.leastPressureResponse
  const shape = { check: 'response', value, limit, unit: '' }
  const share = `${(100 * value).toFixed(0)} % of a ${question.periodFrom} s wave`
  return value < limit
    ? [{ ...shape, quality: 'suspect', sentence: `Only ${share} is felt at ${lowest.letter}: such short waves are not measured there` }] // prettier-ignore
    : [{ ...shape, quality: 'good', sentence: `${share} is felt at ${lowest.letter}, the deepest sensor` }]
}
