/**
 * Storage of readings, measured: bytes a reading, readings a second into the database, and the time to read twenty
 * minutes of a station back. Rates are also given as multiples of what twenty stations of five sensors at 4 Hz send.
 */
import { randomUUID } from 'node:crypto'
import { deflateSync } from 'node:zlib'
import { systemClock } from '../../server/config/clock.ts'
import type { Parts } from '../../server/config/parts.ts'
import { importReadings } from '../../server/services/imports.ts'
import { compactReadings, createReadingStore, loadStationFacts, packFrame, readWindow } from '../../server/services/readings.ts' // prettier-ignore
import type { OpenStream, ReadingStore, StationFacts } from '../../server/services/readings.ts'
import { packSamples } from '../../shared/readings/pack.ts'
import { toStored } from '../../shared/readings/span.ts'
import type { SampleSpan } from '../../shared/readings/span.ts'
import { makeStation } from '../support/factories.ts'
import type { StationMade } from '../support/factories.ts'
import { startMariadb } from '../support/mariadb.ts'
import { seeded } from '../support/seeded.ts'
import { gentleSwell, surfaceOf } from '../support/storedSea.ts'
import { benchParts, createBenchSchema } from './benchParts.ts'
import type { Figure } from './benchParts.ts'

const stations = 20
const sampleRate = 4
const positions: [number, number][] = [[-40, -18], [-8, -30], [6, -14], [30, 34], [-18, 22]] // prettier-ignore
const readingsASecond = stations * positions.length * sampleRate

/** A swell with a wind sea on it and the noise of an instrument of 2 mm, in stored units. */
function createSea(): (from: number, count: number, letters: string[]) => SampleSpan {
  const swell = surfaceOf(gentleSwell)
  const windSea = surfaceOf({ significantWaveHeight: 0.6, peakPeriod: 4, toward: 100, waterDepth: 12 })
  const random = seeded(1)
  const noise = () => (random() + random() + random() + random() - 2) * 0.0035
  return (from, count, letters) => ({
    sampleRate,
    firstSlot: (from / 1000) * sampleRate,
    letters,
    series: letters.map((_, index) => {
      const [east, north] = positions[index] ?? [0, 0]
      return Float64Array.from({ length: count }, (_, n) => {
        const time = from + (n * 1000) / sampleRate
        return toStored(swell(east, north, time) + windSea(east, north, time) + noise())
      })
    }),
  })
}

const sea = createSea()
const median = (values: number[]): number => values.toSorted((a, b) => a - b)[Math.floor(values.length / 2)] ?? NaN

interface Spent {
  /** Milliseconds that passed, with whatever else the machine was doing. */
  passed: number
  /** Milliseconds of processor time of this process. */
  worked: number
}

async function timed(work: () => Promise<unknown> | void): Promise<Spent> {
  const start = performance.now()
  const before = process.cpuUsage()
  await work()
  const { user, system } = process.cpuUsage(before)
  return { passed: performance.now() - start, worked: (user + system) / 1000 }
}

async function packing(): Promise<Figure[]> {
  const letters = positions.map((_, index) => `OL-${index + 1}`)
  const figures: Figure[] = []
  const second = sea(Date.UTC(2026, 11, 1), sampleRate, letters)
  figures.push({ what: 'a second, packed', value: packSamples(second).length / (letters.length * sampleRate), unit: 'B a reading' }) // prettier-ignore
  const minute = packSamples(sea(Date.UTC(2026, 11, 1), 60 * sampleRate, letters))
  const readings = 60 * sampleRate * letters.length
  for (const level of [1, 6, 9]) {
    const { worked } = await timed(() => void Array.from({ length: 50 }, () => deflateSync(minute, { level })))
    const bytes = deflateSync(minute, { level }).length
    figures.push({ what: `a minute, deflated at level ${level}`, value: bytes / readings, unit: 'B a reading' })
    figures.push({ what: `a minute, deflated at level ${level}`, value: worked / 50, unit: 'ms of work' })
  }
  return figures
}

interface Fleet {
  parts: Parts
  store: ReadingStore
  made: StationMade[]
  facts: StationFacts[]
  streams: OpenStream[]
}

