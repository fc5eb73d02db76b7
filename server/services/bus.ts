/**
 * News within the process, published after commit. The bus may lose news (a crash), so nothing that matters hangs
 * on it alone: jobs read stored watermarks, browsers fetch again.
 */
import { EventEmitter } from 'node:events'
import type { LongJobView } from '../../shared/schemas/longJob.ts'
import type { TracesChunk } from '../../shared/schemas/station.ts'
import type { ConnectionAttempt } from '../../shared/schemas/stationSetUpLink.ts'

export interface News {
  /** Durable readings of a station, newest end in milliseconds since 1970 UTC. */
  'readings.stored': { stationId: number; from: number; to: number; late: boolean }
  /** Newest samples for the record section, at most 4 a second a station. */
  'traces.arrived': TracesChunk
  /** The telemetry link of a station changed (connected, lost, clock). */
  'link.changed': { stationId: number }
  'estimate.saved': { stationId: number; windowEndsAt: number; revision: number }
  'session.ended': { sessionId: string }
  /** Role, disabling: everything of this person must be asked again. */
  'person.changed': { personId: number }
  /** A station was made, changed, retired or restored; its settings or its array. */
  'station.changed': { stationId: number }
  /** Somebody tries to connect as a station, or how far it came changed. */
  'connection.changed': ConnectionAttempt
  /** A file that was brought in is to be checked or stored. */
  'upload.ordered': { uploadId: number }
  /** A key was revoked. */
  'stationKey.revoked': { stationId: number; keyId: number }
  'job.progressed': LongJobView
  /** A recomputation waits to be worked off. */
  'run.ordered': { runId: number }
  /** An outlook of a place was saved, late ones too. */
  'outlook.saved': { placeId: number; windowEndsAt: number; revision: number }
  /** Description, settings or notices of a place. */
  'place.changed': { placeId: number }
  'alert.changed': { alertId: number }
  'limit.changed': { limitId: number }
  /** Lines were written by people, or something was added to them. */
  'log.written': { entryIds: number[] }
  /** A watch began or ended, notes were written. */
  'watch.changed': Record<string, never>
  /** A bulletin was drafted, changed, issued, cancelled or thrown away, or its next issue is overdue. */
  'bulletin.changed': { bulletinId: number }
  /** An e-mail was written, or became what it is now for somebody. */
  'message.changed': { messageId: number; alertId: number | null }
}

export interface Bus {
  publish<K extends keyof News>(topic: K, news: News[K]): void
  /** Returns the function that ends the subscription. */
  subscribe<K extends keyof News>(topic: K, listener: (news: News[K]) => void): () => void
}

/** `onError` hears what a listener throws, so that one listener cannot silence another. */
export function createBus(onError: (error: unknown) => void): Bus {
  const emitter = new EventEmitter()
  emitter.setMaxListeners(0)
  return {
    publish: (topic, news) => void emitter.emit(topic, news),
    subscribe(topic, listener) {
      const guarded = (news: Parameters<typeof listener>[0]) => {
        try {
          listener(news)
        } catch (error) {
          onError(error)
        }
      }
      emitter.on(topic, guarded)
      return () => emitter.off(topic, guarded)
    },
  }
}
