/** A breakwater and the sea at its toe, as the overtopping formulas take them. */
import type { Uncertain } from './uncertain.ts'

export interface Breakwater {
  kind: 'smooth' | 'rubble' | 'vertical'
  /** tan α of the seaward face; no part at a vertical wall. */
  slope: Uncertain
  /** γ_f: 1 smooth; two layers of rock 0.40 on a permeable core, 0.55 on an impermeable one. */
  roughness: Uncertain
  /** Crest above still water now, m. */
  freeCrest: Uncertain
  /** Depth of still water at the toe, m. */
  toeDepth: Uncertain
}

export interface UncertainSeaAtToe {
  height: Uncertain
  energyPeriod: Uncertain
  obliquity: Uncertain
}
