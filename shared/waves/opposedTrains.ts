/**
 * Standing and reflected seas: two trains of one period that run against each other with locked phases. The amplitudes of both are fitted
 * to the complex spectra at every fine frequency (least squares over the sensors, as Mansard & Funke 1980 do along a line of probes,
 * here in the plane). Of unrelated seas the phase between the two turns by chance from frequency to frequency; before a wall it turns
 * steadily with the way there and back, 2 k d, which is searched.
 */
import { degreesTrue } from '../directions.ts'
import type { OpposedTrains } from '../schemas/estimate.ts'
import type { ArraySpectra } from './arraySpectra.ts'
import type { ArrayFrame } from './arrayGeometry.ts'
import { waveNumber } from './dispersion.ts'

/** Band about the peak, as shares of its frequency. */
const bandFrom = 0.8
const bandTo = 1.3
/** Axes tried at first, and how far the train back may be off the other's opposite, rad. */
const axes = 36
const turns = [-0.6, -0.3, 0, 0.3, 0.6]
/** Distance of the wall searched, in wave lengths of the peak, and the steps of it. */
const greatestWay = 6
const stepsALength = 10
/** Two trains this alike over the array cannot be told apart. */
const greatestLikeness = 0.9
/**
 * A sea stands, or is thrown back, from this share of the amplitude and this lock on. In simulated seas without a wall the lock reached
 * 0.71 (with a spread of 40 degrees); before a wall that gave back half of the amplitude it was mostly above 0.8.
 */
export const standingFrom = { amplitudeRatio: 0.3, phaseLock: 0.75 }

interface Pair {
  direction: number
  back: number
  explained: number
}

/** Does the sea stand, also without any one sensor? A single wrong clock makes a false train back, and goes with its sensor. */
export function isStanding(found: OpposedTrains | null, without: readonly (OpposedTrains | null)[]): boolean {
  const stands = ({ amplitudeRatio, phaseLock }: OpposedTrains) =>
    amplitudeRatio >= standingFrom.amplitudeRatio && phaseLock >= standingFrom.phaseLock
  return found !== null && stands(found) && without.every((one) => one === null || stands(one))
}

/** What the two trains are looked for in. `scale[m]` turns the fine spectrum of sensor m into surface, near the peak. */
export interface OpposedQuestion {
  spectra: Pick<ArraySpectra, 'fine' | 'bands'>
  frame: ArrayFrame
  scale: readonly number[]
  /** Hz */
  peak: number
  depth: number
  gravity: number
}

/**
 * The pair of trains that explains the band about the peak best, stronger first, and the same pair without each sensor in turn (for four
 * sensors or more). Null where the array cannot tell such trains apart.
 */
export function findOpposedTrains(question: OpposedQuestion): {
  found: OpposedTrains | null
  without: (OpposedTrains | null)[]
} {
  const pair = bestPair(question)
  if (!pair) return { found: null, without: [] }
  const sensors = Array.from(question.frame.x, (_, m) => m)
  const found = locked(question, pair, sensors)
  const without =
    sensors.length > 3
      ? sensors.map((out) =>
          locked(
            question,
            pair,
            sensors.filter((m) => m !== out),
          ),
        )
      : []
  return { found, without }
}

const waveAt =
  ({ depth, gravity }: OpposedQuestion) =>
  (frequency: number): number =>
    waveNumber(2 * Math.PI * frequency, depth, gravity)

function bestPair(question: OpposedQuestion): Pair | null {
  const { spectra, frame, peak } = question
  const { bands } = spectra
  const m = frame.x.length
  const groups = Array.from({ length: bands.groups }, (_, g) => g).filter(
    (g) => bands.frequency[g] >= bandFrom * peak && bands.frequency[g] <= bandTo * peak,
  )
  const numbers = groups.map((g) => waveAt(question)(bands.frequency[g]))
  const explained = (direction: number, back: number): Pair[] => {
    let energy = 0
    for (const [n, g] of groups.entries()) {
      const pair = projector(frame.x, frame.y, numbers[n], direction, back)
      if (!pair) return []
      energy += bands.width[g] * explainedBy(pair, bands.real, bands.imag, g * m * m, m)
    }
    return [{ direction, back, explained: energy }]
  }
  const most = (pairs: readonly Pair[]): Pair | null =>
    pairs.reduce<Pair | null>((best, pair) => (best && best.explained >= pair.explained ? best : pair), null)
  const straight = most(
    Array.from({ length: axes }, (_, a) => explained((Math.PI * a) / axes, Math.PI + (Math.PI * a) / axes)).flat(),
  )
  if (!straight) return null
  const about = [
    [straight.direction, straight.back],
    [straight.back, straight.direction],
  ].flatMap(([one, other]) =>
    [-0.05, 0, 0.05].flatMap((off) => turns.flatMap((turn) => explained(one + off, other + off + turn))),
  )
  return most([straight, ...about])
}

interface Projector {
  /** e^{−i k u·r} of both trains over the sensors. */
  firstReal: Float64Array
  firstImag: Float64Array
  secondReal: Float64Array
  secondImag: Float64Array
  /** a₁ᴴ a₂. */
  real: number
  imag: number
  /** m² − |a₁ᴴ a₂|². */
  determinant: number
}

