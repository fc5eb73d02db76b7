/** Lags, trace speeds, closure and sub-arrays: what the plain lags of the pairs say beside the fit, for people to check by hand. */
import { degreesTrue, turnBetween } from '../directions.ts'
import type { EstimateResult, QualityTest, TraceSpeed } from '../schemas/estimate.ts'
import type { ArrayFrame } from './arrayGeometry.ts'
import type { BandMatrices } from './bandMatrices.ts'
import { fitSlowness, velocityOf } from './slownessFit.ts'
import type { PairLag, SlownessFit } from './slownessFit.ts'
import { firstMoment, spreadExponent } from './spreading.ts'
import { bandLags } from './timeLag.ts'
import type { BandLag } from './timeLag.ts'

export interface LagFit {
  lags: BandLag[]
  fit: SlownessFit | null
  /** Independent averages behind the lags, frequencies weighing by their energy. */
  averages: number
}

/** Lags of the band, unwrapped about the vector (m/s, radians in the frame), and the slowness that fits them best. */
export function lagFit(bands: BandMatrices, frame: ArrayFrame, direction: number, speed: number): LagFit {
  const { x, y } = frame
  const sx = Math.cos(direction) / speed
  const sy = Math.sin(direction) / speed
  const lags = bandLags(bands, (i, j) => sx * (x[j] - x[i]) + sy * (y[j] - y[i]))
  return { lags, fit: fitSlowness(x, y, lags.map(asPair)), averages: averagesOf(bands) }
}

function averagesOf({ groups, averages, density }: BandMatrices): number {
  let sum = 0
  let squares = 0
  for (let g = 0; g < groups; g++) {
    sum += averages[g] * density[g]
    squares += averages[g] * density[g] * density[g]
  }
  return squares > 0 ? (sum * sum) / squares : 0
}

/**
 * Variance of the mean direction that plain phases of a spread sea show, rad²: (1 − m₂)/2 / (m₁² ν) with ν = 2 averages
 * (Kuik, van Vledder & Holthuijsen 1988), m₂ of cos^2s. All sensors see the same waves, so agreement among the lags says nothing of it.
 */
export function lagWander(spread: number, averages: number): number {
  const s = spreadExponent(spread)
  const m2 = (s * (s - 1)) / ((s + 1) * (s + 2))
  return (1 - m2) / 2 / (firstMoment(spread) ** 2 * 2 * Math.max(1, averages))
}

const asPair = (lag: BandLag): PairLag => ({ i: lag.i, j: lag.j, lag: lag.lag, weight: Math.max(1e-3, lag.coherence) })

/** Trace speeds of all pairs: apparent speeds along a line, never components of the vector. */
export function traceSpeeds(
  lags: readonly BandLag[],
  frame: ArrayFrame,
  ids: readonly string[],
  vector: { direction: number; speed: number } | null,
): TraceSpeed[] {
  const { x, y } = frame
  return lags.map(({ i, j, lag, lagSd, coherence }) => {
    const distance = Math.hypot(x[j] - x[i], y[j] - y[i])
    const expected = vector
      ? ((x[j] - x[i]) * Math.cos(vector.direction) + (y[j] - y[i]) * Math.sin(vector.direction)) / vector.speed
      : null
    return {
      between: [ids[i], ids[j]],
      distance,
      lag,
      lagSd,
      speed: Math.abs(lag) < 1e-9 ? null : distance / Math.abs(lag),
      coherence,
      residual: expected === null ? null : lag - expected,
    }
  })
}

/** τ_12 + τ_23 + τ_31 of the worst triangle, s. A wrong cycle breaks it; a clock or a position does not. */
export function closureTest(lags: readonly BandLag[], sensors: number): QualityTest {
  const lag = new Map(lags.map((l) => [l.i * sensors + l.j, l]))
  let worst = 0
  let allowed = 0
  for (let a = 0; a < sensors; a++) {
    for (let b = a + 1; b < sensors; b++) {
      for (let c = b + 1; c < sensors; c++) {
        const ab = lag.get(a * sensors + b)
        const bc = lag.get(b * sensors + c)
        const ac = lag.get(a * sensors + c)
        if (!ab || !bc || !ac) continue
        const gap = Math.abs(ab.lag + bc.lag - ac.lag)
        const limit = 3 * Math.hypot(ab.lagSd ?? 0, bc.lagSd ?? 0, ac.lagSd ?? 0) + 0.02
        if (worst === 0 || gap / limit > worst / allowed) {
          worst = gap
          allowed = limit
        }
      }
    }
  }
  return {
    test: 'lag closure',
    flag: worst <= Math.max(allowed, 1e-6) ? 1 : 3,
    value: worst,
    limit: allowed,
    detail: `lags around the worst triangle close to ${worst.toFixed(3)} s`,
  }
}

/** Each array with one sensor left out, by its lags alone; it agrees within 5° and 5 % and three of its own deviations. */
export function subArrayFits(
  lags: readonly BandLag[],
  whole: SlownessFit,
  frame: ArrayFrame,
  ids: readonly string[],
): EstimateResult['subArrays'] {
  const sensors = ids.length
  if (sensors < 4) return []
  const reference = velocityOf(whole.x, whole.y)
  return ids.flatMap((_, out) => {
    const kept = ids.map((_id, n) => n).filter((n) => n !== out)
    const pairs = lags
      .filter((l) => l.i !== out && l.j !== out)
      .map((l) => ({ ...asPair(l), i: kept.indexOf(l.i), j: kept.indexOf(l.j) }))
    const fit = fitSlowness(
      kept.map((n) => frame.x[n]),
      kept.map((n) => frame.y[n]),
      pairs,
    )
    if (!fit) return []
    const velocity = velocityOf(fit.x, fit.y)
    const toward = degreesTrue(velocity.direction + frame.axis)
    const deviation = velocity.speed * Math.sqrt(Math.max(0, whole.xx, whole.yy))
    const turn = Math.abs(turnBetween(toward, degreesTrue(reference.direction + frame.axis)))
    const agrees =
      turn <= 5 + (3 * deviation * 180) / Math.PI &&
      Math.abs(velocity.speed / reference.speed - 1) <= 0.05 + 3 * deviation
    return [{ sensors: kept.map((n) => ids[n]), toward, speed: velocity.speed, agrees }]
  })
}
