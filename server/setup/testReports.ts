/** What the reports of the test programs say, as numbers of checks passed and failed. */
import { readFile } from 'node:fs/promises'
import { z } from 'zod'

export interface Tally {
  passed: number
  failed: number
}

const vitestReport = z.object({
  numPassedTests: z.number(),
  numTotalTests: z.number(),
  testResults: z.array(z.object({ status: z.string(), assertionResults: z.array(z.unknown()) })),
})

/**
 * Whatever has not passed has failed, skipped tests too; a file that could not be loaded is one failure, and so is a
 * run without any test.
 */
export function tallyVitest(report: unknown): Tally {
  const { numPassedTests, numTotalTests, testResults } = vitestReport.parse(report)
  const unloaded = testResults.filter((file) => file.status === 'failed' && file.assertionResults.length === 0).length
  const failed = numTotalTests - numPassedTests + unloaded
  return { passed: numPassedTests, failed: numTotalTests === 0 ? Math.max(failed, 1) : failed }
}

export const readVitestReport = async (path: string): Promise<Tally> =>
  tallyVitest(JSON.parse(await readFile(path, 'utf8')))

/** The fault tests' own report: one entry a check. */
export const faultReport = z.object({
  seed: z.number(),
  checks: z.array(z.object({ name: z.string(), passed: z.boolean(), detail: z.string() })),
})
export type FaultReport = z.infer<typeof faultReport>

export async function readFaultReport(path: string): Promise<Tally> {
  const { checks } = faultReport.parse(JSON.parse(await readFile(path, 'utf8')))
  const passed = checks.filter((check) => check.passed).length
  return { passed, failed: checks.length === 0 ? 1 : checks.length - passed }
}
