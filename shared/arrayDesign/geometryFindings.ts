/** What the positions alone say of an array: how many, on a line, at one place, above water, moved. */
import { rangeAndBearing } from '../geodesy.ts'
import type { GridPosition } from '../geodesy.ts'
import type { PlacedSensor } from '../schemas/stationSetUpDeployments.ts'
import type { DesignFinding } from '../schemas/stationSetUpDesign.ts'
import { arrayFrame, leastAxisRatio } from '../waves/arrayGeometry.ts'

export interface EarlierDeployment {
  number: number
  sensors: readonly PlacedSensor[]
}

/** Nearer together two sensors say the same, m. */
const leastDistance = 0.5
/** Height of a triangle as a share of its longest side: flatter is a line. */
const leastTriangle = 0.02
/** Between depth and level of the bed, m. */
const depthMismatch = 0.3
/** A sensor that moved less is not asked about, m and standard deviations. */
const leastMove = 0.1
const leastMoveSds = 3

const finding = (
  check: string,
  quality: DesignFinding['quality'],
  sentence: string,
  [value, limit, unit]: [value?: number | null, limit?: number | null, unit?: string] = [],
): DesignFinding => ({ check, quality, sentence, value: value ?? null, limit: limit ?? null, unit: unit ?? '' })

export function geometryFindings(
  sensors: readonly PlacedSensor[],
  { waterDepth, levelOfBed }: { waterDepth: number; levelOfBed: number },
  earlier: EarlierDeployment | null,
): DesignFinding[] {
  return [
    countFinding(sensors.length),
    ...lineFindings(sensors),
    samePlaceFinding(sensors),
    aboveWaterFinding(sensors, waterDepth),
    depthFinding(waterDepth, levelOfBed),
    ...movedFindings(sensors, earlier),
  ]
}

function countFinding(count: number): DesignFinding {
  const figures: [number, number, string] = [count, 4, 'sensors']
  if (count < 3) return finding('count', 'fail', `${count} of at least 3 sensors: no direction can be read`, figures)
  if (count === 3) return finding('count', 'suspect', '3 sensors: none to spare, and no wrong clock or position can be found', figures) // prettier-ignore
  return finding('count', 'good', `${count} sensors: one may fail, and a wrong one can be found`, figures)
}

function lineFindings(sensors: readonly PlacedSensor[]): DesignFinding[] {
  if (sensors.length < 3) return []
  const { axisRatio } = arrayFrame(sensors)
  const whole: [number, number, string] = [axisRatio, leastAxisRatio, '']
  if (axisRatio < leastAxisRatio) {
    return [finding('line', 'fail', 'All sensors stand on one line: left and right of it cannot be told apart', whole)]
  }
  const flat = flattestTriangle(sensors)
  const figures: [number, number, string] = [flat.share, leastTriangle, '']
  return [
    flat.share < leastTriangle
      ? finding('line', 'suspect', `${flat.letters.join(', ')} stand on one line`, figures)
      : finding('line', 'good', 'No three sensors on one line', figures),
  ]
}

function flattestTriangle(sensors: readonly PlacedSensor[]): { share: number; letters: string[] } {
  let flattest = { share: Infinity, letters: [''] }
  for (let a = 0; a < sensors.length; a++) {
    for (let b = a + 1; b < sensors.length; b++) {
      for (let c = b + 1; c < sensors.length; c++) {
        const corners = [sensors[a], sensors[b], sensors[c]]
        const share = triangleShare(corners)
        if (share < flattest.share) flattest = { share, letters: corners.map(({ letter }) => letter) }
      }
    }
  }
  return flattest
}

/** Height over the longest side, as a share of it; 0 where two corners are one. */
function triangleShare([a, b, c]: readonly GridPosition[]): number {
  const doubled = Math.abs((b.east - a.east) * (c.north - a.north) - (c.east - a.east) * (b.north - a.north))
  const longest = Math.max(rangeAndBearing(a, b).range, rangeAndBearing(b, c).range, rangeAndBearing(a, c).range)
  return longest > 0 ? doubled / longest ** 2 : 0
}

function samePlaceFinding(sensors: readonly PlacedSensor[]): DesignFinding {
  let closest = { range: Infinity, letters: [''] }
  sensors.forEach((a, n) => {
    for (const b of sensors.slice(n + 1)) {
      const { range } = rangeAndBearing(a, b)
      if (range < closest.range) closest = { range, letters: [a.letter, b.letter] }
    }
  })
  const value = Number.isFinite(closest.range) ? closest.range : null
  const figures: [number | null, number, string] = [value, leastDistance, 'm']
  return closest.range < leastDistance
    ? finding('samePlace', 'fail', `${closest.letters.join(' and ')} stand at one place, ${closest.range.toFixed(2)} m apart`, figures) // prettier-ignore
    : finding('samePlace', 'good', 'No two sensors at one place', figures)
}

function aboveWaterFinding(sensors: readonly PlacedSensor[], waterDepth: number): DesignFinding {
  const pressure = sensors.filter(({ kind }) => kind === 'pressure')
  const dry = pressure.filter(({ heightAboveBed }) => heightAboveBed >= waterDepth).map(({ letter }) => letter)
  const highest = pressure.length > 0 ? Math.max(...pressure.map(({ heightAboveBed }) => heightAboveBed)) : null
  const figures: [number | null, number, string] = [highest, waterDepth, 'm']
  return dry.length > 0
    ? finding('aboveWater', 'fail', `${dry.join(', ')} would stand above still water`, figures)
    : finding('aboveWater', 'good', 'All pressure sensors under water', figures)
}

function depthFinding(waterDepth: number, levelOfBed: number): DesignFinding {
  const apart = waterDepth + levelOfBed
  const figures: [number, number, string] = [apart, depthMismatch, 'm']
  return Math.abs(apart) > depthMismatch
    ? finding('depth', 'suspect', `Depth ${waterDepth.toFixed(1)} m and level of the bed ${levelOfBed.toFixed(1)} m do not fit: below datum they are one`, figures) // prettier-ignore
    : finding('depth', 'good', 'Depth and level of the bed fit', figures)
}

function movedFindings(sensors: readonly PlacedSensor[], earlier: EarlierDeployment | null): DesignFinding[] {
  if (!earlier) return []
  const moved = sensors.flatMap((sensor) => {
    const before = earlier.sensors.find(({ serial }) => serial === sensor.serial)
    if (!before) return []
    const { range } = rangeAndBearing(before, sensor)
    const limit = Math.max(leastMove, leastMoveSds * Math.hypot(before.positionSd, sensor.positionSd))
    if (range <= limit) return []
    const sentence = `${sensor.letter} moved ${range.toFixed(2)} m since deployment ${earlier.number}`
    return [finding(`moved:${sensor.letter}`, 'suspect', sentence, [range, limit, 'm'])]
  })
  if (moved.length > 0) return moved
  return [finding('moved', 'good', `No sensor moved since deployment ${earlier.number}`)]
}
