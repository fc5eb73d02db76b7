/** Streams of stations: each connection continues one, and two connections of one stream share its ledger. */
import { startLedger, withHandled } from '../../../shared/readings/sequence.ts'
import { execute, select } from '../../models/sql.ts'
import type { OpenStream } from './arrival.ts'
import { database } from './database.ts'

export interface Streams {
  open(stationId: number, streamUuid: string): Promise<OpenStream>
  /** Forgets what is known of a stream, so that the next `open` reads it from the database. */
  forget(stream: OpenStream): void
}

export function createStreams(): Streams {
  const known = new Map<string, Promise<OpenStream>>()
  return {
    open(stationId, streamUuid) {
      const key = `${stationId}/${streamUuid.toLowerCase()}`
      const stream = known.get(key) ?? loadStream(stationId, streamUuid.toLowerCase())
      known.set(key, stream)
      stream.catch(() => known.delete(key))
      return stream
    },
    forget(stream) {
      for (const [key, candidate] of known) {
        void candidate.then((open) => open === stream && known.delete(key)).catch(() => undefined)
      }
    },
  }
}

async function loadStream(stationId: number, streamUuid: string): Promise<OpenStream> {
  await execute(
    database(),
    `INSERT INTO streams (stationId, streamUuid, durableSeq, createdAt)
     VALUES (:stationId, :streamUuid, 0, UTC_TIMESTAMP(3)) ON DUPLICATE KEY UPDATE durableSeq = durableSeq`,
    { stationId, streamUuid },
  )
  const [row] = await select<{ id: number; durableSeq: number }>(
    database(),
    'SELECT id, durableSeq FROM streams WHERE stationId = :stationId AND streamUuid = :streamUuid',
    { stationId, streamUuid },
  )
  if (!row) throw new Error('the stream that was just made is gone')
  const beyond = await select<{ seq: number }>(
    database(),
    'SELECT seq FROM frames WHERE streamId = :id AND seq > :durableSeq ORDER BY seq',
    { id: row.id, durableSeq: Number(row.durableSeq) },
  )
  const seqs = beyond.map(({ seq }) => Number(seq))
  return { id: row.id, stationId, ledger: withHandled(startLedger(Number(row.durableSeq)), seqs) }
}
