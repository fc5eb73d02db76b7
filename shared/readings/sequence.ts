/**
 * Which frames of a stream have been handled: a number up to which there is no hole, and the runs beyond it. Pure
 * and unchanging: `withHandled` answers a new ledger, so that a transaction that fails leaves the old one in force.
 */
export interface SequenceLedger {
  /** Every frame from 1 to here is durable or put aside; 0 when none is. */
  readonly contiguous: number
  /** Runs [from, to] beyond it, rising, never touching. */
  readonly beyond: readonly (readonly [number, number])[]
}

export const startLedger = (contiguous: number): SequenceLedger => ({ contiguous, beyond: [] })

export const isHandled = (ledger: SequenceLedger, seq: number): boolean =>
  seq <= ledger.contiguous || ledger.beyond.some(([from, to]) => from <= seq && seq <= to)

/** A day of frames out of order leaves fewer; more come from a station that does not keep its numbers without holes. */
const mostRuns = 50_000

export const hasTooManyHoles = ({ beyond }: SequenceLedger): boolean => beyond.length > mostRuns

/** The ledger after these frames were handled too; order and repetitions do not matter. */
export function withHandled(ledger: SequenceLedger, seqs: readonly number[]): SequenceLedger {
  const runs: [number, number][] = [
    ...ledger.beyond.map(([from, to]): [number, number] => [from, to]),
    ...seqs.map((seq): [number, number] => [seq, seq]),
  ].sort(([a], [b]) => a - b)
  let contiguous = ledger.contiguous
  const beyond: [number, number][] = []
  for (const [from, to] of runs) {
    const last = beyond.at(-1)
    if (from <= contiguous + 1) contiguous = Math.max(contiguous, to)
    else if (last && from <= last[1] + 1) last[1] = Math.max(last[1], to)
    else beyond.push([from, to])
  }
  return { contiguous, beyond }
}
