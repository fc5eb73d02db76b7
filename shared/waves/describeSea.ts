/** Trains of waves become the answer: systems highest first, errors of survey and clocks added, lags beside them, flags. */
import { degreesTrue } from '../directions.ts'
import type { EstimateResult, QualityFlag, QualityTest, WaveSystem } from '../schemas/estimate.ts'
import type { ArraySpectra } from './arraySpectra.ts'
import { closureTest, lagFit, lagWander, subArrayFits, traceSpeeds } from './arrayLags.ts'
import type { LagFit } from './arrayLags.ts'
import { selectGroups } from './bandMatrices.ts'
import { bulkLimitsTest, bulkTestNames } from './bulkTests.ts'
import { phaseSpeed } from './dispersion.ts'
import { refuse } from './blankResult.ts'
import type { HeadingTurn } from './headingTurn.ts'
import type { PreparedArray } from './preparedArray.ts'
import { defaultQualityLimits } from './qualityLimits.ts'
import { median } from './robust.ts'
import { greatestUnexplained } from './sensorFaults.ts'
import type { SlownessFit } from './slownessFit.ts'
import { systematicVariance } from './systematicError.ts'
import { describeTrain } from './trainVector.ts'
import type { TrainVector } from './trainVector.ts'
import { firstGroup } from './trainModel.ts'
import type { ArrayWindow } from './window.ts'

export interface SeaDoubts {
  /** Known already for a regular wave; else taken from the lags. */
  lagResidualRms: number | null
  runnerUp: { direction: number; speedRatio: number; ratio: number } | null
  ambiguous: boolean
  /** Share of the energy that plane waves with spread leave unexplained, when it is too large; else null. */
  unexplained: number | null
  /** For each train, how its heading turns with frequency; null or absent where it does not. */
  turns: readonly (HeadingTurn | null)[]
}

/** Name of the test that fails when the vector had to be taken from the lags. */
export const coherenceTest = 'coherence model'
/** Name of the test that is suspect when seas that cannot be told apart are given as one. */
export const mixedSeasTest = 'mixed seas'

/** Ratio of measured to linear speed that a current, spread or depth of usual size explains. */
const usualRatio = { from: 0.85, to: 1.2 }
/** H_m0 over depth from which waves break over the array (Thornton & Guza 1982). */
const breakingShare = 0.6

export function describeSea(
  result: EstimateResult,
  window: ArrayWindow,
  prepared: PreparedArray,
  spectra: ArraySpectra,
  trains: readonly TrainVector[],
  doubts: SeaDoubts,
): EstimateResult {
  const { frame } = prepared
  const { gravity } = window.settings
  const ordered = frame.order.map((n) => window.sensors[prepared.usable[n]])
  const ids = ordered.map((sensor) => sensor.id)
  const measured = trains.map((train) => {
    const band = selectGroups(
      spectra.bands,
      firstGroup(spectra.bands, 0.85 * train.peak),
      Math.max(firstGroup(spectra.bands, 0.85 * train.peak) + 2, firstGroup(spectra.bands, 1.2 * train.peak)),
    )
    return lagFit(band, frame, train.direction, train.speed)
  })
  const order = trains.map((_, n) => n).sort((a, b) => trains[b].m0 - trains[a].m0)
  const explained = doubts.unexplained === null && !lagsDisagree(trains, measured)
  const systems = order.map((n, place): WaveSystem => {
    const train = trains[n]
    const extra = systematicVariance(ordered, frame.x, frame.y, frame.aperture, train.direction, train.speed)
    const lagged = measured[n].fit
    const told = !explained && lagged ? toldByLags(train, lagged) : train
    return describeTrain(
      {
        ...told,
        measuredSpeed: lagged && train.spread !== null ? 1 / Math.hypot(lagged.x, lagged.y) : train.measuredSpeed,
        directionVariance: told.directionVariance + extra.direction,
        logSpeedVariance: told.logSpeedVariance + extra.logSpeed,
        cross: told.cross + extra.cross,
      },
      place + 1,
      frame.axis,
      window.waterDepth,
      gravity,
    )
  })
  const lead = order[0]
  const leading = measured[lead]
  const tests = [
    ...result.tests,
    closureTest(leading.lags, ids.length),
    ...seaTests(result, systems[0]),
    ...(explained ? [] : [unexplainedTest(doubts)]),
    ...order.flatMap((n, place) => mixedSeas(doubts.turns[n] ?? null, place + 1)),
  ]
  const other = doubts.runnerUp
  const described: EstimateResult = {
    ...result,
    resolved: true,
    reason: null,
    systems,
    peakPeriod: systems[0].peakPeriod,
    tests,
    traceSpeeds: traceSpeeds(leading.lags, frame, ids, trains[lead]),
    lagResidualRms: doubts.lagResidualRms ?? leading.fit?.residual ?? null,
    subArrays: leading.fit ? subArrayFits(leading.lags, leading.fit, frame, ids) : [],
    runnerUp: other && {
      toward: degreesTrue(other.direction + frame.axis),
      speed: other.speedRatio * phaseSpeed(systems[0].peakPeriod, window.waterDepth, gravity),
      ratio: other.ratio,
    },
  }
  const limits = window.settings.quality ?? defaultQualityLimits
  const tested = { ...described, tests: [...described.tests, bulkLimitsTest(described, limits)] }
  if (doubts.ambiguous) return refuse(tested, 'ambiguous')
  if (isSurfZone(tested)) return refuse(tested, 'surf-zone')
  return { ...tested, qualityFlag: overallFlag(tested, Boolean(doubts.turns[lead])) }
}

