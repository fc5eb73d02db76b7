/** Whether what a station says of itself is what is deployed; otherwise the difference in words. */
import type { HelloMessage } from '../../../shared/wire/telemetry.ts'
import type { StationFacts } from '../../services/readings.ts'

const unitOf = { pressure: 'dbar', surface: 'm' } as const

export function differenceOfHello(hello: HelloMessage, { sampleRate, deployment }: StationFacts): string | null {
  if (!deployment) return 'no array is deployed at this station'
  if (Math.abs(hello.sampleRate - sampleRate) > sampleRate * 1e-6) {
    return `sample rate ${hello.sampleRate} Hz, deployed ${sampleRate} Hz`
  }
  const said = new Map(hello.sensors.map((sensor) => [sensor.id, sensor]))
  if (said.size < hello.sensors.length) return 'a sensor is named twice'
  const missing = deployment.sensors.filter(({ letter }) => !said.has(letter)).map(({ letter }) => letter)
  if (missing.length > 0) return `deployed but not named: ${missing.join(', ')}`
  const deployed = new Map(deployment.sensors.map((sensor) => [sensor.letter, sensor]))
  for (const { id, kind, unit } of hello.sensors) {
    const sensor = deployed.get(id)
    if (!sensor) return `named but not deployed: ${id}`
    if (kind !== sensor.kind) return `${id} is ${kind}, deployed ${sensor.kind}`
    if (unit !== unitOf[kind]) return `${id} is in ${unit}, ${kind} sensors are in ${unitOf[kind]}`
  }
  return null
}