function projector(x: Float64Array, y: Float64Array, k: number, direction: number, back: number): Projector | null {
  const m = x.length
  const pair: Projector = {
    firstReal: new Float64Array(m),
    firstImag: new Float64Array(m),
    secondReal: new Float64Array(m),
    secondImag: new Float64Array(m),
    real: 0,
    imag: 0,
    determinant: 0,
  }
  for (let i = 0; i < m; i++) {
    const first = k * (x[i] * Math.cos(direction) + y[i] * Math.sin(direction))
    const second = k * (x[i] * Math.cos(back) + y[i] * Math.sin(back))
    pair.firstReal[i] = Math.cos(first)
    pair.firstImag[i] = -Math.sin(first)
    pair.secondReal[i] = Math.cos(second)
    pair.secondImag[i] = -Math.sin(second)
    pair.real += Math.cos(first - second)
    pair.imag += Math.sin(first - second)
  }
  pair.determinant = m * m - pair.real ** 2 - pair.imag ** 2
  return Math.hypot(pair.real, pair.imag) > greatestLikeness * m ? null : pair
}

/** Energy of a matrix within the span of both trains: tr(A (AᴴA)⁻¹ Aᴴ C). */
function explainedBy(pair: Projector, real: Float64Array, imag: Float64Array, at: number, m: number): number {
  let first = 0
  let second = 0
  let crossReal = 0
  let crossImag = 0
  for (let i = 0; i < m; i++) {
    for (let j = 0; j < m; j++) {
      const cr = real[at + i * m + j]
      const ci = imag[at + i * m + j]
      first += quadratic(pair.firstReal[i], pair.firstImag[i], pair.firstReal[j], pair.firstImag[j], cr, ci)
      second += quadratic(pair.secondReal[i], pair.secondImag[i], pair.secondReal[j], pair.secondImag[j], cr, ci)
      // a₁ᴴ C a₂, complex.
      const ar = pair.firstReal[i] * cr + pair.firstImag[i] * ci
      const ai = pair.firstReal[i] * ci - pair.firstImag[i] * cr
      crossReal += ar * pair.secondReal[j] - ai * pair.secondImag[j]
      crossImag += ar * pair.secondImag[j] + ai * pair.secondReal[j]
    }
  }
  const mixed = crossReal * pair.real + crossImag * pair.imag
  return (m * (first + second) - 2 * mixed) / pair.determinant
}

/** Re(a_i* c a_j). */
const quadratic = (ir: number, ii: number, jr: number, ji: number, cr: number, ci: number): number =>
  (ir * cr + ii * ci) * jr - (ir * ci - ii * cr) * ji

function locked(
  question: OpposedQuestion,
  { direction, back }: Pair,
  sensors: readonly number[],
): OpposedTrains | null {
  const { peak, frame, scale } = question
  const { fine } = question.spectra
  const wave = waveAt(question)
  const x = Float64Array.from(sensors, (m) => frame.x[m])
  const y = Float64Array.from(sensors, (m) => frame.y[m])
  const from = Math.max(0, Math.ceil((bandFrom * peak - fine.first) / fine.step))
  const to = Math.min(fine.count - 1, Math.floor((bandTo * peak - fine.first) / fine.step))
  if (to - from < 7) return null
  let energyFirst = 0
  let energySecond = 0
  const numbers: number[] = []
  const products: [number, number][] = []
  for (let bin = from; bin <= to; bin++) {
    const k = wave(fine.first + bin * fine.step)
    const pair = projector(x, y, k, direction, back)
    if (!pair) return null
    const [fr, fi, sr, si] = amplitudes(pair, fine.series, scale, sensors, bin)
    energyFirst += fr * fr + fi * fi
    energySecond += sr * sr + si * si
    numbers.push(k)
    products.push([sr * fr + si * fi, si * fr - sr * fi])
  }
  const isFirst = energyFirst >= energySecond
  // The phase of the train back is behind by the way there and back; of the other pair it is ahead.
  const sense = isFirst ? 1 : -1
  const length = (2 * Math.PI) / wave(peak)
  let most = 0
  for (let n = 0; n <= greatestWay * stepsALength; n++) {
    const way = (2 * n * length) / stepsALength
    let real = 0
    let imag = 0
    products.forEach(([pr, pi], index) => {
      const turn = sense * numbers[index] * way
      real += pr * Math.cos(turn) - pi * Math.sin(turn)
      imag += pr * Math.sin(turn) + pi * Math.cos(turn)
    })
    most = Math.max(most, Math.hypot(real, imag))
  }
  const [strong, weak] = isFirst ? [direction, back] : [back, direction]
  return {
    toward: degreesTrue(strong + frame.axis),
    opposedToward: degreesTrue(weak + frame.axis),
    period: 1 / peak,
    amplitudeRatio: Math.sqrt(Math.min(energyFirst, energySecond) / Math.max(energyFirst, energySecond)),
    phaseLock: most / Math.sqrt(energyFirst * energySecond),
  }
}

/** Complex amplitudes of both trains at one bin, (AᴴA)⁻¹ Aᴴ X. */
function amplitudes(
  pair: Projector,
  series: readonly Float64Array[],
  scale: readonly number[],
  sensors: readonly number[],
  bin: number,
): [number, number, number, number] {
  const m = sensors.length
  let fr = 0
  let fi = 0
  let sr = 0
  let si = 0
  for (let i = 0; i < m; i++) {
    const xr = scale[sensors[i]] * series[sensors[i]][2 * bin]
    const xi = scale[sensors[i]] * series[sensors[i]][2 * bin + 1]
    fr += pair.firstReal[i] * xr + pair.firstImag[i] * xi
    fi += pair.firstReal[i] * xi - pair.firstImag[i] * xr
    sr += pair.secondReal[i] * xr + pair.secondImag[i] * xi
    si += pair.secondReal[i] * xi - pair.secondImag[i] * xr
  }
  const { real, imag, determinant } = pair
  return [
    (m * fr - (real * sr - imag * si)) / determinant,
    (m * fi - (real * si + imag * sr)) / determinant,
    (m * sr - (real * fr + imag * fi)) / determinant,
    (m * si - (real * fi - imag * fr)) / determinant,
  ]
}