/**
 * The vector of the plain lags, for a sea whose coherences the model does not explain: phases stay true where coherence is lost for other
 * reasons than spread. Its distance from the fit is added to the error, and no spread is claimed.
 */
function toldByLags(train: TrainVector, lagged: SlownessFit): TrainVector {
  const speed = 1 / Math.hypot(lagged.x, lagged.y)
  const direction = Math.atan2(lagged.y, lagged.x)
  const turn = 2 * Math.sin((direction - train.direction) / 2)
  return {
    ...train,
    direction,
    speed,
    spread: null,
    directionVariance: train.directionVariance + 0.25 * turn * turn,
    logSpeedVariance: train.logSpeedVariance + 0.25 * Math.log(speed / train.speed) ** 2,
  }
}

/** Headings of lags and fit this far apart, rad, cannot both be right: two seas at one frequency, or coherence lost otherwise. */
const greatestTurn = 0.2
const leastLagCoherence = 0.6

/** Only a single train can be held against plain lags; where seas cross, lags are a compromise. */
function lagsDisagree(trains: readonly TrainVector[], measured: readonly LagFit[]): boolean {
  const lagged = measured[0].fit
  if (trains.length !== 1 || trains[0].spread === null || !lagged) return false
  // Over many wave lengths a spread sea loses coherence and its lags mean little.
  const coherence = median(Float64Array.from(measured[0].lags, (lag) => lag.coherence))
  if (coherence < leastLagCoherence) return false
  const turn = 2 * Math.abs(Math.sin((Math.atan2(lagged.y, lagged.x) - trains[0].direction) / 2))
  // Lags that do not agree among themselves have no heading to set against the fit's.
  const { x, y, xx, xy, yy } = lagged
  const own = (y * y * xx - 2 * x * y * xy + x * x * yy) / (x * x + y * y) ** 2
  const wander = lagWander(trains[0].spread, measured[0].averages)
  return turn > greatestTurn && turn > 5 * Math.sqrt(trains[0].directionVariance + own + wander)
}

function unexplainedTest({ unexplained }: SeaDoubts): QualityTest {
  const limit = unexplained === null ? null : greatestUnexplained
  return {
    test: coherenceTest,
    flag: 3,
    value: unexplained,
    limit,
    detail: 'one plane sea with spread does not explain the record: the vector is that of the lags',
  }
}

const isSurfZone = ({ significantWaveHeight, waterDepth }: EstimateResult): boolean =>
  (significantWaveHeight ?? 0) > breakingShare * waterDepth

function mixedSeas(turn: HeadingTurn | null, place: number): QualityTest[] {
  if (!turn) return []
  const degrees = (turn.range * 180) / Math.PI
  const detail = `system ${place}: its heading turns by ${degrees.toFixed(0)}° with frequency; mixed seas too near to be told apart are given as one`
  return [{ test: mixedSeasTest, flag: 3, value: degrees, limit: null, detail }]
}

function seaTests(result: EstimateResult, leading: WaveSystem): QualityTest[] {
  const ratio = leading.speedRatio
  const share = (result.significantWaveHeight ?? 0) / result.waterDepth
  return [
    {
      test: 'dispersion ratio',
      flag: ratio >= usualRatio.from && ratio <= usualRatio.to ? 1 : 3,
      value: ratio,
      limit: ratio < 1 ? usualRatio.from : usualRatio.to,
      detail: `measured speed is ${ratio.toFixed(3)} of linear theory at the present depth`,
    },
    {
      test: 'height over depth',
      flag: share <= breakingShare ? 1 : 3,
      value: share,
      limit: breakingShare,
      detail: share <= breakingShare ? 'outside the surf zone' : 'waves break over the array: no single vector',
    },
  ]
}

/** Suspect (3) when a sensor was left out, a geometry fault was found or a test of the sea is suspect; else good. */
/** A second train that may be two has its own wide ±; it leaves the leading one's vector as good as it is. */
function overallFlag(result: EstimateResult, isLeadMixed: boolean): QualityFlag {
  const geometry = ['lag closure', 'dispersion ratio', 'height over depth', 'sensor phases', coherenceTest]
  const doubtful = result.tests.some(
    (test) =>
      (geometry.includes(test.test) && test.flag !== 1) || (bulkTestNames.includes(test.test) && test.flag === 3),
  )
  return doubtful || isLeadMixed || result.sensors.some((sensor) => !sensor.used) ? 3 : 1
}
