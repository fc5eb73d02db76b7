/** The judge of the fault tests is tried too: it must find what is lost, doubled, altered and missing. */
import { beforeAll, beforeEach, expect, test } from 'vitest'
import { Frame, ReadingBlock, Stream } from '../../server/models/index.ts'
import { packBlock, packFrame } from '../../server/services/readings/payload.ts'
import { nearestSlot } from '../../shared/readings/slots.ts'
import { emptySpan, toStored } from '../../shared/readings/span.ts'
import { checkHistory, checkUnbroken, checkWindows } from '../faults/historyChecker.ts'
import { sampleOf } from '../faults/recordingStation.ts'
import type { History } from '../faults/recordingStation.ts'
import { makeStation } from '../support/factories.ts'
import type { StationMade } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

const rate = 2
const firstSecond = Date.parse('2026-12-01T06:00:00Z') / 1000
let parts: TestParts
let made: StationMade
let streamId: number

beforeAll(async () => {
  parts = await testParts()
})
beforeEach(async () => {
  made = await makeStation(parts.clock, { sampleRate: rate })
  streamId = (
    await Stream.create({
      stationId: made.station.id,
      streamUuid: crypto.randomUUID(),
      durableSeq: 0,
      createdAt: parts.clock.now(),
    })
  ).id
})

const described = () => ({ code: made.station.code, sampleRate: rate, sensors: made.sensors })
const promise = (acknowledged: number, sent = acknowledged): History => ({
  firstSecond,
  sent,
  acknowledged,
  refusals: [],
  broken: [],
  connections: 1,
})

function spanOf(second: number, added: number) {
  const start = (firstSecond + second) * 1000
  const letters = made.sensors.map(({ letter }) => letter)
  const span = emptySpan(rate, nearestSlot(start, rate), letters, rate)
  letters.forEach((letter, sensor) => {
    for (let index = 0; index < rate; index += 1) {
      span.series[sensor]![index] = toStored(sampleOf(letter, firstSecond + second, index) + added)
    }
  })
  return { span, startsAt: new Date(start) }
}

async function store(second: number, added = 0): Promise<void> {
  const { span, startsAt } = spanOf(second, added)
  const times = { startsAt, sentAt: startsAt, arrivedAt: startsAt }
  const facts = { streamId, seq: second + 1, stationId: made.station.id, sampleRate: rate, sampleCount: rate }
  await Frame.create({ ...facts, ...times, commitId: second + 1, ...packFrame(span) })
}

/** The same second once more, as a minute that was compacted while its frame stayed. */
async function storeAsBlock(second: number): Promise<void> {
  const { span, startsAt } = spanOf(second, 0)
  await ReadingBlock.create({
    stationId: made.station.id,
    startsAt,
    part: 0,
    deploymentId: made.deployment.id,
    sampleRate: rate,
    firstCommitId: 1,
    lastCommitId: 1,
    source: 'live',
    sampleCount: rate * made.sensors.length,
    missingCount: 0,
    ...packBlock(span),
  })
}

const failures = async (history: History) =>
  (await checkHistory(parts.sequelize, described(), history))
    .filter(({ passed }) => !passed)
    .map(({ detail }) => detail)

test('what was promised and is there as it was sent passes, and an unacknowledged frame may be missing', async () => {
  for (const second of [0, 1, 2]) await store(second)
  expect(await failures(promise(3))).toEqual([])
  expect(await failures(promise(3, 4))).toEqual([])
})

test('an acknowledged frame that is not there is found, with the number of readings lost', async () => {
  for (const second of [0, 2]) await store(second)
  expect(await failures(promise(3))).toEqual(['6 of 18 lost'])
})

test('a reading stored twice is found, though the copies are equal', async () => {
  for (const second of [0, 1]) await store(second)
  await storeAsBlock(1)
  expect(await failures(promise(2))).toEqual(['6 twice'])
})

test('a reading with another value than was sent is found', async () => {
  await store(0)
  await store(1, 0.001)
  expect(await failures(promise(2))).toEqual(['6 altered'])
})

test('a hole in an unbroken stream and a window without an estimate are found', async () => {
  for (const second of [0, 1, 3]) await store(second)
  const from = firstSecond * 1000
  const unbroken = await checkUnbroken(parts.sequelize, described(), from, from + 4_000)
  expect(unbroken.map(({ passed, detail }) => [passed, detail])).toEqual([
    [false, '18 of 24'],
    [true, '0 twice'],
  ])
  const [windows] = await checkWindows(parts.sequelize, made.station.code, from, from + 120_000)
  expect(windows?.passed).toBe(false)
  expect(windows?.detail).toContain('2026-12-01T06:01:00.000Z')
})
