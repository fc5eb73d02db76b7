import type { Parts } from '../../config/parts.ts'
import type { Past } from '../../services/demonstrationPast.ts'
import type { StationTimeline } from '../../services/estimates.ts'

export type PastStation = Past['manifest']['stations'][number] & { timeline: StationTimeline }

/** What a step is given beside the past: its stations, how to say how far it is (0 to 1), whether to stop. */
export interface Undertaking {
  parts: Parts
  past: Past
  stations: PastStation[]
  report(progress: number, detail: string): Promise<void>
  isHalted(): boolean
}
