/** Whether what a station says of itself is what is deployed; otherwise the difference in words. */
import type { HelloMessage } from '../../../shared/wire/telemetry.ts'
import type { StationFacts } from '../../services/readings.ts'

const unitOf = { pressure: 'dbar', surface: 'm' } as const

/** The first difference, as it goes into a close reason of 120 letters. */
export const differenceOfHello = (hello: HelloMessage, station: StationFacts): string | null =>
  differencesOfHello(hello, station)[0] ?? null

/** Everything that does not fit. */
export function differencesOfHello(hello: HelloMessage, { sampleRate, deployment }: StationFacts): string[] {
  if (!deployment) return ['no array is deployed at this station']
  const differences: string[] = []
  if (Math.abs(hello.sampleRate - sampleRate) > sampleRate * 1e-6) {
    differences.push(`sample rate ${hello.sampleRate} Hz, deployed ${sampleRate} Hz`)
  }
  const said = new Map(hello.sensors.map((sensor) => [sensor.id, sensor]))
  if (said.size < hello.sensors.length) differences.push('a sensor is named twice')
  const missing = deployment.sensors.filter(({ letter }) => !said.has(letter)).map(({ letter }) => letter)
  if (missing.length > 0) differences.push(`deployed but not named: ${missing.join(', ')}`)
  const deployed = new Map(deployment.sensors.map((sensor) => [sensor.letter, sensor]))
  for (const { id, kind, unit } of hello.sensors) {
    const sensor = deployed.get(id)
    if (!sensor) differences.push(`named but not deployed: ${id}`)
    else if (kind !== sensor.kind) differences.push(`${id} is ${kind}, deployed ${sensor.kind}`)
    else if (unit !== unitOf[kind]) differences.push(`${id} is in ${unit}, ${kind} sensors are in ${unitOf[kind]}`)
  }
  return differences
}
