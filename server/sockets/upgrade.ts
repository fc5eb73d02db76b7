/** One door for all sockets: each path has its handler, and any other path is refused. */
import { STATUS_CODES } from 'node:http'
import type { IncomingMessage, Server } from 'node:http'
import type { Duplex } from 'node:stream'

export type UpgradeHandler = (request: IncomingMessage, socket: Duplex, head: Buffer) => void

export interface UpgradeDispatcher {
  /** Answers the function that takes the route away again. */
  route(path: string, handler: UpgradeHandler): () => void
}

export function createUpgradeDispatcher(server: Server): UpgradeDispatcher {
  const handlers = new Map<string, UpgradeHandler>()
  server.on('upgrade', (request: IncomingMessage, socket: Duplex, head: Buffer) => {
    socket.on('error', () => socket.destroy())
    const [path = ''] = (request.url ?? '').split('?')
    const handler = handlers.get(path)
    if (handler) handler(request, socket, head)
    else refuseUpgrade(socket, 404)
  })
  return {
    route(path, handler) {
      if (handlers.has(path)) throw new Error(`${path} has a handler already`)
      handlers.set(path, handler)
      return () => void handlers.delete(path)
    },
  }
}

/** Answers an upgrade with a plain status, before it became a socket. */
export function refuseUpgrade(socket: Duplex, status: number): void {
  socket.end(`HTTP/1.1 ${status} ${STATUS_CODES[status] ?? ''}\r\nConnection: close\r\nContent-Length: 0\r\n\r\n`)
}
