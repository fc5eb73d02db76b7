/** The HTTP server's socket: opened with a clear word on what is in the way, closed after what is under way. */
import type { Server } from 'node:http'
import type { Environment } from './environment.ts'

const patienceMilliseconds = 10_000

/** Slow senders of headers and bodies are not waited for without end. */
function setTimeouts(server: Server): void {
  server.headersTimeout = 15_000
  // Bodies have deadlines of their own (`slowBodies`): a large file may take longer than any other request.
  server.requestTimeout = 3_600_000
  server.keepAliveTimeout = 5_000
}

/** The port or the address cannot be had; the message is one sentence for the person at the terminal. */
export class ListenRefused extends Error {
  constructor(message: string) {
    super(message)
    this.name = 'ListenRefused'
  }
}

export function listen(server: Server, { host, port }: Pick<Environment, 'host' | 'port'>): Promise<void> {
  setTimeouts(server)
  return new Promise((resolve, reject) => {
    server.once('error', (error: NodeJS.ErrnoException) => reject(new ListenRefused(sentence(error, host, port))))
    server.listen(port, host, () => {
      server.removeAllListeners('error')
      resolve()
    })
  })
}

function sentence(error: NodeJS.ErrnoException, host: string, port: number): string {
  if (error.code === 'EADDRINUSE') return `Port ${port} on ${host} is in use: set PORT to a free one.`
  if (error.code === 'EACCES') return `Port ${port} may not be opened by this user: set PORT to one above 1023.`
  return `${host}:${port} cannot be listened on (${error.code ?? error.message}): set HOST and PORT.`
}

/** Requests under way are finished, for at most ten seconds. */
export function stopListening(server: Server): Promise<void> {
  if (!server.listening) return Promise.resolve()
  return new Promise((resolve) => {
    const timer = setTimeout(() => server.closeAllConnections(), patienceMilliseconds)
    server.close(() => {
      clearTimeout(timer)
      resolve()
    })
    server.closeIdleConnections()
  })
}
