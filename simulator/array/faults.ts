/** What goes wrong with sensors, as pure functions of the sample's number. */
import type { Fault } from '../scenarios/scenario.ts'
import { uniformAt } from '../sea/random.ts'

/** Seconds after its stamp at which a sensor really samples, `seconds` after the anchor. */
export function clockOffsetOf(faults: Fault[], sensorIndex: number, seconds: number): number {
  let offset = 0
  for (const fault of faults) {
    if (fault.kind !== 'clock' || fault.sensorIndex !== sensorIndex) continue
    offset += fault.offsetSeconds * Math.min(1, Math.max(0, seconds / fault.growsOverSeconds))
  }
  return offset
}

export interface SpoilContext {
  faults: Fault[]
  sensorIndex: number
  firstSample: number
  /** Sample at which faults begin. */
  anchorSample: number
  anchorReading: number
  noiseSeed: number
}

export function spoil(values: number[], context: SpoilContext): (number | null)[] {
  let spoilt: (number | null)[] = values
  for (const fault of context.faults)
    spoilt = spoilt.map((value, n) => spoilOne(fault, value, context.firstSample + n, context))
  return spoilt
}

const gapLength = 5

function spoilOne(fault: Fault, value: number | null, sample: number, context: SpoilContext): number | null {
  if (sample < context.anchorSample || value === null) return value
  const { noiseSeed } = context
  if (fault.kind === 'stuck') return fault.sensorIndex === context.sensorIndex ? context.anchorReading : value
  if (fault.kind === 'gaps') {
    return uniformAt(noiseSeed ^ 0x2545f491, Math.floor(sample / gapLength)) < fault.share ? null : value
  }
  if (fault.kind === 'spikes' && uniformAt(noiseSeed ^ 0x7feb352d, sample) < fault.share) {
    const thrown = 2 * uniformAt(noiseSeed ^ 0x1b873593, sample) - 1
    return Math.round((value + fault.size * (thrown < 0 ? thrown - 0.5 : thrown + 0.5)) * 1000) / 1000
  }
  return value
}
