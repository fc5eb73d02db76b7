import { describe, expect, it } from 'vitest'
import { faultsOf, runSelfTest } from '../../../server/workers/selfTest.ts'
import { hasPassed, selfChecks } from '../../../shared/waves/selfTest.ts'

describe('the self-test of the estimator', { timeout: 40_000 }, () => {
  it('passes in this program, hand-books and seas alike', () => {
    const checks = selfChecks()
    expect(checks.filter((check) => !hasPassed(check))).toEqual([])
    expect(checks.length).toBeGreaterThanOrEqual(16)
    expect(faultsOf(() => checks)).toEqual([])
  })

  it('names what is off, by how much; a value that cannot be told is off too', () => {
    const check = { name: 'speed of 10 s in 3 m', wanted: 5.32, tolerance: 0.005 }
    expect(faultsOf(() => [{ ...check, found: 5.41 }])).toEqual(['speed of 10 s in 3 m: 5.41, not 5.32 ± 0.005'])
    expect(faultsOf(() => [{ ...check, found: NaN }])).toHaveLength(1)
  })

  it('runs in a thread of its own too', async () => {
    expect(await runSelfTest()).toEqual([])
  })

  it('that throws has failed', () => {
    const broken = () => {
      throw new Error('depth must be above zero')
    }
    expect(faultsOf(broken)).toEqual(['it could not be run (depth must be above zero)'])
  })
})
