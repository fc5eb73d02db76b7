/**
 * Fault tests: `npm run test:faults -- --seed 7 --rounds 10`. With --short three kills, for `npm test`. The seed is
 * printed, and the same seed kills at the same moments.
 */
import { writeFile } from 'node:fs/promises'
import { parseArgs } from 'node:util'
import type { FaultReport } from '../../server/setup/testReports.ts'
import { databaseAbsentAtStart, databaseFrozen, serverAskedToEnd } from './cuts.ts'
import { galeInFasterTime } from './gale.ts'
import { carryOut, planKills } from './kills.ts'
import { mailServerAwayThenRefusing } from './mailCuts.ts'
import { killsBetweenAlertAndEmail } from './mailKills.ts'
import { setScene } from './scene.ts'
import type { Scene } from './scene.ts'

const { values } = parseArgs({
  options: {
    short: { type: 'boolean', default: false },
    seed: { type: 'string', default: '2026' },
    rounds: { type: 'string' },
    report: { type: 'string' },
    help: { type: 'boolean', short: 'h', default: false },
  },
})

const say = (line: string): void => console.log(`  ${(performance.now() / 1000).toFixed(1).padStart(6)} s  ${line}`)

type Case = { name: string; run: (scene: Scene) => Promise<FaultReport['checks']> }

const kills = (seed: number, rounds: number, longestPause: number): Case => ({
  name: `${rounds * 3} kills under load`,
  async run(scene) {
    await carryOut(planKills(seed, rounds, longestPause), scene, say)
    return scene.checkAll()
  },
})

const afterwards = (name: string, fault: (scene: Scene) => Promise<FaultReport['checks']>): Case => ({
  name,
  run: async (scene) => [...(await fault(scene)), ...(await scene.checkAll())],
})

function cases(seed: number): Case[] {
  if (values.short) return [kills(seed, 1, 2_500)]
  return [
    kills(seed, Number(values.rounds ?? 10), 6_000),
    afterwards('database absent at the start', databaseAbsentAtStart),
    afterwards('database frozen', databaseFrozen),
    afterwards('server asked to end under load', serverAskedToEnd),
  ]
}

async function main(): Promise<void> {
  if (values.help) return console.log('npm run test:faults -- [--seed N] [--rounds N] [--short] [--report FILE]')
  const seed = Number(values.seed)
  console.log(`Fault tests, seed ${seed}`)
  const checks: FaultReport['checks'] = []
  for (const { name, run } of cases(seed)) {
    console.log(`\n${name}`)
    const scene = await setScene(seed)
    try {
      checks.push(...(await run(scene)).map((one) => ({ ...one, name: `${name}: ${one.name}` })))
    } catch (error) {
      checks.push({ name, passed: false, detail: error instanceof Error ? error.message : String(error) })
      console.log((await scene.program.logOf('server')).slice(-6_000))
    } finally {
      await scene.stop()
    }
  }
  if (!values.short) {
    console.log('\nkills between alert and e-mail')
    checks.push(...(await killsBetweenAlertAndEmail(seed, say)))
    console.log('\nmail server away, then refusing')
    checks.push(...(await mailServerAwayThenRefusing(say)))
    console.log('\na gale in faster time')
    checks.push(...(await galeInFasterTime(seed, say)))
  }
  for (const { name, passed, detail } of checks)
    console.log(passed ? `  passed  ${name}` : `  FAILED  ${name}: ${detail}`)
  if (values.report) await writeFile(values.report, JSON.stringify({ seed, checks } satisfies FaultReport))
  const failed = checks.filter(({ passed }) => !passed).length
  console.log(`\n${checks.length - failed} passed, ${failed} failed (seed ${seed})`)
  process.exit(failed === 0 ? 0 : 1)
}

await main()
