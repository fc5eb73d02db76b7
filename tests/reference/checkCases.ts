/**
 * Runs `npm run analyse` on every reference case and holds each answer against the truth:
 * node --import tsx tests/reference/checkCases.ts [folder] [--only name]. Exit 0 when all are within limits.
 */
import { spawnSync } from 'node:child_process'
import { copyFileSync, existsSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join, resolve } from 'node:path'
import { estimateResult } from '../../shared/schemas/estimate.ts'
import { turnBetween } from '../../shared/directions.ts'
import { caseStation, caseTruth, judge } from './judge.ts'
import type { Judgement } from './judge.ts'
import { spoiltFiles } from './spoiltFiles.ts'

const words = process.argv.slice(2)
const onlyAt = words.indexOf('--only')
const only = onlyAt < 0 ? undefined : words.splice(onlyAt, 2)[1]
const folder = resolve(words[0] ?? join(import.meta.dirname, 'cases'))

/** The command sees two files under neutral names in an empty folder. */
function run(caseFolder: string, readings?: string): { status: number | null; stdout: string; stderr: string } {
  const neutral = mkdtempSync(join(tmpdir(), 'case-'))
  try {
    copyFileSync(join(caseFolder, 'station.json'), join(neutral, 'station.json'))
    if (readings === undefined) copyFileSync(join(caseFolder, 'readings.csv'), join(neutral, 'readings.csv'))
    else writeFileSync(join(neutral, 'readings.csv'), readings)
    const files = [join(neutral, 'station.json'), join(neutral, 'readings.csv')]
    return spawnSync('npm', ['run', '--silent', 'analyse', '--', ...files, '--json'], {
      cwd: resolve(import.meta.dirname, '../..'),
      encoding: 'utf8',
      maxBuffer: 64 << 20,
    })
  } finally {
    rmSync(neutral, { recursive: true, force: true })
  }
}

const names = readdirSync(folder)
  .filter((name) => existsSync(join(folder, name, 'truth.json')) && (!only || name.includes(only)))
  .sort()
const parse = (name: string, file: string): unknown => JSON.parse(readFileSync(join(folder, name, file), 'utf8'))
const errors: Judgement['errors'] = []
const leading = new Map<string, { toward: number; speed: number }>()
let within = 0
for (const name of names) {
  const { status, stdout, stderr } = run(join(folder, name))
  const answer = status === 0 ? estimateResult.parse(JSON.parse(stdout)) : null
  const judgement = answer
    ? judge(caseTruth.parse(parse(name, 'truth.json')), answer, caseStation.parse(parse(name, 'station.json')))
    : { faults: [`exit code ${status}: ${stderr.trim()}`], figures: [], errors: [] }
  if (answer?.resolved) leading.set(name, answer.systems[0])
  errors.push(...judgement.errors)
  if (judgement.faults.length === 0) within++
  const verdict = judgement.faults.length === 0 ? 'ok ' : 'FAR'
  console.log(
    `${verdict} ${name.padEnd(28)} ${[...judgement.figures, ...judgement.faults.map((f) => `** ${f}`)].join('; ')}`,
  )
}
let pairsApart = 0
for (const [name, a] of leading) {
  const b = /\da_pair/.test(name) ? leading.get(name.replace('a_pair', 'b_pair')) : undefined
  if (!b) continue
  const turn = turnBetween(a.toward, b.toward)
  const faster = 100 * (a.speed / b.speed - 1)
  const same = Math.abs(turn) <= 1.5 && Math.abs(faster) <= 2
  if (!same) pairsApart++
  console.log(`${same ? 'ok ' : 'FAR'} two arrays, one wave: ${name}: ${turn.toFixed(2)}°, ${faster.toFixed(2)} %`)
}
let accepted = 0
if (names.length > 0 && !only) {
  const lines = readFileSync(join(folder, names[0], 'readings.csv'), 'utf8')
    .trimEnd()
    .split('\n')
  for (const [name, spoil] of Object.entries(spoiltFiles)) {
    const { status, stdout, stderr } = run(join(folder, names[0]), spoil(lines))
    const refused =
      status === 2 && stdout.trim() === '' && stderr.trim().split('\n').length === 1 && stderr.includes('readings.csv')
    if (!refused) accepted++
    console.log(`${refused ? 'ok ' : 'FAR'} ${name}: ${stderr.trim()}`)
  }
}
const rms = (pick: (e: Judgement['errors'][number]) => number) =>
  Math.sqrt(errors.reduce((sum, e) => sum + pick(e) ** 2, 0) / Math.max(1, errors.length))
console.log(
  `rms error: heading ${rms((e) => e.heading).toFixed(2)}° (${rms((e) => e.overBound).toFixed(2)} × bound), speed ${rms((e) => e.speedPercent).toFixed(2)} %`,
)
console.log(`${within} of ${names.length} cases within limits`)
process.exitCode = within === names.length && names.length > 0 && pairsApart === 0 && accepted === 0 ? 0 : 1
