/** Why a vector can, or cannot, be trusted: each ground with its mark, as a line of words and a figure. */
import { turnBetween } from '../../../shared/directions.ts'
import type { EstimateResult, QualityFlag, QualityTest } from '../../../shared/schemas/estimate.ts'
import { decimals, metres, percent, seconds } from '../../../shared/units.ts'
import { speedSd, speedUnit, speedWords } from '../../figures/shown.ts'

export interface TrustGround {
  key: string
  flag: QualityFlag
  words: string
  figure: string
}

const sources: Record<EstimateResult['waterDepthSource'], string> = {
  level: 'from the level measured here',
  tide: 'from the tide',
  nominal: 'nominal, tide not known',
}

/** The worst flag of the tests whose name matches; 2 (not evaluated) without one. */
function judged(tests: readonly QualityTest[], name: RegExp): QualityFlag {
  const flags = tests.filter((test) => name.test(test.test)).map((test) => test.flag)
  return worst(flags)
}

/** Fail before suspect before missing before good; 2 for none. */
export function worst(flags: readonly QualityFlag[]): QualityFlag {
  return ([4, 3, 9, 1] as const).find((flag) => flags.includes(flag)) ?? 2
}

export function trustGrounds(detail: EstimateResult): TrustGround[] {
  const { tests, systems } = detail
  const lead = systems[0]
  const grounds: TrustGround[] = []
  grounds.push({
    key: 'residual',
    flag: judged(tests, /closure/),
    words: 'Lag residual, rms',
    figure: seconds(detail.lagResidualRms, (detail.lagResidualRms ?? 1) < 0.02 ? 3 : 2),
  })
  if (lead) {
    const off = Math.round((lead.speedRatio - 1) * 100)
    grounds.push({
      key: 'theory',
      flag: judged(tests, /dispersion/),
      words: 'Corrected speed over linear theory',
      figure: `${decimals(lead.speedRatio, 2)}, ${off === 0 ? 'equal' : `${percent(Math.abs(off) / 100)} ${off > 0 ? 'above' : 'below'}`}`,
    })
  }
  grounds.push(subArrayGround(detail))
  if (detail.runnerUp) {
    grounds.push({
      key: 'runnerUp',
      // A cycle that fits nearly as well is refused as ambiguous, so one that stands has been decided.
      flag: detail.reason === 'ambiguous' ? 4 : 1,
      words: `Best other cycle: ${speedWords(detail.runnerUp.speed)}, fit compared with this one`,
      figure: decimals(detail.runnerUp.ratio, 2),
    })
  }
  grounds.push({
    key: 'depth',
    flag: detail.waterDepthSource === 'nominal' ? 3 : 1,
    words: `Water depth, ${sources[detail.waterDepthSource]}`,
    figure: metres(detail.waterDepth),
  })
  const used = detail.sensors.filter((sensor) => sensor.used).length
  grounds.push({
    key: 'sensors',
    flag: used === detail.sensors.length ? 1 : used >= 3 ? 3 : 4,
    words: 'Sensors used',
    figure: `${used} of ${detail.sensors.length}`,
  })
  const evaluated = tests.filter((test) => test.flag !== 2)
  grounds.push({
    key: 'tests',
    flag: worst(evaluated.map((test) => test.flag)),
    words: 'QC tests passed',
    figure: `${evaluated.filter((test) => test.flag === 1).length} of ${tests.length}`,
  })
  return grounds
}

function subArrayGround({ subArrays, systems }: EstimateResult): TrustGround {
  const lead = systems[0]
  const agreeing = subArrays.filter((one) => one.agrees)
  if (subArrays.length === 0 || !lead)
    return { key: 'subArrays', flag: 2, words: 'Sub-arrays of 3 or more', figure: 'none to compare' }
  if (agreeing.length < subArrays.length)
    return {
      key: 'subArrays',
      flag: 3,
      words: 'Sub-arrays of 3 or more that agree',
      figure: `${agreeing.length} of ${subArrays.length}`,
    }
  const turn = Math.max(...subArrays.map((one) => Math.abs(turnBetween(one.toward, lead.toward))))
  const speed = Math.max(...subArrays.map((one) => Math.abs(one.speed - lead.measuredSpeed)))
  return {
    key: 'subArrays',
    flag: 1,
    words: `${subArrays.length} sub-arrays of 3 or more agree within`,
    figure: `± ${Math.max(1, Math.ceil(turn))}°, ${speedSd(Math.max(0.1, speed))} ${speedUnit()}`,
  }
}
