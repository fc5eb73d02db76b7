/** Turns the news of the process into events of rooms. Bodies are what REST gives, made by the same functions. */
import { currentEstimate, seriesPoint, stationView, tracesChunk } from '../../../shared/schemas/station.ts'
import { alertView } from '../../../shared/schemas/alert.ts'
import { watchNow } from '../../../shared/schemas/watch.ts'
import { bulletinView } from '../../../shared/schemas/bulletin.ts'
import { limitView } from '../../../shared/schemas/limit.ts'
import { placeView } from '../../../shared/schemas/place.ts'
import { messageView } from '../../../shared/schemas/message.ts'
import { connectionAttempt } from '../../../shared/schemas/stationSetUpLink.ts'
import { liveEventKinds as kinds } from '../../../shared/wire/live.ts'
import type { Parts } from '../../config/parts.ts'
import { bulletinOfficeOf } from '../../presenters/bulletin.ts'
import { presentPlace } from '../../presenters/place.ts'
import { presentWatchNow } from '../../presenters/watch.ts'
import { presentStation } from '../../presenters/station.ts'
import { readAlert } from '../../services/alerts.ts'
import { findBulletin } from '../../services/bulletins.ts'
import { currentEstimateOf } from '../../services/estimates.ts'
import { readLimit } from '../../services/limits.ts'
import { readMessageLine } from '../../services/messages.ts'
import { readPoint } from '../../services/series.ts'
import { listStations } from '../../services/stations.ts'
import { createLogTail } from './logTail.ts'
import type { Hub } from '../hub.ts'

/** News whose transactions may have written lines of the log. */
const linesFollow = [
  'alert.changed',
  'limit.changed',
  'message.changed',
  'place.changed',
  'station.changed',
  'bulletin.changed',
  'watch.changed',
] as const

/** Readings come every second; what they change of a station is told this often. */
const stationEveryMs = 5_000

export interface Newscast {
  /** Tells all stations anew: ages and shares change though nothing arrives. */
  tellStations(): Promise<void>
  /** Resolves when all news so far has been told. */
  settled(): Promise<void>
  stop(): void
}