/** `seconds` frames of every station, the oldest first, as fast as they are taken; answers what it took. */
async function stream(
  { store, facts, streams }: Fleet,
  from: number,
  seconds: number,
  firstSeq: number,
): Promise<Spent> {
  const frames = Array.from({ length: seconds }, (_, n) =>
    facts.map((station) => {
      const letters = station.deployment?.sensors.map(({ letter }) => letter) ?? []
      return packedFrame(sea(from + n * 1000, sampleRate, letters))
    }),
  )
  let settled = 0
  const spent = await timed(async () => {
    for (const [n, ofSecond] of frames.entries()) {
      ofSecond.forEach((frame, index) => {
        const [station, open] = [facts[index], streams[index]]
        if (!station || !open) return
        const now = Date.now()
        store.enqueue({ kind: 'frame', station, stream: open, seq: firstSeq + n, ...frame, sentAt: now, arrivedAt: now, clockOffset: 0, settled: () => void (settled += 1) }) // prettier-ignore
      })
      if (n % 100 === 99) await store.flush()
    }
    await store.flush()
  })
  if (settled !== seconds * facts.length) throw new Error(`only ${settled} frames were settled`)
  return spent
}

const packedFrame = (span: SampleSpan) => ({ span, ...packFrame(span) })

async function readBack({ made }: Fleet, from: number): Promise<Spent> {
  const times: Spent[] = []
  for (let n = 0; n < 60; n++) {
    const id = made[n % made.length]?.station.id ?? 0
    times.push(await timed(() => readWindow(id, from, from + 1_200_000)))
  }
  return { passed: median(times.map(({ passed }) => passed)), worked: median(times.map(({ worked }) => worked)) }
}

async function makeFleet(url: string): Promise<Fleet> {
  const parts = await benchParts(url)
  const store = await createReadingStore(parts)
  const fleet: Fleet = { parts, store, made: [], facts: [], streams: [] }
  for (let n = 0; n < stations; n++) {
    const made = await makeStation(systemClock, { sampleRate, positions })
    const facts = await loadStationFacts(made.station.id, new Date())
    if (!facts) throw new Error('a station is gone')
    fleet.made.push(made)
    fleet.facts.push(facts)
    fleet.streams.push(await store.streams.open(facts.id, randomUUID()))
  }
  return fleet
}

async function importing({ parts, made }: Fleet, until: number): Promise<Figure[]> {
  const hours = 12
  const from = until - hours * 3_600_000
  const count = hours * 3600 * sampleRate
  const [first] = made
  if (!first) return []
  const letters = first.sensors.map(({ letter }) => letter)
  const { series } = sea(from, count, letters)
  const rows = Array.from({ length: count }, (_, n) => ({
    timeMs: from + (n * 1000) / sampleRate,
    values: series.map((values) => (values[n] ?? 0) / 1e4),
  }))
  const order = { stationId: first.station.id, source: 'import' as const, letters, fileName: 'bench', personId: null }
  const readings = count * letters.length
  return [
    ...ofRate('import of 12 h of five sensors', readings, await timed(() => importReadings(parts, { ...order, rows }))),
    ...ofRate(
      'the same file again, all repeated',
      readings,
      await timed(() => importReadings(parts, { ...order, rows })),
    ),
  ]
}

const ofTime = (what: string, { passed, worked }: Spent): Figure[] => [
  { what, value: passed, unit: 'ms passed' },
  { what, value: worked, unit: 'ms of work' },
]

function ofRate(what: string, readings: number, { passed, worked }: Spent): Figure[] {
  const rate = readings / (passed / 1000)
  return [
    { what, value: rate, unit: 'readings/s' },
    { what, value: rate / readingsASecond, unit: 'times what 20 stations send' },
    { what, value: readings / (worked / 1000), unit: 'readings a second of work' },
  ]
}

/** On a database that keeps what it answered, as in earnest. */
export async function benchStorage(): Promise<Figure[]> {
  const server = await startMariadb({ durable: true })
  const figures = await packing()
  const fleet = await makeFleet(await createBenchSchema(server))
  try {
    const now = Math.floor(Date.now() / 60_000) * 60_000
    const from = now - 1_200_000
    const all = Number.MAX_SAFE_INTEGER
    figures.push(
      ...ofRate('streamed in, 20 stations together', 1200 * readingsASecond, await stream(fleet, from, 1200, 1)),
    )
    figures.push(...ofTime('reading 20 minutes, all in frames', await readBack(fleet, from)))
    const most = await timed(() => compactReadings({ before: now - 180_000, settledCommitId: all }))
    figures.push(...ofTime('compaction of 17 minutes of 20 stations', most))
    figures.push(...ofTime('reading 20 minutes, 3 of them in frames', await readBack(fleet, from)))
    await compactReadings({ before: now, settledCommitId: all })
    figures.push(...ofTime('reading 20 minutes, all packed', await readBack(fleet, from)))
    const late = await stream(fleet, from - 600_000, 60, 5000)
    figures.push(...ofRate('streamed in late, before what is stored', 60 * readingsASecond, late))
    figures.push(...(await importing(fleet, from - 3_600_000)))
  } finally {
    await fleet.store.stop()
    await fleet.parts.sequelize.close()
    await server.stop()
  }
  return figures
}
