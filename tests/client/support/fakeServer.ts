/** A server for stores under test: answers by path, and websockets that the test speaks through. */
import { vi } from 'vitest'
import type { LiveServerMessage } from '../../../shared/wire/live.ts'

type Answer = { status?: number; body?: unknown; headers?: Record<string, string> }
type Answerer = (method: string, body: unknown) => Answer | Promise<Answer>

export class FakeServer {
  readonly answers = new Map<string, Answerer>()
  readonly requests: { method: string; path: string; headers: Headers; body: unknown }[] = []

  install(): this {
    vi.stubGlobal('fetch', (path: string, init: RequestInit = {}) => this.answer(path, init))
    vi.stubGlobal('WebSocket', FakeWebSocket)
    FakeWebSocket.opened = []
    return this
  }

  on(path: string, answerer: Answerer | Answer): this {
    this.answers.set(path, typeof answerer === 'function' ? answerer : () => answerer)
    return this
  }

  private async answer(path: string, init: RequestInit): Promise<Response> {
    const method = init.method ?? 'GET'
    const body: unknown = typeof init.body === 'string' ? JSON.parse(init.body) : undefined
    this.requests.push({ method, path, headers: new Headers(init.headers), body })
    const answerer = this.answers.get(path)
    if (!answerer) throw new TypeError(`nothing listens at ${path}`)
    const { status = 200, body: answer, headers } = await answerer(method, body)
    return new Response(answer === undefined ? null : JSON.stringify(answer), { status, headers })
  }
}

export class FakeWebSocket {
  static readonly CONNECTING = 0
  static readonly OPEN = 1
  static opened: FakeWebSocket[] = []
  static get last(): FakeWebSocket {
    const socket = FakeWebSocket.opened.at(-1)
    if (!socket) throw new Error('no websocket was opened')
    return socket
  }

  readyState = FakeWebSocket.CONNECTING
  readonly sent: unknown[] = []
  onopen: (() => void) | null = null
  onmessage: ((event: { data: string }) => void) | null = null
  onclose: ((event: { code: number }) => void) | null = null

  constructor(readonly url: string) {
    FakeWebSocket.opened.push(this)
  }

  send(frame: string): void {
    this.sent.push(JSON.parse(frame))
  }

  close(): void {
    this.readyState = 3
  }

  /** The server accepts and greets. */
  accept(epoch = 'first', serverTime = '2026-11-12T14:32:07.000Z', readOnly = false): void {
    this.readyState = FakeWebSocket.OPEN
    this.onopen?.()
    this.say({ type: 'hello', epoch, serverTime, readOnly, absoluteUntil: '2026-11-12T20:00:00.000Z' })
  }

  say(message: LiveServerMessage): void {
    this.onmessage?.({ data: JSON.stringify(message) })
  }

  grant(room: string, seq = 0): void {
    this.say({ type: 'subscribed', rooms: [{ room, seq }], refused: [] })
  }

  end(code: number): void {
    this.readyState = 3
    this.onclose?.({ code })
  }
}

/** Lets answers that are under way arrive. */
export const settle = async (): Promise<void> => {
  for (let turn = 0; turn < 20; turn += 1) await Promise.resolve()
}
