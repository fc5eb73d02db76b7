import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { beforeAll, describe, expect, it } from 'vitest'
import { turnBetween } from '../../shared/directions.ts'
import { parseReadings, ReadingsFault } from '../../shared/readings/readingsCsv.ts'
import { estimateResult } from '../../shared/schemas/estimate.ts'
import type { EstimateResult } from '../../shared/schemas/estimate.ts'
import { estimate } from '../../shared/waves/estimate.ts'
import { caseWindow, casesFolder } from './caseWindow.ts'
import { caseStation, caseTruth, judge } from './judge.ts'
import type { Judgement } from './judge.ts'
import { spoiltFiles } from './spoiltFiles.ts'

const names = readdirSync(casesFolder).sort()
const json = (name: string, file: string): unknown => JSON.parse(readFileSync(join(casesFolder, name, file), 'utf8'))
const answers = new Map<string, EstimateResult>()
const judgements = new Map<string, Judgement>()

beforeAll(() => {
  for (const name of names) {
    const answer = estimate(caseWindow(name))
    answers.set(name, answer)
    const truth = caseTruth.parse(json(name, 'truth.json'))
    judgements.set(name, judge(truth, answer, caseStation.parse(json(name, 'station.json'))))
  }
}, 60_000)

describe('a recording with known truth, made by an independent generator', () => {
  it.each(names)('%s is answered within the limits', (name) => {
    expect(judgements.get(name)?.faults).toEqual([])
  })

  it.each(names)('%s is answered in the shape of the contract', (name) => {
    expect(estimateResult.safeParse(JSON.parse(JSON.stringify(answers.get(name)))).error).toBeUndefined()
  })

  it('random seas: headings are wrong by at most 1.3 times the Cramér-Rao bound and speeds by 1.2 %, root mean square', () => {
    const errors = [...judgements.values()].flatMap((judgement) => judgement.errors)
    const rms = (values: number[]) => Math.sqrt(values.reduce((sum, v) => sum + v * v, 0) / values.length)
    expect(errors.length).toBeGreaterThan(10)
    expect(rms(errors.map((e) => e.overBound))).toBeLessThan(1.3)
    expect(rms(errors.map((e) => e.speedPercent))).toBeLessThan(1.2)
  })

  it('one wave over two arrays turned against each other has one heading and one speed', () => {
    const [a] = answers.get('o03a_pair_mono')?.systems ?? []
    const [b] = answers.get('o03b_pair_mono')?.systems ?? []
    expect(Math.abs(turnBetween(a.toward, b.toward))).toBeLessThan(1.5)
    expect(Math.abs(a.speed / b.speed - 1)).toBeLessThan(0.02)
  })
})

describe('a file that is no recording', () => {
  const lines = readFileSync(join(casesFolder, names[0], 'readings.csv'), 'utf8')
    .trimEnd()
    .split('\n')
  it.each(Object.keys(spoiltFiles))('%s is refused with its reason', (name) => {
    expect(() => parseReadings(spoiltFiles[name](lines), ['A', 'B', 'C'], 4)).toThrow(ReadingsFault)
  })
})
