import { describe, expect, it } from 'vitest'
import { localFitOfSightings } from '../../../shared/hazards/localFit.ts'
import { localChance, withLocalFactor } from '../../../shared/hazards/localFigures.ts'
import type { AdoptedChance } from '../../../shared/hazards/localFigures.ts'
import { overtopping } from '../../../shared/hazards/overtopping.ts'
import { runUp } from '../../../shared/hazards/runUp.ts'
import { exactly } from '../../../shared/hazards/uncertain.ts'
import reference from '../../reference/hazards/localFit.json' with { type: 'json' }

const factor = { value: 1.2, standardError: 0.05, count: 160 }

describe('a figure with the local factor', () => {
  const up = runUp({ kind: 'sand', deepHeight: exactly(2), period: exactly(10), slope: exactly(0.05) }).runUp

  it('is higher by it, with its standard error added, and says where it comes from', () => {
    const local = withLocalFactor(up, factor)
    expect(local.value).toBeCloseTo(1.2 * (up.value ?? NaN), 12)
    expect(local.sd).toBeCloseTo(Math.hypot(1.2 * 0.38, 0.05 * (up.value ?? NaN)), 12)
    expect(local.method.source).toContain('local factor from 160 observations')
    expect(local.inputs.at(-1)).toMatchObject({ name: 'local factor', value: 1.2, sd: 0.05 })
  })

  it('keeps a likely band a band, and a figure that is not determined as it is', () => {
    const sea = { height: exactly(2), energyPeriod: exactly(9), obliquity: exactly(0) }
    const structure = { kind: 'rubble' as const, slope: exactly(0.5), roughness: exactly(0.45) }
    const { discharge } = overtopping(sea, { ...structure, freeCrest: exactly(2), toeDepth: exactly(8) })
    expect(withLocalFactor(discharge, factor).likely?.to).toBeCloseTo(1.2 * (discharge.likely?.to ?? NaN), 15)
    const dry = overtopping(sea, { ...structure, freeCrest: exactly(2), toeDepth: exactly(-1) }).discharge
    expect(withLocalFactor(dry, factor)).toBe(dry)
  })
})

describe('the local chance of a sighting', () => {
  const rows = reference.sightings.rows.map(({ at, height, seen }) => ({ at, values: [height], seen }))
  const answer = localFitOfSightings(rows, ['breaker height'])
  if (answer.kind === 'refused') throw new Error(answer.reason)
  const adopted: AdoptedChance = answer.fit

  it('is a half where scipy puts the even chance, with a band as wide as its error there', () => {
    const { value, standardError } = reference.sightings.height.evenChanceAt
    const chance = localChance(adopted, [exactly(value)])
    expect(chance.value).toBeCloseTo(0.5, 6)
    // One standard error of the even point is one of the logit over the slope.
    const logit = standardError * reference.sightings.height.values[1]
    expect(chance.likely?.to).toBeCloseTo(1 / (1 + Math.exp(-logit)), 5)
  })

  it('is wider with an uncertain prediction', () => {
    const sure = localChance(adopted, [exactly(1.4)])
    const loose = localChance(adopted, [{ value: 1.4, sd: 0.3 }])
    expect(loose.likely?.to).toBeGreaterThan(sure.likely?.to ?? 1)
    expect(loose.value).toBe(sure.value)
  })

  it('is refused beyond what was observed, and without the prediction', () => {
    expect(localChance(adopted, [exactly(20)]).reason).toBe('breaker height outside what was observed here')
    expect(localChance(adopted, [null]).reason).toBe('breaker height not known')
  })
})
