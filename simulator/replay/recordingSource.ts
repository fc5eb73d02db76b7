import type { FrameSource } from '../client/frameSource.ts'
import type { Recording } from './recording.ts'

/** Whole seconds of a recording; what is left over at its end is not sent. */
export const wholeSeconds = (recording: Recording): number =>
  Math.floor(recording.samples.length / recording.sampleRate)

/** The recording as frames of a station, its first sample at `startsAt` (a whole second, ms since 1970 UTC). */
export function recordingSource(recording: Recording, code: string, startsAt: number): FrameSource {
  const { sampleRate, sensors, samples } = recording
  return {
    code,
    sampleRate,
    sensors,
    endsAt: startsAt + 1000 * wholeSeconds(recording),
    valuesAt(start) {
      const first = ((start - startsAt) / 1000) * sampleRate
      return sensors.map((_, m) => Array.from({ length: sampleRate }, (_, n) => samples[first + n][m]))
    },
  }
}
