/**
 * The sea at one station for all time, as a pure function of (seed, scenario, anchor, station, time). Blocks of
 * 2,048 s begin every 1,024 s on an absolute grid; at every moment two of them are added, one fading in as
 * sin(πp/2), the other out as cos(πp/2). The covariance between two moments τ apart is then the sea's own times
 * cos(πτ/2048 s), wherever they lie: power is kept, there is no seam, and all sensors fade alike, so neither their
 * lags nor their coherence can tell.
 */
import type { Scenario } from '../scenarios/scenario.ts'
import { makeBlock, type SeaSensor } from './block.ts'
import { seaStateAt, type SeaState, type Site } from './nearshore.ts'

export interface SeaWanted {
  seed: number
  scenario: Scenario
  /** Milliseconds since 1970 UTC: the scenario's hour zero. */
  anchor: number
  site: Site
  sampleRate: number
  sensors: SeaSensor[]
  /** Seconds the sensor's clock is off at a time; absent for a good clock. */
  clockOffsetAt?: (sensorIndex: number, time: number) => number
}

/** Seconds between the beginnings of blocks. */
export const blockStep = 1024

export interface StationSea {
  /** Metres (surface or equivalent head) of each sensor for `count` samples from sample number `first` since 1970. */
  heights(first: number, count: number): Float64Array[]
}

export function createStationSea(wanted: SeaWanted): StationSea {
  const { sampleRate, sensors } = wanted
  const step = blockStep * sampleRate
  if (!Number.isInteger(Math.log2(step))) {
    throw new RangeError(`a sea sampled at ${sampleRate} Hz cannot be made: 1, 2, 4, 8 or 16 Hz can`)
  }
  const blocks = new Map<number, Float64Array[]>()
  const rise = Float64Array.from({ length: step }, (_, n) => Math.sin((Math.PI * n) / (2 * step)))
  const fall = Float64Array.from({ length: step }, (_, n) => Math.cos((Math.PI * n) / (2 * step)))

  function block(index: number): Float64Array[] {
    const known = blocks.get(index)
    if (known) return known
    if (blocks.size > 2) blocks.delete(blocks.keys().next().value ?? index)
    const centre = blockCentre(index)
    const made = makeBlock({
      name: `${wanted.seed}/${wanted.scenario.name}/${wanted.site.code}/${index}`,
      state: seaStateAt(wanted.scenario, wanted.anchor, wanted.site, centre),
      sampleRate,
      length: 2 * step,
      sensors,
      clockOffsets: sensors.map((_, index) => wanted.clockOffsetAt?.(index, centre) ?? 0),
    })
    blocks.set(index, made)
    return made
  }

  return {
    heights(first, count) {
      const series = sensors.map(() => new Float64Array(count))
      for (let done = 0; done < count;) {
        const index = Math.floor((first + done) / step)
        const offset = first + done - index * step
        const length = Math.min(count - done, step - offset)
        const leaving = block(index - 1)
        const coming = block(index)
        for (let m = 0; m < sensors.length; m++) {
          for (let n = 0; n < length; n++) {
            series[m][done + n] =
              fall[offset + n] * leaving[m][step + offset + n] + rise[offset + n] * coming[m][offset + n]
          }
        }
        done += length
      }
      return series
    },
  }
}

/** When a block's sea state is taken, milliseconds since 1970. */
const blockCentre = (index: number): number => (index + 1) * blockStep * 1000

/** The two blocks alive at a time with their shares of the energy. */
export function blocksAt(
  wanted: Pick<SeaWanted, 'scenario' | 'anchor' | 'site'>,
  time: number,
): { state: SeaState; share: number }[] {
  const position = time / 1000 / blockStep
  const index = Math.floor(position)
  const rising = Math.sin((Math.PI / 2) * (position - index)) ** 2
  return [
    { state: seaStateAt(wanted.scenario, wanted.anchor, wanted.site, blockCentre(index - 1)), share: 1 - rising },
    { state: seaStateAt(wanted.scenario, wanted.anchor, wanted.site, blockCentre(index)), share: rising },
  ]
}
