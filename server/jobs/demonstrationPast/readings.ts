/** The past's readings: a stretch of every station, then the stretch before it. */
import { markTakenIn, readStretches, rowsOf, takenInFrom } from '../../services/demonstrationPast.ts'
import { importReadings } from '../../services/imports.ts'
import type { Undertaking } from './undertaking.ts'

const stretchMs = 2 * 3_600_000

export async function takeInReadings({ parts, past, stations, report, isHalted }: Undertaking): Promise<void> {
  const work = (await Promise.all(stations.map((station) => stretchesOf({ parts, past }, station)))).flat()
  work.sort((a, b) => b.stretch.from - a.stretch.from)
  for (const [index, { timeline, letters, readingsFile, stretch, from }] of work.entries()) {
    if (isHalted()) return
    if (stretch.from >= from) continue
    const { faults } = await importReadings(parts, {
      stationId: timeline.id,
      source: 'demonstration',
      rows: rowsOf(stretch),
      letters,
      fileName: readingsFile,
      personId: null,
    })
    const [fault] = faults
    if (fault) throw new Error(`${readingsFile}, row ${fault.row ?? '?'}: ${fault.reason}`)
    await markTakenIn(parts, 'readings', timeline.id, stretch.from)
    await report((index + 1) / work.length, `readings of ${timeline.code}`)
  }
}

async function stretchesOf(
  { parts, past }: Pick<Undertaking, 'parts' | 'past'>,
  { timeline, readingsFile }: Undertaking['stations'][number],
) {
  const from = await takenInFrom(parts, 'readings', timeline.id)
  const { letters, stretches } = await readStretches(past, readingsFile, stretchMs)
  return stretches.map((stretch) => ({ timeline, readingsFile, letters, from, stretch }))
}
