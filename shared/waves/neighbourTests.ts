/**
 * Each sensor against the others of the array (QARTOD water level, test 11, neighbour; waves, test 14 in its place): its mean level, and its
 * height in the swell and in the wind sea. A sensor that stands out is suspect and stays in use.
 */
import type { EstimateResult, QualityTest } from '../schemas/estimate.ts'
import type { ArraySpectra } from './arraySpectra.ts'
import { metresPerDecibar } from './arraySpectra.ts'
import { squaredCoherence, unbiasedCoherence } from './coherence.ts'
import type { CheckedArray, PreparedArray } from './preparedArray.ts'
import { defaultQualityLimits } from './qualityLimits.ts'
import { median } from './robust.ts'
import type { ArrayWindow } from './window.ts'

/** Hz, between what is called swell and wind sea here. */
const border = 0.125
/** A band with less of the energy says nothing of a sensor. */
const leastShare = 0.1
/** So many standard deviations of the sampling error are allowed beside the limit. */
const deviations = 3

interface Odd {
  sensor: string
  finding: 'height' | 'level'
}

export function judgeNeighbours(
  result: EstimateResult,
  window: ArrayWindow,
  checked: CheckedArray,
  prepared: PreparedArray,
  spectra: ArraySpectra,
): EstimateResult {
  const levels = levelsOf(window, checked, prepared)
  const odd: Odd[] = []
  const tests = [
    ...levelTests(window, levels, odd),
    ...heightTests('swell', window, prepared, spectra, 0, border, odd),
    ...heightTests('wind sea', window, prepared, spectra, border, Infinity, odd),
  ]
  return {
    ...result,
    tests: [...result.tests, ...tests],
    sensors: result.sensors.map((sensor) => {
      const found = odd.filter((one) => one.sensor === sensor.id).map(({ finding }) => finding)
      const waterDepth = levels.get(sensor.id) ?? null
      if (found.length === 0) return { ...sensor, waterDepth }
      const findings = [...new Set([...sensor.findings, ...found])]
      return { ...sensor, waterDepth, findings, qualityFlag: sensor.qualityFlag === 4 ? (4 as const) : (3 as const) }
    }),
  }
}

/** Depth of still water that each usable sensor's mean says, m; of its kind's middle that of the window. Only for kinds of three or more. */
function levelsOf(window: ArrayWindow, { clean }: CheckedArray, { usable }: PreparedArray): Map<string, number> {
  const levels = new Map<string, number>()
  for (const kind of ['surface', 'pressure'] as const) {
    const own = usable.filter((n) => window.sensors[n].kind === kind)
    if (own.length < 3) continue
    const metres = own.map((n) => {
      const mean = meanOf(clean[n])
      return kind === 'surface' ? mean : mean * metresPerDecibar(window) + window.sensors[n].heightAboveBed
    })
    const middle = median(Float64Array.from(metres))
    own.forEach((n, i) => levels.set(window.sensors[n].id, window.waterDepth + metres[i] - middle))
  }
  return levels
}

function meanOf(series: Float64Array): number {
  let sum = 0
  let count = 0
  for (const value of series) {
    if (value !== value) continue
    sum += value
    count++
  }
  return sum / Math.max(1, count)
}

function levelTests(window: ArrayWindow, levels: ReadonlyMap<string, number>, odd: Odd[]): QualityTest[] {
  const { neighbourLevel: limit } = window.settings.quality ?? defaultQualityLimits
  return [...levels].map(([id, depth]) => {
    const off = depth - window.waterDepth
    if (Math.abs(off) > limit) odd.push({ sensor: id, finding: 'level' })
    const detail = `${id}: level ${off.toFixed(2)} m off the middle of its kind`
    return { test: 'neighbour level', flag: Math.abs(off) > limit ? 3 : 1, value: Math.abs(off), limit, detail }
  })
}

function heightTests(
  name: string,
  window: ArrayWindow,
  { frame, usable }: PreparedArray,
  { bands, duration }: ArraySpectra,
  from: number,
  to: number,
  odd: Odd[],
): QualityTest[] {
  const m = bands.sensors
  if (m < 3) return []
  const { neighbourHeight } = window.settings.quality ?? defaultQualityLimits
  const groups = Array.from({ length: bands.groups }, (_, g) => g)
  const within = groups.filter((g) => bands.frequency[g] >= from && bands.frequency[g] < to)
  const energyOf = (i: number, among: readonly number[]) =>
    among.reduce((sum, g) => sum + (bands.real[g * m * m + i * m + i] - bands.noise[g * m + i]) * bands.width[g], 0)
  const own = Array.from({ length: m }, (_, i) => Math.max(0, energyOf(i, within)))
  const middle = median(Float64Array.from(own))
  const whole = median(Float64Array.from({ length: m }, (_, i) => energyOf(i, groups)))
  if (!(middle > leastShare * whole)) return []
  const squares = within.reduce((sum, g) => sum + bands.density[g] ** 2 * bands.width[g], 0)
  const variation = Math.sqrt(squares / duration) / middle
  return own.map((energy, i) => {
    const { id } = window.sensors[usable[frame.order[i]]]
    const ratio = Math.sqrt(energy / middle)
    const allowed = 0.5 * variation * Math.sqrt(2 * (1 - coherenceWithOthers(bands, within, i)))
    const limit = neighbourHeight + deviations * allowed
    const isOdd = Math.abs(ratio - 1) > limit
    if (isOdd) odd.push({ sensor: id, finding: 'height' })
    return {
      test: 'neighbour height',
      flag: isOdd ? 3 : 1,
      value: Math.abs(ratio - 1),
      limit,
      detail: `${id}: height of the ${name} ${ratio.toFixed(2)} of the middle of all`,
    }
  })
}

/** Mean squared coherence with the other sensors, by energy: sensors that see the same waves scatter together. */
function coherenceWithOthers(bands: ArraySpectra['bands'], within: readonly number[], i: number): number {
  const m = bands.sensors
  let sum = 0
  let weight = 0
  for (const g of within) {
    const at = g * m * m
    for (let j = 0; j < m; j++) {
      if (j === i) continue
      const found = squaredCoherence(
        bands.real[at + i * m + j],
        bands.imag[at + i * m + j],
        bands.real[at + i * m + i],
        bands.real[at + j * m + j],
      )
      const energy = bands.density[g] * bands.width[g]
      sum += energy * unbiasedCoherence(found, bands.averages[g])
      weight += energy
    }
  }
  return weight > 0 ? sum / weight : 0
}
