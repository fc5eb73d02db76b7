/** The parts of `npm test`, in two lanes for two cores, and their sum. */
import { mkdir, rm } from 'node:fs/promises'
import { join } from 'node:path'
import { readFaultReport, readVitestReport } from './testReports.ts'
import type { Tally } from './testReports.ts'
import { runProgram } from './runProgram.mjs'

interface Part {
  title: string
  args: string[]
  /** Answers what was counted; absent: the part is one check. */
  count?: () => Promise<Tally>
}

const progressMilliseconds = 20_000

function parts(root: string, reports: string) {
  const tool = (path: string) => join(root, 'node_modules', path)
  const vitest = (project: string, ...more: string[]): Part => {
    const report = join(reports, `${project}.json`)
    const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${report}`]
    return {
      title: `${project} tests`,
      args: [
        tool('vitest/vitest.mjs'),
        'run',
        '--config',
        'tests/vitest.config.ts',
        '--project',
        project,
        ...reporters,
        ...more,
      ],
      count: () => readVitestReport(report),
    }
  }
  const faultReport = join(reports, 'faults.json')
  const types: Part = { title: 'types', args: [tool('vue-tsc/bin/vue-tsc.js'), '--noEmit'] }
  const lint: Part = { title: 'lint', args: [tool('eslint/bin/eslint.js'), '.', '--max-warnings', '0'] }
  const imports: Part = {
    title: 'import rules',
    args: [tool('dependency-cruiser/bin/dependency-cruise.mjs'), '--config', '.dependency-cruiser.cjs'].concat([
      'shared',
      'server',
      'simulator',
      'src',
      'tests',
    ]),
  }
  const build: Part = { title: 'client build', args: ['--import', 'tsx', 'server/setup/build.ts'] }
  const faults: Part = {
    title: 'fault tests',
    args: ['--import', 'tsx', 'tests/faults/index.ts', '--short', '--report', faultReport],
    count: () => readFaultReport(faultReport),
  }
  return [
    [types, build, vitest('e2e'), vitest('client')],
    [vitest('unit'), imports, lint, vitest('api'), faults],
  ]
}

async function runPart(root: string, part: Part): Promise<Tally> {
  const since = performance.now()
  const elapsed = () => `${((performance.now() - since) / 1000).toFixed(1)} s`
  console.log(`\n== ${part.title}: begins`)
  const timer = setInterval(() => console.log(`   ${part.title}: ${elapsed()}, still at it`), progressMilliseconds)
  const lines: string[] = []
  const env = { ...process.env, NO_COLOR: '1', FORCE_COLOR: undefined }
  const { code } = await runProgram(process.execPath, part.args, { cwd: root, env, onLine: (line) => lines.push(line) })
  clearInterval(timer)
  const tally = await countPart(part, code)
  console.log(`\n== ${part.title}: ${elapsed()}, ${tally.passed} passed, ${tally.failed} failed`)
  if (tally.failed > 0) console.log(lines.join('\n'))
  return tally
}

/** A part that fails without naming a failed test did not run as it should: that is one failure. */
async function countPart(part: Part, code: number): Promise<Tally> {
  if (!part.count) return code === 0 ? { passed: 1, failed: 0 } : { passed: 0, failed: 1 }
  const tally = await part.count().catch(() => ({ passed: 0, failed: 1 }))
  if (code !== 0 && tally.failed === 0) return { ...tally, failed: 1 }
  return tally
}

/** Answers the exit code: 0 when everything ran and passed. */
export async function runTests(root: string): Promise<number> {
  const since = performance.now()
  const reports = join(root, 'var', 'test')
  await rm(reports, { recursive: true, force: true })
  await mkdir(reports, { recursive: true })
  const total: Tally = { passed: 0, failed: 0 }
  await Promise.all(
    parts(root, reports).map(async (lane) => {
      for (const part of lane) {
        const { passed, failed } = await runPart(root, part)
        total.passed += passed
        total.failed += failed
      }
    }),
  )
  console.log(`\nAll parts: ${((performance.now() - since) / 1000).toFixed(0)} s`)
  console.log(`${total.passed} passed, ${total.failed} failed`)
  return total.failed === 0 && total.passed > 0 ? 0 : 1
}
