/** A mail server for one machine: takes every e-mail, keeps it as a file and sends nothing on. */
import { randomBytes } from 'node:crypto'
import { mkdir, readdir, readFile, rename, writeFile } from 'node:fs/promises'
import type { AddressInfo } from 'node:net'
import { join } from 'node:path'
import { simpleParser } from 'mailparser'
import { SMTPServer } from 'smtp-server'
import type { SMTPServerDataStream, SMTPServerSession } from 'smtp-server'
import type { Clock } from '../config/clock.ts'

const largestBytes = 10 * 1024 * 1024
const host = '127.0.0.1'

export interface CaughtMail {
  /** Name of the file in the catcher's folder. */
  file: string
  receivedAt: Date
  /** Addresses of the envelope: who would have got it. */
  from: string
  to: string[]
  subject: string
  text: string
  html: string | null
  messageId: string | null
}

export interface MailCatcher {
  /** For SMTP_URL. */
  url: string
  port: number
  /** Everything caught so far, oldest first. */
  list(): Promise<CaughtMail[]>
  stop(): Promise<void>
}

const refusal = (responseCode: number, sentence: string): Error => Object.assign(new Error(sentence), { responseCode })

async function readWhole(stream: SMTPServerDataStream): Promise<Buffer> {
  const chunks: Buffer[] = []
  for await (const chunk of stream) if (!stream.sizeExceeded) chunks.push(chunk)
  if (stream.sizeExceeded) throw refusal(552, `An e-mail may have ${largestBytes} bytes here`)
  return Buffer.concat(chunks)
}

/** The envelope travels as header lines of our own, because the e-mail itself need not name its recipients. */
function withEnvelope(message: Buffer, session: SMTPServerSession, receivedAt: Date): Buffer {
  const { mailFrom, rcptTo } = session.envelope
  const lines = [
    `X-Offing-Received: ${receivedAt.toISOString()}`,
    `X-Offing-From: ${mailFrom ? mailFrom.address : ''}`,
    ...rcptTo.map(({ address }) => `X-Offing-To: ${address}`),
  ]
  return Buffer.concat([Buffer.from(lines.map((line) => `${line}\r\n`).join('')), message])
}

async function readCaught(folder: string, file: string): Promise<CaughtMail> {
  const raw = await readFile(join(folder, file))
  const mail = await simpleParser(raw)
  const lines = mail.headerLines.map(({ key, line }) => ({ key, value: line.slice(line.indexOf(':') + 1).trim() }))
  const all = (key: string) => lines.filter((line) => line.key === key).map((line) => line.value)
  return {
    file,
    receivedAt: new Date(all('x-offing-received')[0] ?? 0),
    from: all('x-offing-from')[0] ?? '',
    to: all('x-offing-to'),
    subject: mail.subject ?? '',
    text: mail.text ?? '',
    html: mail.html || null,
    messageId: mail.messageId ?? null,
  }
}

/** Acknowledges an e-mail only when its file is complete: it is written beside and then renamed. */
export async function startMailCatcher(options: { folder: string; port?: number; clock: Clock }): Promise<MailCatcher> {
  const { folder, clock } = options
  await mkdir(folder, { recursive: true, mode: 0o700 })

  async function keep(stream: SMTPServerDataStream, session: SMTPServerSession): Promise<void> {
    const message = await readWhole(stream)
    const receivedAt = clock.now()
    const name = `${receivedAt.toISOString().replaceAll(':', '')}-${randomBytes(4).toString('hex')}`
    const unfinished = join(folder, `${name}.part`)
    await writeFile(unfinished, withEnvelope(message, session, receivedAt), { mode: 0o600 })
    await rename(unfinished, join(folder, `${name}.eml`))
  }

  const server = new SMTPServer({
    banner: 'Offing keeps e-mails here and sends none on',
    disabledCommands: ['AUTH', 'STARTTLS'],
    size: largestBytes,
    logger: false,
    onData(stream, session, done) {
      keep(stream, session).then(
        () => done(),
        (error: Error) => done('responseCode' in error ? error : refusal(452, 'The e-mail could not be kept')),
      )
    },
  })
  // A client that hangs up in the middle is its own affair.
  server.on('error', () => undefined)
  await new Promise<void>((resolve, reject) => {
    server.server.once('error', reject)
    server.listen(options.port ?? 0, host, resolve)
  })
  const { port } = server.server.address() as AddressInfo
  return {
    url: `smtp://${host}:${port}`,
    port,
    async list() {
      const files = (await readdir(folder)).filter((name) => name.endsWith('.eml')).sort()
      return Promise.all(files.map((file) => readCaught(folder, file)))
    },
    stop: () => new Promise((resolve) => server.close(() => resolve())),
  }
}
