/**
 * A large file of readings through the route, the check and the store, in a process whose heap is kept small:
 * `node --max-old-space-size=128 --import tsx tests/bench/index.ts --large-file [megabytes]`.
 */
import { createReadStream, createWriteStream } from 'node:fs'
import { mkdtemp, rm, stat } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { once } from 'node:events'
import { getHeapStatistics } from 'node:v8'
import { startTakeInFiles } from '../../server/jobs/takeInFiles.ts'
import { orderUpload, readUpload, receiveUpload } from '../../server/services/uploads.ts'
import { createReadingStore } from '../../server/services/readings.ts'
import { uploadView } from '../../shared/schemas/stationSetUpUploads.ts'
import { makePerson, makeStation } from '../support/factories.ts'
import { startMariadb } from '../support/mariadb.ts'
import { benchParts, createBenchSchema } from './benchParts.ts'
import type { Figure } from './benchParts.ts'

const sampleRate = 4
const positions: [number, number][] = [[-40, -18], [-8, -30], [6, -14], [30, 34], [-18, 22]] // prettier-ignore

/** Rows of five sensors at 4 Hz up to now, until the file is so large. */
async function writeRecording(path: string, letters: string[], bytes: number): Promise<void> {
  const file = createWriteStream(path)
  const from = Date.now() - Math.ceil(bytes / 64) * 250 - 3_600_000
  let written = 0
  file.write(`time,${letters.join(',')}\n`)
  for (let n = 0; written < bytes; n++) {
    const values = letters.map((_, m) => (11 + 0.4 * Math.sin(n / 13 + m) + 0.1 * Math.sin(n / 3.1 + 2 * m)).toFixed(4))
    const line = `${new Date(Math.floor(from / 250) * 250 + n * 250).toISOString()},${values.join(',')}\n`
    written += line.length
    if (!file.write(line)) await once(file, 'drain')
  }
  file.end()
  await once(file, 'finish')
}

export async function benchLargeFile(megabytes: number): Promise<Figure[]> {
  const server = await startMariadb()
  const folder = await mkdtemp(join(tmpdir(), 'offing-large-'))
  try {
    const bare = await benchParts(await createBenchSchema(server))
    const parts = { ...bare, environment: { ...bare.environment, dataFolder: folder } }
    const store = await createReadingStore(parts)
    const { station, sensors } = await makeStation(parts.clock, { sampleRate, positions })
    const person = await makePerson(parts.clock, { role: 'admin' })
    const job = startTakeInFiles(parts)
    const path = join(folder, 'recording.csv')
    await writeRecording(path, sensors.map(({ letter }) => letter), megabytes * 1e6) // prettier-ignore
    let peak = 0
    let heap = 0
    const watch = setInterval(() => {
      peak = Math.max(peak, process.memoryUsage.rss())
      heap = Math.max(heap, process.memoryUsage().heapUsed)
    }, 50)
    const timed = async <Result>(work: () => Promise<Result>): Promise<[Result, number]> => {
      const start = performance.now()
      return [await work(), (performance.now() - start) / 1000]
    }
    const order = { stationId: station.id, kind: 'readings' as const, fileName: 'recording.csv', personId: person.id }
    const [received, receiving] = await timed(() => receiveUpload(parts, { ...order, source: createReadStream(path) }))
    const { layout } = uploadView.parse(received)
    if (!layout) throw new Error('no layout was guessed')
    const work = (act: 'check' | 'store') =>
      timed(async () => {
        await orderUpload(parts, { uploadId: received.id, act, layout, personId: person.id })
        await job.wake()
        const view = await readUpload(parts, received.id)
        if (view.report?.faults.length !== 0) throw new Error(JSON.stringify(view.report?.faults.slice(0, 3)))
        return view
      })
    const [checked, checking] = await work('check')
    const [stored, storing] = await work('store')
    clearInterval(watch)
    await job.stop()
    await store.stop()
    const { size } = await stat(path)
    await parts.sequelize.close()
    if (checked.report?.stored !== stored.report?.stored) throw new Error('what was stored is not what was foretold')
    return [
      { what: 'large file: size', value: size / 1e6, unit: 'MB' },
      { what: 'large file: values stored', value: stored.report?.stored ?? 0, unit: '' },
      { what: 'large file: received in', value: receiving, unit: 's' },
      { what: 'large file: checked in', value: checking, unit: 's' },
      { what: 'large file: stored in', value: storing, unit: 's' },
      { what: 'large file: limit of the heap', value: getHeapStatistics().heap_size_limit / 1e6, unit: 'MB' },
      { what: 'large file: most of the heap in use', value: heap / 1e6, unit: 'MB' },
      { what: 'large file: most memory of the process', value: peak / 1e6, unit: 'MB' },
    ]
  } finally {
    await rm(folder, { recursive: true, force: true })
    await server.stop()
  }
}
