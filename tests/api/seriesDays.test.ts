import { beforeAll, describe, expect, it } from 'vitest'
import { startKeepSeriesDays } from '../../server/jobs/keepSeriesDays.ts'
import { Estimate, SeriesDay } from '../../server/models/index.ts'
import { estimateRow } from '../../server/services/estimates.ts'
import { rebuildSeriesDays } from '../../server/services/series.ts'
import { withoutFigures } from '../../shared/waves/stationClock.ts'
import { makeStation } from '../support/factories.ts'
import type { StationMade } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

const midnight = Date.UTC(2026, 10, 30)
const minute = 60_000

let parts: TestParts
let made: StationMade
beforeAll(async () => {
  parts = await testParts()
})

/** A row of run 0 with a height and, where it is resolved, a bearing. */
async function estimate(windowEndsAt: number, height: number, toward: number | null, revision = 1): Promise<void> {
  const figures = withoutFigures({
    reason: toward === null ? 'no-resolvable-wave' : null,
    qualityFlag: toward === null ? 4 : 1,
    waterDepth: 12,
    waterDepthSource: 'nominal',
    completeness: 1,
    sensors: [],
    tests: [],
  })
  const row = estimateRow(
    { ...figures, resolved: toward !== null, significantWaveHeight: height },
    {
      stationId: made.station.id,
      windowStartsAt: windowEndsAt - 20 * minute,
      windowEndsAt,
      surgeStartsAt: null,
      computedAt: windowEndsAt,
      origin: 'live',
      deploymentId: made.deployment.id,
      sensorsDeployed: 3,
      settingsId: made.settings.id,
      softwareVersion: '0',
      inputCommitId: 1,
      resultDigest: '',
    },
  )
  await Estimate.create({ ...row, towardDegrees: toward, revision })
}

const days = async (quantity: string) =>
  SeriesDay.findAll({ where: { subjectId: made.station.id, quantity }, order: ['day'], raw: true })

describe('days of the series', () => {
  it('hold the windows that end in them, midnight with the day that it begins, and their summary', async () => {
    made = await makeStation(parts.clock)
    await estimate(midnight - minute, 9, 90)
    for (const [n, height, toward] of [
      [0, 1, 350],
      [1, 2, 10],
      [3, 3, null],
    ] as const) {
      await estimate(midnight + n * minute, height, toward)
    }
    await estimate(midnight + minute, 2.5, 20, 2)
    await rebuildSeriesDays(parts, made.station.id, '2026-11-30', '2026-11-30')
    const [heights] = await days('significantWaveHeight')
    // Windows without a vector count for nothing in the summary; of two revisions the newer one stands.
    expect(heights).toMatchObject({ stepSeconds: 60, goodCount: 2, minimum: 1, maximum: 2.5, mean: 1.75 })
    const [bearings] = await days('towardDegrees')
    expect(bearings?.mean).toBeCloseTo(5, 6)
    expect(bearings?.minimum).toBeNull()
  })

  it('are packed when they have closed, and again when a late estimate falls into them', async () => {
    made = await makeStation(parts.clock)
    await estimate(midnight + minute, 1, 60)
    await estimate(midnight + 25 * 60 * minute, 1, 60)
    parts.clock.set(new Date(midnight + 26 * 60 * minute))
    const job = startKeepSeriesDays(parts, { isUnscheduled: true })
    await job.wake()
    expect((await days('height')).map(({ day, goodCount }) => [day, goodCount])).toEqual([['2026-11-30', 0]])
    expect((await days('significantWaveHeight')).map(({ maximum }) => maximum)).toEqual([1])

    await estimate(midnight + minute, 4, 60, 2)
    const windowEndsAt = midnight + minute
    parts.bus.publish('estimate.saved', { stationId: made.station.id, windowEndsAt, revision: 2 })
    await job.wake()
    await job.stop()
    expect((await days('significantWaveHeight')).map(({ maximum }) => maximum)).toEqual([4])
  })
})