export function startNewscast(parts: Parts, hub: Hub): Newscast {
  const { bus, clock, logger } = parts
  const turns = new Map<string, Promise<void>>()
  const toldAt = new Map<number, number>()

  /** In the order of the news of each subject, for each event is read from the database. */
  function inTurn(subject: string, rooms: string[], work: () => Promise<void>): void {
    const heard = rooms.filter((room) => hub.isHeard(room))
    if (heard.length === 0) return
    const turn = (turns.get(subject) ?? Promise.resolve()).then(work).catch((error: unknown) => {
      logger.warn({ error, subject }, 'an event could not be made')
      for (const room of heard) hub.skip(room)
    })
    turns.set(subject, turn)
  }

  const roomsOf = (stationId: number): string[] => ['stations', `station:${stationId}`]

  function tellStation(stationId: number): void {
    toldAt.set(stationId, clock.monotonic())
    inTurn(`station ${stationId}`, roomsOf(stationId), async () => {
      const body = stationView.parse(await presentStation(parts, stationId))
      for (const room of roomsOf(stationId)) hub.publish(room, kinds.station, body, stationId)
    })
  }

  /** A late window of long ago is news for the series alone. */
  function tellEstimate(stationId: number, windowEndsAt: number): void {
    inTurn(`station ${stationId}`, roomsOf(stationId), async () => {
      const current = await currentEstimateOf(parts, stationId)
      if (current && Date.parse(current.windowEndsAt) === windowEndsAt) {
        const body = currentEstimate.parse(current)
        for (const room of roomsOf(stationId)) hub.publish(room, kinds.estimate, body, stationId)
      }
      const point = hub.isHeard(`station:${stationId}`) ? await readPoint(parts, stationId, windowEndsAt) : null
      // Each window is a point of its own: none of them stands for another.
      if (point) hub.publish(`station:${stationId}`, kinds.seriesPoint, seriesPoint.parse(point), windowEndsAt)
    })
  }

  /** Events of a room without a station, in the order of their news. */
  function tell(room: string, work: () => Promise<void>): void {
    inTurn(room, [room], work)
  }

  /** Whole: outlook, notices and limits change together. */
  function tellPlace(placeId: number): void {
    const rooms = ['places', `place:${placeId}`]
    inTurn(`place ${placeId}`, rooms, async () => {
      const body = placeView.parse(await presentPlace(parts, placeId))
      for (const room of rooms) hub.publish(room, kinds.place, body, placeId)
    })
  }

  const tellAlert = (alertId: number): void =>
    tell('alerts', async () =>
      hub.publish('alerts', kinds.alert, alertView.parse(await readAlert(parts, alertId)), alertId),
    )

  const tellLimit = (limitId: number): void =>
    tell('limits', async () =>
      hub.publish('limits', kinds.limit, limitView.parse(await readLimit(parts, limitId)), limitId),
    )

  /** A place shows the state of its limits to everybody. */
  function tellPlaceOfLimit(limitId: number): void {
    if (!hub.isHeard('places')) return
    inTurn(`limit ${limitId}`, ['places'], async () => {
      const { subject } = await readLimit(parts, limitId)
      if (subject.kind === 'place' && subject.id !== null) tellPlace(subject.id)
    })
  }

  const logTail = createLogTail(hub)
  const followLog = (): void => inTurn('log', ['watch'], () => logTail.follow())
  const tellWatch = (): void =>
    inTurn('onWatch', ['onWatch'], async () =>
      hub.publish('onWatch', kinds.watch, watchNow.parse(await presentWatchNow(parts)), 'watch'),
    )

  const tellBulletin = (bulletinId: number): void =>
    tell('bulletins', async () => {
      const view = await findBulletin(parts, await bulletinOfficeOf(parts), bulletinId)
      if (view) hub.publish('bulletins', kinds.bulletin, bulletinView.parse(view), bulletinId)
      else hub.publish('bulletins', kinds.bulletinGone, { id: bulletinId }, bulletinId)
    })

  const tellMessage = (messageId: number): void =>
    tell('messages', async () => {
      const line = await readMessageLine(messageId)
      if (line) hub.publish('messages', kinds.message, messageView.parse(line), messageId)
    })

  const subscriptions = [
    bus.subscribe('alert.changed', ({ alertId }) => tellAlert(alertId)),
    bus.subscribe('limit.changed', ({ limitId }) => {
      tellLimit(limitId)
      tellPlaceOfLimit(limitId)
    }),
    bus.subscribe('place.changed', ({ placeId }) => tellPlace(placeId)),
    bus.subscribe('outlook.saved', ({ placeId }) => tellPlace(placeId)),
    bus.subscribe('message.changed', ({ messageId, alertId }) => {
      tellMessage(messageId)
      // Its counts of e-mails.
      if (alertId !== null) tellAlert(alertId)
    }),
    bus.subscribe('bulletin.changed', ({ bulletinId }) => tellBulletin(bulletinId)),
    bus.subscribe('watch.changed', tellWatch),
    bus.subscribe('log.written', ({ entryIds }) => inTurn('log', ['watch'], () => logTail.tellAgain(entryIds))),
    // What writes lines of the log.
    ...linesFollow.map((topic) => bus.subscribe(topic, followLog)),
    bus.subscribe('traces.arrived', (chunk) => {
      const room = `traces:${chunk.stationId}`
      if (hub.isHeard(room)) hub.publish(room, kinds.traces, tracesChunk.parse(chunk))
    }),
    bus.subscribe('station.changed', ({ stationId }) => tellStation(stationId)),
    bus.subscribe('link.changed', ({ stationId }) => tellStation(stationId)),
    bus.subscribe('readings.stored', ({ stationId }) => {
      if (clock.monotonic() - (toldAt.get(stationId) ?? -Infinity) >= stationEveryMs) tellStation(stationId)
    }),
    bus.subscribe('estimate.saved', ({ stationId, windowEndsAt }) => tellEstimate(stationId, windowEndsAt)),
    bus.subscribe('connection.changed', (attempt) => {
      if (!hub.isHeard('connections')) return
      hub.publish('connections', kinds.connection, connectionAttempt.parse(attempt), attempt.id)
    }),
    bus.subscribe('job.progressed', (job) => hub.publish('system', kinds.job, job, job.id)),
  ]

  return {
    async tellStations() {
      const stations = hub.isHeard('stations') ? await listStations(parts) : []
      for (const { id } of stations) tellStation(id)
    },
    settled: async () => void (await Promise.all(turns.values())),
    stop() {
      for (const unsubscribe of subscriptions) unsubscribe()
    },
  }
}
