/** One station's connection, from its hello to its close. */
import type { WebSocket } from 'ws'
import { hasTooManyHoles } from '../../../shared/readings/sequence.ts'
import { heartbeatSeconds, maxFrameBytes, telemetryClose } from '../../../shared/wire/telemetry.ts'
import type { FrameMessage, HelloMessage, RefusalCode, TelemetryServerMessage } from '../../../shared/wire/telemetry.ts'
import { loadStationFacts, noteClockOffset, packFrame } from '../../services/readings.ts'
import type { OpenStream, Outcome, StationFacts } from '../../services/readings.ts'
import type { Attempt } from '../../services/connections.ts'
import type { KeyHolder } from '../../services/stationKeys.ts'
import { createClockWatch } from './clockWatch.ts'
import { differenceOfHello, differencesOfHello } from './fitHello.ts'
import type { Pace } from './pace.ts'
import { placeFrame } from './placeFrame.ts'
import { readMessage } from './readMessage.ts'
import type { Surroundings } from './surroundings.ts'

/** A sender is held back when so many of its frames wait for a commit, and heard again at the lower number. */
const mostWaiting = 400
const fewWaiting = 100
const malformedInARow = 3

interface Streaming {
  hello: HelloMessage
  station: StationFacts
  stream: OpenStream
}

export class Connection {
  readonly key: KeyHolder
  /** What it was closed for, in full; null while it stands. */
  closeReason: string | null = null
  private readonly attempt: Attempt
  private readonly socket: WebSocket
  private readonly around: Surroundings
  private readonly pace: Pace
  private readonly clockWatch = createClockWatch()
  private streaming: Streaming | null = null
  private malformed = 0
  private ackDue: number | null = null
  private heldBack = false
  private answered = true

  constructor(socket: WebSocket, key: KeyHolder, around: Surroundings, attempt: Attempt) {
    this.socket = socket
    this.attempt = attempt
    this.key = key
    this.around = around
    this.pace = around.paceOf(key.stationId)
    socket.on('pong', () => (this.answered = true))
  }

  get stationId(): number {
    return this.key.stationId
  }

  get isStreaming(): boolean {
    return this.streaming !== null
  }

  close(code: number, reason: string): void {
    this.closeReason ??= reason
    // A reason travels in a control frame of at most 125 bytes, two of which are the code.
    this.socket.close(
      code,
      Buffer.from(reason)
        .subarray(0, 120)
        .toString()
        .replace(/\uFFFD/g, ''),
    )
    // What is held back would never read the other side's answer to the close.
    if (this.heldBack) this.socket.resume()
  }

  /** Messages are taken one after the other. */
  async take(message: Buffer, isBinary: boolean): Promise<void> {
    const { clock } = this.around
    if (this.socket.readyState !== this.socket.OPEN) return
    if (!this.pace.takeMessage(clock.monotonic())) return this.close(telemetryClose.tooFast, 'too many messages')
    const read = readMessage(message, isBinary)
    const { streaming } = this
    if (read.kind === 'frame' && streaming) return this.takeFrame(read.frame, message, streaming)
    if (read.kind === 'hello' && !streaming) return this.takeHello(read.hello)
    const seq = read.kind === 'malformed' ? read.seq : read.kind === 'frame' ? read.frame.seq : null
    const detail = read.kind === 'malformed' ? read.detail : streaming ? 'hello was said already' : 'hello comes first'
    this.takeMalformed(seq, detail, message)
  }

  private async takeHello(hello: HelloMessage): Promise<void> {
    const { clock, store } = this.around
    const arrivedAt = clock.now().getTime()
    const station = await loadStationFacts(this.stationId, clock.now())
    const { station: code, software, sampleRate, sensors } = hello
    const clockOffsetSeconds = (arrivedAt - Date.parse(hello.sentAt)) / 1000
    const differences = station ? differencesOfHello(hello, station) : []
    this.attempt.heard(
      { station: code, software, sampleRate, sensors, clockOffsetSeconds },
      differences,
      station?.code ?? null,
    )
    if (!station || station.code !== hello.station) {
      return this.close(telemetryClose.keyRefused, `this key is not that of station ${hello.station}`)
    }
    if (station.state === 'retired') return this.close(telemetryClose.retired, 'the station is retired')
    if (differences.length > 0) return this.close(telemetryClose.helloDoesNotFit, differences.join('; '))
    const stream = await store.streams.open(station.id, hello.stream)
    if (this.socket.readyState !== this.socket.OPEN) return
    this.malformed = 0
    this.streaming = { hello, station, stream }
    this.clockWatch.note(Date.parse(hello.sentAt), arrivedAt)
    this.around.welcomed(this)
    this.attempt.welcomed()
    this.send({
      type: 'welcome',
      resumeFrom: stream.ledger.contiguous + 1,
      serverTime: clock.now().toISOString(),
      heartbeatSeconds,
      maxFrameBytes,
    })
  }

  private takeMalformed(seq: number | null, detail: string, message: Buffer): void {
    this.malformed += 1
    if (seq === null || !this.streaming) this.attempt.refused('malformed', detail)
    if (seq !== null && this.streaming) this.putAside(seq, null, { code: 'malformed', detail }, message, this.streaming)
    else this.send({ type: 'refused', seq, code: 'malformed', detail })
    if (this.malformed >= malformedInARow) this.close(telemetryClose.malformed, `malformed: ${detail}`)
  }

