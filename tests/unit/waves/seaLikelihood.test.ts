import { describe, expect, it } from 'vitest'
import { arraySpectra } from '../../../shared/waves/arraySpectra.ts'
import { selectGroups } from '../../../shared/waves/bandMatrices.ts'
import { checkArray, prepareArray } from '../../../shared/waves/preparedArray.ts'
import { seaLikelihood } from '../../../shared/waves/seaLikelihood.ts'
import type { SeaState } from '../../../shared/waves/seaModel.ts'
import { firstMoment, makeSpreadingNodes, spreadExponent, spreadingNodes } from '../../../shared/waves/spreading.ts'
import { seaModel, startDensity } from '../../../shared/waves/trainModel.ts'
import { fiveSensors, spreadSea } from './spreadSea.ts'

const window = spreadSea({
  seed: 3,
  toward: 70,
  peakPeriod: 9,
  height: 1,
  spread: 15,
  depth: 10,
  positions: fiveSensors,
  seconds: 600,
})
const prepared = prepareArray(window, checkArray(window))
const spectra = arraySpectra(window, prepared)

function model(systems: number) {
  if (!spectra) throw new Error('the record gives no spectra')
  const bands = selectGroups(spectra.bands, 18, 30)
  const peaks = [
    { peak: 0.11, gamma: 3.3, density: 1 },
    { peak: 0.14, gamma: 2, density: 0.5 },
  ].slice(0, systems)
  return seaModel(bands, prepared.frame.x, prepared.frame.y, 10, 9.81, peaks)
}

const parameters = [0.4, 0.3, Math.log(9), Math.log(0.3), 0.1, 2.2, -0.2, Math.log(11), Math.log(0.5), -0.1]

describe('the likelihood of a sea', () => {
  it.each([1, 2])('with %s trains has the gradient that differences show', (systems) => {
    const sea = model(systems)
    sea.faults.push({ kind: 'clock', sensor: 1 }, { kind: 'path', sensor: 2 })
    sea.priors.push({ mean: 0, sd: 5 }, { mean: 0, sd: 5 })
    const likelihood = seaLikelihood(sea)
    const state: SeaState = {
      parameters: Float64Array.from([...parameters.slice(0, 5 * systems), 0.2, 0.05, 0.3]),
      logDensity: startDensity(sea),
    }
    const found = likelihood.evaluate(state)
    const moved = (a: number, h: number): number => {
      // The gradient is the one left after the densities have followed, so they follow here too.
      const step = new Float64Array(state.parameters.length)
      const shifted = { parameters: state.parameters.slice(), logDensity: state.logDensity.slice() }
      shifted.parameters[a] += h
      step[a] = h
      const follow = likelihood.densityStep(found, step)
      const rest = likelihood.densityStep(found, new Float64Array(step.length))
      for (let n = 0; n < follow.length; n++) shifted.logDensity[n] += follow[n] - rest[n]
      return likelihood.evaluate(shifted).value
    }
    const h = 1e-5
    state.parameters.forEach((_, a) => {
      const difference = (moved(a, h) - moved(a, -h)) / (2 * h)
      expect(Math.abs(found.gradient[a] - difference)).toBeLessThan(1e-4 * Math.max(10, Math.abs(difference)))
    })
  })
})

describe('directional spreading', () => {
  it.each([5, 12, 30, 60])('of %s° has weights that sum to one and the first moment 1 − σ²/2', (degrees) => {
    const spread = (degrees * Math.PI) / 180
    const nodes = makeSpreadingNodes()
    spreadingNodes(spread, 3, nodes)
    let sum = 0
    let moment = 0
    for (let n = 0; n < nodes.count; n++) {
      sum += nodes.weight[n]
      moment += nodes.weight[n] * nodes.cos[n]
    }
    expect(sum).toBeCloseTo(1, 12)
    expect(moment).toBeCloseTo(firstMoment(spread), degrees > 45 ? 3 : 6)
  })

  it('with s = 10 is spread by 24.4°, with s = 75 by 9.3° (Kuik et al. 1988)', () => {
    expect(spreadExponent((24.43 * Math.PI) / 180)).toBeCloseTo(10, 1)
    expect(spreadExponent((9.295 * Math.PI) / 180)).toBeCloseTo(75, 0)
  })
})
