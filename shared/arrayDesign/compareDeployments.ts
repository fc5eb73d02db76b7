/** Two surveys of an array, sensor by sensor: who moved by how much, who came, who went. */
import { rangeAndBearing } from '../geodesy.ts'
import type { DeploymentComparison, PlacedSensor } from '../schemas/stationSetUpDeployments.ts'

export interface ComparedDeployment {
  id: number
  waterDepth: number
  levelOfBed: number
  sensors: readonly PlacedSensor[]
}

type SensorChange = DeploymentComparison['sensors'][number]

/** A survey is rounded to centimetres; nearer than this a sensor stands where it stood, m. */
const leastMove = 0.005

/** Sensors are known by their letters; metres, degrees true. Those of `before` that are gone come last. */
export function compareDeployments(before: ComparedDeployment, after: ComparedDeployment): DeploymentComparison {
  const gone = before.sensors.filter(({ letter }) => !after.sensors.some((sensor) => sensor.letter === letter))
  return {
    beforeId: before.id,
    afterId: after.id,
    waterDepthChange: after.waterDepth - before.waterDepth,
    levelOfBedChange: after.levelOfBed - before.levelOfBed,
    sensors: [
      ...after.sensors.map((sensor) => changeOf(before.sensors.find(({ letter }) => letter === sensor.letter), sensor)), // prettier-ignore
      ...gone.map(({ letter }) => withoutFigures(letter, 'removed')),
    ],
  }
}

const withoutFigures = (letter: string, change: 'added' | 'removed'): SensorChange => ({
  letter,
  change,
  movedBy: null,
  movedToward: null,
  movedBySd: null,
  raisedBy: null,
  others: [],
})

function changeOf(before: PlacedSensor | undefined, after: PlacedSensor): SensorChange {
  if (!before) return withoutFigures(after.letter, 'added')
  const { range, bearing } = rangeAndBearing(before, after)
  const raisedBy = after.heightAboveBed - before.heightAboveBed
  const others = differences(before, after)
  const isMoved = range >= leastMove || Math.abs(raisedBy) >= leastMove
  const change =
    before.serial !== after.serial ? 'replaced' : isMoved ? 'moved' : others.length > 0 ? 'altered' : 'same'
  return {
    letter: after.letter,
    change,
    movedBy: range,
    movedToward: range >= leastMove ? bearing : null,
    movedBySd: Math.hypot(before.positionSd, after.positionSd),
    raisedBy,
    others,
  }
}

const worded = {
  serial: 'serial',
  kind: 'kind',
  positionSd: 'one sigma of the position, m:',
  clockSd: 'one sigma of the clock, s:',
  scale: 'scale',
  offset: 'offset',
  pressureKind: 'pressure is',
} as const

const differences = (before: PlacedSensor, after: PlacedSensor): string[] =>
  (Object.keys(worded) as (keyof typeof worded)[])
    .filter((field) => before[field] !== after[field])
    .map((field) => `${worded[field]} ${before[field]} to ${after[field]}`)
