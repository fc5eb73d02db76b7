/** Puts a well-formed frame on the station's grid, or says why it is put aside. */
import { nearestSlot } from '../../../shared/readings/slots.ts'
import { toStored } from '../../../shared/readings/span.ts'
import type { SampleSpan } from '../../../shared/readings/span.ts'
import type { FrameMessage, RefusalCode } from '../../../shared/wire/telemetry.ts'
import type { StationFacts } from '../../services/readings.ts'

export type PlacedFrame = { span: SampleSpan } | { code: RefusalCode; detail: string }

/** A station's clock may be ahead of ours by so much. */
const toleratedLeadMs = 2_000
/** What is older comes by import. */
const oldestMs = 24 * 3_600_000
const intervalTolerance = 1e-3

export function placeFrame(frame: FrameMessage, station: StationFacts, arrivedAt: number): PlacedFrame {
  const letters = station.deployment?.sensors.map(({ letter }) => letter) ?? []
  const unknown = frame.sensors.find((id) => !letters.includes(id))
  if (unknown !== undefined) return { code: 'unknownSensor', detail: `sensor ${unknown} is not deployed` }
  if (Math.abs(frame.interval * station.sampleRate - 1) > intervalTolerance) {
    return { code: 'wrongInterval', detail: `interval ${frame.interval} s, deployed ${1 / station.sampleRate} s` }
  }
  const start = Date.parse(frame.start)
  const length = frame.values[0]?.length ?? 0
  const lastSample = start + (length - 1) * frame.interval * 1000
  if (lastSample > arrivedAt + toleratedLeadMs) {
    return { code: 'future', detail: `${((lastSample - arrivedAt) / 1000).toFixed(1)} s ahead of the server's clock` }
  }
  if (start < arrivedAt - oldestMs) return { code: 'tooOld', detail: 'older than 24 h: to be imported' }
  const series = letters.map((letter) => {
    const values = frame.values[frame.sensors.indexOf(letter)]
    return values ? Float64Array.from(values, toStored) : new Float64Array(length).fill(NaN)
  })
  return {
    span: { sampleRate: station.sampleRate, firstSlot: nearestSlot(start, station.sampleRate), letters, series },
  }
}
