/** The trains of a random sea with their vectors, heights and honest errors. */
import type { ArraySpectra } from './arraySpectra.ts'
import { noiseDensity } from './bandMatrices.ts'
import type { ArrayFrame } from './arrayGeometry.ts'
import { sandwichCovariance } from './fitCovariance.ts'
import { headingTurn } from './headingTurn.ts'
import { noiseIndex } from './seaModel.ts'
import { greatestUnexplained, unexplainedShare } from './sensorFaults.ts'
import { systemVector } from './systemVector.ts'
import type { SeaDoubts } from './describeSea.ts'
import type { TrainVector } from './trainVector.ts'
import { unrelatedLikelihood } from './trainModel.ts'
import { findSystems } from './waveSystems.ts'
import type { FoundSystems } from './waveSystems.ts'

export interface RandomSea {
  found: FoundSystems
  trains: TrainVector[]
  /** ln L of the fit over that of unrelated sensors with the same energies. */
  gain: number
  doubts: SeaDoubts
}

export function findRandomSea(
  spectra: ArraySpectra,
  frame: ArrayFrame,
  depth: number,
  gravity: number,
): RandomSea | null {
  const found = findSystems(spectra.bands, frame.x, frame.y, depth, gravity)
  if (!found) return null
  const wide = sandwichCovariance(found.fit)
  const energies = trainEnergies(spectra, found)
  const turns = found.peaks.map((_, j) => headingTurn(found.fit, j))
  const trains = found.peaks.map((peak, j): TrainVector => {
    const exact = systemVector(found.fit, found.fit.covariance, j, peak.peak)
    const scattered = systemVector(found.fit, wide, j, peak.peak)
    const wider = scattered.directionVariance > exact.directionVariance ? scattered : exact
    return {
      direction: exact.direction,
      speed: exact.speed,
      measuredSpeed: exact.speed,
      // A heading that turns with frequency is no one heading: how far it turns is part of its error.
      directionVariance: Math.max(exact.directionVariance, scattered.directionVariance) + (turns[j]?.range ?? 0) ** 2,
      logSpeedVariance: Math.max(exact.logSpeedVariance, scattered.logSpeedVariance),
      cross: wider.cross,
      spread: exact.spread,
      peak: peak.peak,
      peakDensity: peak.density,
      m0: energies[j].m0,
      samplingError: energies[j].samplingError,
      band: energies[j].band,
    }
  })
  const { runnerUp } = found
  const ambiguous = runnerUp !== null && runnerUp.ratio > ambiguousRatio && runnerUp.likelihoodLoss < ambiguousLoss
  const { model, state } = found.fit
  const share = unexplainedShare(model.bands, state.parameters[noiseIndex(model)])
  const unexplained = share > greatestUnexplained ? share : null
  return {
    found,
    trains,
    gain: found.fit.evaluation.dataValue - unrelatedLikelihood(found.fit.model.bands),
    doubts: { lagResidualRms: null, runnerUp, ambiguous, unexplained, turns },
  }
}

/** Another cycle whose beam is so nearly as strong and whose fit loses so little ln L cannot be told from the best. */
const ambiguousRatio = 0.87
const ambiguousLoss = 6

/** Energy of each train: its share at the frequencies fitted, everything below to the longest, everything above to the shortest. */
function trainEnergies(spectra: ArraySpectra, found: FoundSystems) {
  const { bands, energyFactor, duration } = spectra
  const { fit, from, to, peaks } = found
  const noise = noiseDensity(bands)
  const groups = fit.model.bands.groups
  const longest = peaks.reduce((best, p, j) => (p.peak < peaks[best].peak ? j : best), 0)
  const shortest = peaks.reduce((best, p, j) => (p.peak > peaks[best].peak ? j : best), 0)
  return peaks.map((_, j) => {
    let m0 = 0
    let squares = 0
    let low = Infinity
    let high = 0
    for (let g = 0; g < bands.groups; g++) {
      let share = g < from ? Number(j === longest) : Number(j === shortest)
      if (g >= from && g < to) {
        let sum = 0
        for (let i = 0; i < peaks.length; i++) sum += Math.exp(fit.state.logDensity[i * groups + g - from])
        share = Math.exp(fit.state.logDensity[j * groups + g - from]) / sum
      }
      const own = energyFactor * share * (bands.density[g] - noise[g])
      m0 += own * bands.width[g]
      squares += own * own * bands.width[g]
      if (share > 0.5 && g >= from && g < to) {
        low = Math.min(low, bands.frequency[g])
        high = Math.max(high, bands.frequency[g])
      }
    }
    const band = high > 0 ? { from: low, to: high } : { from: 0.8 * peaks[j].peak, to: 1.4 * peaks[j].peak }
    return { m0: Math.max(0, m0), samplingError: m0 > 0 ? Math.sqrt(squares / duration) / m0 : null, band }
  })
}
