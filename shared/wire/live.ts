/** Live: messages between the server and a browser on `/live` (session cookie and Origin checked before the upgrade). */
import { z } from 'zod'

/** Rooms: `stations`, `station:ID`, `traces:ID`, `system`, `connections`, `alerts`, `limits`, `messages`, `places`, `place:ID`; watch joins with its feature. */
export const roomName = z
  .string()
  .regex(
    /^(stations|system|connections|alerts|limits|messages|watch|onWatch|bulletins|places|(station|traces|place):[1-9][0-9]{0,8})$/,
  )

export const liveClientMessage = z.discriminatedUnion('type', [
  z.strictObject({ type: z.literal('subscribe'), rooms: z.array(roomName).min(1).max(100) }),
  z.strictObject({ type: z.literal('unsubscribe'), rooms: z.array(roomName).min(1).max(100) }),
])
export type LiveClientMessage = z.infer<typeof liveClientMessage>

export const liveServerMessage = z.discriminatedUnion('type', [
  z.object({
    type: z.literal('hello'),
    /** Changes with every start of the server: sequence numbers count within one epoch. */
    epoch: z.string(),
    serverTime: z.string(),
    readOnly: z.boolean(),
    absoluteUntil: z.string(),
  }),
  z.object({ type: z.literal('time'), serverTime: z.string() }),
  /** `body` is exactly what REST gives for that resource. */
  z.object({ type: z.literal('event'), room: z.string(), seq: z.number().int(), kind: z.string(), body: z.unknown() }),
  z.object({ type: z.literal('session'), state: z.enum(['readOnly', 'ended']) }),
  /** The rooms that were granted, each with the sequence number of its last event; refused ones with the reason. */
  z.object({
    type: z.literal('subscribed'),
    rooms: z.array(z.object({ room: z.string(), seq: z.number().int() })),
    refused: z.array(z.object({ room: z.string(), reason: z.string() })),
  }),
])
export type LiveServerMessage = z.infer<typeof liveServerMessage>

/** Kinds of events and the REST resource their body equals. */
export const liveEventKinds = {
  /** rooms `stations` and `station:ID`; body: stationView */
  station: 'station',
  /** rooms `stations` and `station:ID`; body: currentEstimate (without detail) */
  estimate: 'estimate',
  /** room `station:ID`; body: seriesPoint */
  seriesPoint: 'seriesPoint',
  /** room `traces:ID`; body: tracesChunk */
  traces: 'traces',
  /** room `system`; body: longJobView */
  job: 'job',
  /** room `connections`; body: connectionAttempt */
  connection: 'connection',
  /** room `alerts`; body: alertView */
  alert: 'alert',
  /** room `limits`; body: limitView */
  limit: 'limit',
  /** room `watch`; body: logEntryView, also when something was added to it */
  logEntry: 'logEntry',
  /** room `onWatch`; body: watchNow */
  watch: 'watch',
  /** room `bulletins`; body: bulletinView */
  bulletin: 'bulletin',
  /** room `bulletins`; body: { id } of a draft thrown away */
  bulletinGone: 'bulletinGone',
  /** room `messages`; body: messageView */
  message: 'message',
  /** rooms `places` and `place:ID`; body: placeView */
  place: 'place',
} as const