  private takeFrame(frame: FrameMessage, message: Buffer, streaming: Streaming): void {
    const { clock, store } = this.around
    const arrivedAt = clock.now().getTime()
    const sentAt = Date.parse(frame.sentAt)
    const start = Date.parse(frame.start)
    this.malformed = 0
    const seconds = (frame.values[0]?.length ?? 0) * frame.interval
    if (!this.pace.takeRecord(seconds, clock.monotonic())) {
      return this.close(telemetryClose.tooFast, 'faster than 50 times real time')
    }
    if (hasTooManyHoles(streaming.stream.ledger)) {
      return this.close(telemetryClose.malformed, 'too many holes in the sequence: begin a new stream')
    }
    this.watchClock(sentAt, arrivedAt)
    this.attempt.framed({
      seq: frame.seq,
      values: frame.sensors.map((sensor, n) => ({ sensor, value: frame.values[n]?.at(-1) ?? null })),
      start,
      arrivedAt,
      samples: frame.values[0]?.length ?? 0,
      end: start + seconds * 1000,
    })
    const placed = placeFrame(frame, streaming.station, arrivedAt)
    if ('code' in placed) return this.putAside(frame.seq, start, placed, message, streaming)
    store.enqueue({
      kind: 'frame',
      station: streaming.station,
      stream: streaming.stream,
      seq: frame.seq,
      span: placed.span,
      ...packFrame(placed.span),
      sentAt,
      arrivedAt,
      clockOffset: this.clockWatch.offset(),
      settled: (outcome, durableSeq) => this.settle(frame.seq, outcome, durableSeq),
    })
    this.holdBack()
  }

  private putAside(
    seq: number,
    startsAt: number | null,
    { code, detail }: { code: RefusalCode; detail: string },
    raw: Buffer,
    streaming: Streaming,
  ): void {
    const { clock, store } = this.around
    this.attempt.refused(code, detail)
    store.enqueue({
      kind: 'refused',
      station: streaming.station,
      stream: streaming.stream,
      seq,
      reason: code,
      startsAt,
      arrivedAt: clock.now().getTime(),
      raw,
      settled: (outcome, durableSeq) => {
        if (outcome.kind === 'putAside') this.send({ type: 'refused', seq, code, detail })
        this.settle(seq, outcome, durableSeq)
      },
    })
    this.holdBack()
  }

  /** After the commit: what must be said of this frame, and one acknowledgement for all that came with it. */
  private settle(seq: number, outcome: Outcome, durableSeq: number): void {
    this.hearAgain()
    if (outcome.kind === 'failed') {
      if (this.streaming) this.around.store.streams.forget(this.streaming.stream)
      return this.close(telemetryClose.tryAgainLater, 'the readings could not be stored')
    }
    if (outcome.kind === 'conflict') this.attempt.refused('conflict', outcome.detail)
    if (outcome.kind === 'conflict') this.send({ type: 'refused', seq, code: 'conflict', detail: outcome.detail })
    if (this.ackDue === null) queueMicrotask(() => this.acknowledge())
    this.ackDue = durableSeq
  }

  private acknowledge(): void {
    const seq = this.ackDue
    this.ackDue = null
    if (seq === null) return
    this.attempt.acknowledged(seq)
    this.send({ type: 'ack', seq })
  }

  private watchClock(sentAt: number, arrivedAt: number): void {
    const news = this.clockWatch.note(sentAt, arrivedAt)
    if (news === null) return
    noteClockOffset(this.stationId, news)
    this.send({ type: 'clock', offsetSeconds: news })
    this.around.bus.publish('link.changed', { stationId: this.stationId })
  }

  private holdBack(): void {
    if (this.heldBack || this.around.store.waitingOf(this.stationId) < mostWaiting) return
    this.heldBack = true
    this.socket.pause()
  }

  private hearAgain(): void {
    if (!this.heldBack || this.around.store.waitingOf(this.stationId) > fewWaiting) return
    this.heldBack = false
    // The time it was silent was ours.
    this.answered = true
    this.socket.resume()
  }

  private send(message: TelemetryServerMessage): void {
    if (this.socket.readyState === this.socket.OPEN) this.socket.send(JSON.stringify(message))
  }

  /** Every 15 s: the last ping must have been answered, the key must still hold. Who does not answer a close is cut off. */
  beat(): void {
    const { validUntil } = this.key
    if (this.socket.readyState !== this.socket.OPEN) return this.socket.terminate()
    if (validUntil && validUntil <= this.around.clock.now()) return this.close(telemetryClose.keyRefused, 'the key has expired') // prettier-ignore
    if (this.heldBack) return
    if (!this.answered) return this.close(telemetryClose.noPong, 'no pong')
    this.answered = false
    this.socket.ping()
  }

  /** Every minute: the station may have been retired, its array moved. */
  async checkStation(): Promise<void> {
    const { streaming } = this
    if (!streaming) return
    const station = await loadStationFacts(this.stationId, this.around.clock.now())
    if (!station || station.state === 'retired') return this.close(telemetryClose.retired, 'the station is retired')
    // A new survey of the same sensors asks nothing of the station.
    const difference = differenceOfHello(streaming.hello, station)
    if (difference !== null) return this.close(telemetryClose.helloDoesNotFit, difference)
    streaming.station = station
  }
}
