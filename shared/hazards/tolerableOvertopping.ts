/**
 * Tolerable mean overtopping in the style of table 3.3 of the EurOtop manual (2018), written down from memory: for people at a crest with a
 * clear view of the sea. A guide for whoever sets limits; closing is the authority's decision and these are no statement of safety.
 */

export interface Tolerable {
  /** m³/s per metre; null where the table names no limit. */
  discharge: number | null
  /** Largest single volume, m³ per metre. */
  volume: number | null
  source: string
  fromMemory: true
}

const source = 'EurOtop manual 2018, table 3.3, people at the crest, from memory'

/** Rows by significant height: 0.3 l/s per m at 3 m, 1 at 2 m, 10 at 1 m (the stricter end of 10 to 20). */
const rows = [
  { height: 3, discharge: 0.3e-3 },
  { height: 2, discharge: 1e-3 },
  { height: 1, discharge: 10e-3 },
]

/**
 * By the significant height at the toe (m): the row of the next higher height, so that between rows the stricter holds; the strictest above
 * 3 m. Below 0.5 m the table names none.
 */
export function tolerableForPeople(height: number): Tolerable {
  if (height < 0.5) return { discharge: null, volume: null, source, fromMemory: true }
  const row = [...rows].reverse().find((one) => height <= one.height) ?? rows[0]
  return { discharge: row.discharge, volume: 0.6, source, fromMemory: true }
}
