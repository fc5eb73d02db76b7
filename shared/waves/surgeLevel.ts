/**
 * The mean level of an array at one sample a second, for the surge band: averaging over the sensors and within the
 * second keeps waves of minutes and thins out those of seconds.
 */
import type { ArraySensor } from './window.ts'

const pascalsPerDecibar = 1e4

/**
 * One value a second, metres; NaN where no sensor has a sample. Pressure is turned into head of water without
 * correction for depth, which is right for long waves (response close to 1).
 */
export function surgeLevel(
  sensors: Pick<ArraySensor, 'kind'>[],
  series: Float64Array[],
  sampleRate: number,
  { gravity, density }: { gravity: number; density: number },
): Float64Array {
  const length = Math.max(0, ...series.map((values) => values.length))
  const seconds = Math.floor(length / sampleRate)
  const sums = new Float64Array(seconds)
  const counts = new Uint16Array(seconds)
  series.forEach((values, index) => {
    const metres = sensors[index]?.kind === 'pressure' ? pascalsPerDecibar / (density * gravity) : 1
    const offset = meanOf(values)
    for (let n = 0; n < values.length; n += 1) {
      const value = values[n]
      const second = Math.floor(n / sampleRate)
      if (Number.isNaN(value) || second >= seconds) continue
      sums[second] += (value - offset) * metres
      counts[second] += 1
    }
  })
  return sums.map((sum, second) => sum / counts[second])
}

/** Of the samples that are there: each sensor is freed of its own level, so that a gap in one makes no step. */
function meanOf(values: Float64Array): number {
  let sum = 0
  let count = 0
  for (const value of values) {
    if (Number.isNaN(value)) continue
    sum += value
    count += 1
  }
  return count === 0 ? 0 : sum / count
}
