import { beforeAll, expect, it } from 'vitest'
import { EstimateDetail } from '../../server/models/index.ts'
import { thinDetails } from '../../server/services/estimates.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
beforeAll(async () => {
  parts = await testParts()
})

it('keeps every detail of 90 days, older ones of every tenth minute, and those of other runs', async () => {
  const now = parts.clock.now().getTime()
  const agoAt = (days: number, minute: number, runId = 0) => {
    const hour = Math.floor((now - days * 86_400_000) / 3_600_000) * 3_600_000
    return {
      stationId: 1,
      windowEndsAt: new Date(hour + minute * 60_000),
      runId,
      revision: 1,
      payload: Buffer.from([1]),
    }
  }
  const kept = [agoAt(88, 7), agoAt(92, 0), agoAt(92, 20), agoAt(92, 7, 3)]
  await EstimateDetail.bulkCreate([...kept, agoAt(92, 7), agoAt(400, 59)])
  expect(await thinDetails(parts)).toBe(2)
  expect(await thinDetails(parts)).toBe(0)
  const left = await EstimateDetail.findAll({ attributes: ['windowEndsAt', 'runId'], raw: true })
  const names = (rows: { windowEndsAt: Date; runId: number }[]) =>
    rows.map(({ windowEndsAt, runId }) => `${new Date(windowEndsAt).toISOString()}/${runId}`).sort()
  expect(names(left)).toEqual(names(kept))
})
