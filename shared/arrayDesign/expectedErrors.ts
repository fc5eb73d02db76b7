/** One standard deviation of heading and speed by direction that an array can reach in a stated sea, whole and without each sensor. */
import { radiansFromEast } from '../directions.ts'
import type { DesignCheck, DesignQuestion } from '../schemas/stationSetUpDesign.ts'
import { phaseSpeed, pressureResponse, waveNumber } from '../waves/dispersion.ts'
import { jonswapShape } from '../waves/jonswap.ts'
import { arrayFrame, leastAxisRatio } from '../waves/arrayGeometry.ts'
import { coherencesOf, directionBounds } from './directionBound.ts'
import type { SeaLine } from './directionBound.ts'
import { baselines } from './falsePeaks.ts'
import { systematicErrors } from './systematicErrors.ts'
import type { UnsureSensor } from './systematicErrors.ts'

export interface DesignSensor extends UnsureSensor {
  letter: string
  kind: 'pressure' | 'surface'
  /** m */
  heightAboveBed: number
}

export type ErrorCurve = DesignCheck['curves'][number]

/** Of the peak: where a train's energy lies that a reading uses. */
const bandFrom = 0.75
const bandTo = 1.8
/** Fewer for a large array, so that a dragged sensor is followed. */
const linesOf = (sensors: number): number => (sensors > 12 ? 8 : 20)
const gamma = 3.3
const stepDegrees = 10
const degree = Math.PI / 180

/** Directions of the curves, degrees true that waves come from. */
export const curveDirections = Array.from({ length: 360 / stepDegrees }, (_, n) => n * stepDegrees)

/** A JONSWAP train (γ 3.3) scaled to the height, with each sensor's noise as it stands against the surface. */
export function seaLines(sensors: readonly DesignSensor[], { sea, waterDepth, gravity }: DesignQuestion): SeaLine[] {
  const peak = 1 / sea.peakPeriod
  const lineCount = linesOf(sensors.length)
  const width = ((bandTo - bandFrom) * peak) / lineCount
  const wholeShape = shapeIntegral(peak)
  const floor = (2 * sea.noiseSd ** 2) / sea.sampleRate
  return Array.from({ length: lineCount }, (_, n) => {
    const frequency = bandFrom * peak + (n + 0.5) * width
    const k = waveNumber(2 * Math.PI * frequency, waterDepth, gravity)
    const density = ((sea.significantWaveHeight / 4) ** 2 * jonswapShape(frequency, peak, gamma)) / wholeShape
    const noise = sensors.map(({ kind, heightAboveBed }) =>
      kind === 'surface' ? floor : floor / pressureResponse(k, waterDepth, heightAboveBed) ** 2,
    )
    return { width, density, noise, waveNumber: k }
  })
}

function shapeIntegral(peak: number): number {
  const step = peak / 50
  let sum = 0
  for (let f = 0.4 * peak; f < 8 * peak; f += step) sum += jonswapShape(f, peak, gamma) * step
  return sum
}

/** The curve of all sensors, then one for each that is left out. */
export function expectedErrors(sensors: readonly DesignSensor[], question: DesignQuestion): ErrorCurve[] {
  const left: (number | null)[] = [null, ...sensors.map((_, n) => n)]
  const reasons = left.map((one) => whyNone(sensors.filter((_, n) => n !== one)))
  const curves: ErrorCurve[] = left.map((one, n) => ({
    without: one === null ? null : sensors[one].letter,
    headingSd: curveDirections.map(() => null),
    speedSd: curveDirections.map(() => null),
    reason: reasons[n],
  }))
  if (reasons[0] !== null) return curves
  const { sea, waterDepth, gravity, windowSeconds } = question
  const lines = seaLines(sensors, question)
  const speed = phaseSpeed(sea.peakPeriod, waterDepth, gravity)
  const { longest } = baselines(sensors)
  // Waves from opposite directions are read equally well.
  for (let n = 0; n < curveDirections.length / 2; n++) {
    const toward = radiansFromEast(curveDirections[n] + 180)
    const coherences = coherencesOf(sensors, lines, toward, sea.directionalSpread * degree, longest)
    const bounds = directionBounds(coherences, lines, windowSeconds)
    left.forEach((one, place) => {
      const bound = bounds[place]
      if (reasons[place] !== null || !bound) return
      const kept = sensors.filter((_, index) => index !== one)
      const systematic = systematicErrors(kept, toward, speed)
      if (!systematic) return
      for (const index of [n, n + curveDirections.length / 2]) {
        curves[place].headingSd[index] = Math.sqrt(bound.direction + systematic.direction) / degree
        curves[place].speedSd[index] = Math.sqrt(bound.logSpeed + systematic.logSpeed)
      }
    })
  }
  return curves
}

function whyNone(sensors: readonly DesignSensor[]): string | null {
  if (sensors.length < 3) return `${sensors.length} sensors are left; a direction needs three`
  return arrayFrame(sensors).axisRatio < leastAxisRatio ? 'the sensors that are left stand on one line' : null
}
