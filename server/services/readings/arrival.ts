/** What comes over a station's link and waits to be made durable. */
import type { SampleSpan } from '../../../shared/readings/span.ts'
import type { SequenceLedger } from '../../../shared/readings/sequence.ts'
import type { RefusalCode } from '../../../shared/wire/telemetry.ts'
import type { StationFacts } from './station.ts'

/** A stream of a station while it is known to the process: its ledger changes only after a commit. */
export interface OpenStream {
  id: number
  stationId: number
  ledger: SequenceLedger
}

/** A frame that is well-formed and fits the station. */
export interface ArrivedFrame {
  kind: 'frame'
  station: StationFacts
  stream: OpenStream
  seq: number
  /** On the station's grid, sensors in the deployment's order. */
  span: SampleSpan
  payload: Buffer
  digest: Buffer
  /** By the station's clock and by ours, ms since 1970 UTC. */
  sentAt: number
  arrivedAt: number
  /** Median of arrived less sent at that moment, s. */
  clockOffset: number | null
  settled: Settled
}

/** A frame that was refused at the door: it is put aside and counts as handled. */
export interface RefusedFrame {
  kind: 'refused'
  station: StationFacts
  stream: OpenStream
  seq: number
  reason: RefusalCode
  startsAt: number | null
  arrivedAt: number
  /** As it came. */
  raw: Buffer
  settled: Settled
}

export type Arrival = ArrivedFrame | RefusedFrame

export type Outcome =
  /** Durable now, or known to be durable. */
  | { kind: 'stored' }
  | { kind: 'repeated' }
  /** Stored samples stand in its place with other values, or its number with other content. */
  | { kind: 'conflict'; detail: string }
  | { kind: 'putAside' }
  /** Not durable: the database refused it. Its sender must send it again. */
  | { kind: 'failed' }

/** Called after the commit, in the order of arrival; `durableSeq` is the stream's number without a hole. */
export type Settled = (outcome: Outcome, durableSeq: number) => void
