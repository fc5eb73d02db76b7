import { beforeAll, describe, expect, it } from 'vitest'
import { ReadingBlock } from '../../server/models/index.ts'
import { select } from '../../server/models/sql.ts'
import { keepPartitions, readWindow } from '../../server/services/readings.ts'
import { makeStation } from '../support/factories.ts'
import type { StationMade } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { storeSea } from '../support/storedSea.ts'

const keepAll = {
  readingBlocks: null,
  stationHealthHours: null,
  estimates: null,
  estimateDetails: null,
  outlooks: null,
}
const december = new Date('2026-12-01T06:00:00Z')

let parts: TestParts
let made: StationMade
beforeAll(async () => {
  parts = await testParts()
  made = await makeStation(parts.clock, { sampleRate: 1 })
})

async function partitionsOf(table: string): Promise<string[]> {
  const rows = await select<{ name: string }>(
    parts.sequelize,
    `SELECT PARTITION_NAME AS name FROM information_schema.PARTITIONS
     WHERE TABLE_SCHEMA = DATABASE() AND TABLE_NAME = :table ORDER BY PARTITION_ORDINAL_POSITION`,
    { table },
  )
  return rows.map(({ name }) => name)
}

const storeMinute = (start: string) =>
  storeSea(made, { from: new Date(start), to: new Date(Date.parse(start) + 60_000), commitId: 1 })
const samplesAt = async (start: string) =>
  (await readWindow(made.station.id, Date.parse(start), Date.parse(start) + 60_000)).sampleCount

describe('partitions of months', () => {
  it('are split off a year back and two months ahead at the first run, and a month at a time afterwards', async () => {
    const changes = await keepPartitions(december, keepAll)
    expect(changes.map(({ table }) => table)).toEqual(Object.keys(keepAll))
    const names = await partitionsOf('readingBlocks')
    expect(names).toHaveLength(17)
    expect([names[0], ...names.slice(-2)]).toEqual(['p202511', 'p202702', 'future'])
    expect(await keepPartitions(december, keepAll)).toEqual([])
    const [january] = await keepPartitions(new Date('2027-01-01T00:00:00Z'), keepAll)
    expect(january).toEqual({ table: 'readingBlocks', added: ['p202703'], dropped: [] })
  })

  it('go whole when their retention has passed, and no other reading with them', async () => {
    const months = ['2026-09-30T23:59:00Z', '2026-10-01T00:00:00Z', '2026-12-01T05:00:00Z', '2027-06-01T00:00:00Z']
    for (const month of months) await storeMinute(month)
    const [change] = await keepPartitions(december, { ...keepAll, readingBlocks: 2 })
    expect(change?.dropped.at(-1)).toBe('p202609')
    expect(await Promise.all(months.map(samplesAt))).toEqual([0, 180, 180, 180])
    expect(await ReadingBlock.count()).toBe(3)
  })

  it('that were missed for long are made good with what has gathered meanwhile', async () => {
    await keepPartitions(new Date('2027-09-15T00:00:00Z'), { ...keepAll, readingBlocks: 2 })
    expect((await partitionsOf('readingBlocks')).slice(0, 2)).toEqual(['p202707', 'p202708'])
    expect(await samplesAt('2027-06-01T00:00:00Z')).toBe(0)
  })
})
