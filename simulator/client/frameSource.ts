/** Where a station's frames come from: the made sea or a recorded file. */
export interface FrameSource {
  code: string
  sampleRate: number
  sensors: { id: string; kind: 'pressure' | 'surface' }[]
  /** Milliseconds since 1970 UTC after which there is nothing more; null for a sea without end. */
  endsAt: number | null
  /** Values of every sensor for the frame that begins at `start` (a whole second), null where missing. */
  valuesAt(start: number): (number | null)[][]
}

/** Every frame holds one second. */
export const frameMilliseconds = 1000
