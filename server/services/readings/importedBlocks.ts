/** Packed minutes of a file beside what is stored: only samples that nothing stands in the place of become blocks. */
import type { Transaction } from 'sequelize'
import { compareWithStored } from '../../../shared/readings/compare.ts'
import { lengthOf } from '../../../shared/readings/span.ts'
import { insertBlocks, newestParts } from './blocks.ts'
import type { Block } from './blocks.ts'
import type { ImportedMinute } from './importedMinutes.ts'
import { packBlock, unpackReadings } from './payload.ts'
import type { PackedReadings } from './payload.ts'
import type { StationFacts } from './station.ts'
import { joinWindow, loadParts } from './window.ts'
import type { StoredPart } from './window.ts'

const minuteMs = 60_000
/** Stored readings are looked up for so many minutes at once. */
const minutesAtOnce = 60

export interface BlockMaking {
  station: StationFacts
  source: 'import' | 'demonstration'
  importId: number
  commitId: number
  deploymentAt(timeMs: number): number | null
}

export interface BlockCounts {
  stored: number
  repeated: number
  conflicting: number
}

/** Writes them (without a transaction it only looks) and answers the counts of samples and the starts of the minutes that something was added to. */
export async function storeMinutes(
  minutes: readonly ImportedMinute[],
  making: BlockMaking,
  transaction?: Transaction,
): Promise<{ counts: BlockCounts; added: number[] }> {
  const counts: BlockCounts = { stored: 0, repeated: 0, conflicting: 0 }
  const added: number[] = []
  for (let n = 0; n < minutes.length; n += minutesAtOnce) {
    const some = minutes.slice(n, n + minutesAtOnce)
    const from = some[0]?.startsAt ?? 0
    const to = (some.at(-1)?.startsAt ?? 0) + minuteMs
    const stored = await loadParts(making.station.id, from, to, undefined, transaction)
    const parts = transaction ? await newestParts(making.station.id, from, to, transaction) : new Map<number, number>()
    const blocks: Block[] = []
    for (const minute of some) {
      const kept = remainderOf(minute, stored, counts)
      if (!kept) continue
      added.push(minute.startsAt)
      counts.stored += kept.present
      if (transaction) blocks.push(blockOf(kept, minute, (parts.get(minute.startsAt) ?? -1) + 1, making))
    }
    if (transaction) await insertBlocks(blocks, transaction)
  }
  return { counts, added }
}

interface Kept extends PackedReadings {
  present: number
  missing: number
}

/** What is new in a minute; null for nothing. */
function remainderOf(minute: ImportedMinute, stored: readonly StoredPart[], counts: BlockCounts): Kept | null {
  const { startsAt, length, present } = minute
  const span = unpackReadings(minute.payload)
  const size = length * span.letters.length
  if (stored.length === 0) return present === 0 ? null : { ...minute, missing: size - present }
  const { letters, sampleRate } = span
  const beside = joinWindow(stored, startsAt, startsAt + minuteMs, { letters, sampleRate })
  const { added, repeated, conflicting, remainder } = compareWithStored(span, beside)
  counts.repeated += repeated
  counts.conflicting += conflicting
  if (added === 0) return null
  if (repeated + conflicting === 0) return { ...minute, missing: size - present }
  return { ...packBlock(remainder), present: added, missing: lengthOf(remainder) * letters.length - added }
}

function blockOf(kept: Kept, { startsAt }: ImportedMinute, part: number, making: BlockMaking): Block {
  const { station, source, importId, commitId, deploymentAt } = making
  const deploymentId = deploymentAt(startsAt)
  if (deploymentId === null) throw new Error(`no deployment of station ${station.id} was in force at ${startsAt}`)
  return {
    stationId: station.id,
    startsAt,
    part,
    deploymentId,
    firstCommitId: commitId,
    lastCommitId: commitId,
    source,
    importId,
    sampleRate: station.sampleRate,
    sampleCount: kept.present,
    missingCount: kept.missing,
    clockOffset: null,
    payload: kept.payload,
    digest: kept.digest,
  }
}
