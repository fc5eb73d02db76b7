/** A mail server that a test holds: it keeps what it takes, and refuses, delays, drops or stalls as the test asks. */
import { createServer } from 'node:net'
import type { AddressInfo, Socket } from 'node:net'
import { simpleParser } from 'mailparser'
import type { ParsedMail } from 'mailparser'
import { SMTPServer } from 'smtp-server'

export interface Caught {
  to: string
  mail: ParsedMail
}

export interface TestMailServer {
  url: string
  port: number
  /** In the order of their arrival. */
  caught: Caught[]
  /** Every RCPT TO, taken or not. */
  asked: string[]
  /** Code and words for an address, as often as the list is long; then it is taken. */
  answers: Map<string, [code: number, words: string][]>
  /** So many e-mails are taken whole and then the connection is cut before the answer. */
  dropAfterData: number
  /** Milliseconds between having the whole e-mail and saying so. */
  slowness: number
  subjectsTo(address: string): string[]
  stop(): Promise<void>
}

const fault = ([responseCode, words]: [number, string]): Error => Object.assign(new Error(words), { responseCode })

export async function startTestMailServer(port = 0, host = '127.0.0.1'): Promise<TestMailServer> {
  const sockets = new Map<string, Socket>()
  const server = new SMTPServer({
    disabledCommands: ['AUTH', 'STARTTLS'],
    logger: false,
    onRcptTo({ address }, _session, done) {
      catcher.asked.push(address)
      const answer = catcher.answers.get(address)?.shift()
      done(answer ? fault(answer) : undefined)
    },
    onData(stream, session, done) {
      simpleParser(stream).then(
        (mail) => {
          for (const { address } of session.envelope.rcptTo) catcher.caught.push({ to: address, mail })
          if (catcher.dropAfterData === 0) return void setTimeout(done, catcher.slowness)
          catcher.dropAfterData -= 1
          for (const socket of sockets.values()) socket.destroy()
        },
        (error: Error) => done(error),
      )
    },
  })
  server.server.on('connection', (socket: Socket) => {
    const key = `${socket.remotePort}`
    sockets.set(key, socket)
    socket.on('close', () => sockets.delete(key))
  })
  server.on('error', () => undefined)
  await new Promise<void>((resolve) => server.listen(port, host, () => resolve()))
  const address = server.server.address() as AddressInfo
  const catcher: TestMailServer = {
    url: `smtp://${host}:${address.port}`,
    port: address.port,
    caught: [],
    asked: [],
    answers: new Map(),
    dropAfterData: 0,
    slowness: 0,
    subjectsTo: (to) => catcher.caught.filter((one) => one.to === to).map(({ mail }) => mail.subject ?? ''),
    stop: () => new Promise((resolve) => server.close(() => resolve())),
  }
  return catcher
}

/** Takes the connection and never says a word. */
export async function startSilentServer(): Promise<{ url: string; stop(): Promise<void> }> {
  const sockets = new Set<Socket>()
  const server = createServer((socket) => {
    sockets.add(socket)
    socket.on('error', () => undefined)
  })
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', () => resolve()))
  const { port } = server.address() as AddressInfo
  return {
    url: `smtp://127.0.0.1:${port}`,
    stop: () =>
      new Promise((resolve) => {
        for (const socket of sockets) socket.destroy()
        server.close(() => resolve())
      }),
  }
}
