import { nextTick, ref } from 'vue'
import { describe, expect, it } from 'vitest'
import type { CurrentEstimate } from '../../../shared/schemas/station.ts'
import { useEqualSystems } from '../../../src/composables/useEqualSystems.ts'
import { estimate, swell } from '../support/views.ts'

const at = (minute: number, second: number, stationId = 1): CurrentEstimate =>
  estimate({
    stationId,
    windowEndsAt: new Date(Date.UTC(2026, 10, 12, 14, minute)).toISOString(),
    systems: [swell({ significantWaveHeight: 2 }), swell({ key: 2, significantWaveHeight: second })],
  })

async function follow(estimates: CurrentEstimate[]): Promise<boolean[]> {
  const current = ref<CurrentEstimate | null>(null)
  const equal = useEqualSystems(current)
  const seen: boolean[] = []
  for (const one of estimates) {
    current.value = one
    await nextTick()
    seen.push(equal.value)
  }
  return seen
}

describe('two systems as equals', () => {
  it('are so at once with the first estimate of a station', async () => {
    expect(await follow([at(0, 1.7)])).toEqual([true])
  })

  it('enter and leave with the third estimate in a row', async () => {
    const heights = [1, 1.7, 1.7, 1.7, 1.7, 1, 1, 1]
    expect(await follow(heights.map((height, index) => at(index, height)))).toEqual([
      false,
      false,
      false,
      true,
      true,
      true,
      true,
      false,
    ])
  })

  it('do not enter by a window that is told twice', async () => {
    expect(await follow([at(0, 1), at(1, 1.7), at(1, 1.7), at(1, 1.7)])).toEqual([false, false, false, false])
  })

  it('are judged afresh at another station', async () => {
    expect(await follow([at(0, 1), at(0, 1.7, 2)])).toEqual([false, true])
  })
})
