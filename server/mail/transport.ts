/**
 * Hands one e-mail to the mail server and says what is known of it. The connection is used directly, because what
 * matters is whether the whole e-mail was handed over before something failed.
 */
import { Readable } from 'node:stream'
import MailComposer from 'nodemailer/lib/mail-composer'
import SMTPConnection from 'nodemailer/lib/smtp-connection'
import { isLoopback } from '../config/environment.ts'
import type { Written } from './letter.ts'

export interface TransportOptions {
  /** smtp: or smtps:, with user and password where they are asked for. */
  url: string
  from: string
  /** Named to the mail server. */
  clientName: string
  /** Milliseconds for the connection and the greeting, each. */
  patienceMs?: number
}

export interface Envelope {
  to: string
  messageIdHeader: string
  /** Before the sender's address; empty: as the configuration has it. */
  senderName?: string
  date: Date
  /** Asked when the server is ready for the e-mail itself; false: it is not sent. */
  beforeData(): Promise<boolean>
}

export type SendResult =
  | { kind: 'accepted'; reply: string }
  | { kind: 'refused'; reply: string }
  | { kind: 'later'; reply: string; isServerDown: boolean }
  | { kind: 'unknown'; reply: string }

export interface Transport {
  send(written: Written, envelope: Envelope): Promise<SendResult>
}

const usualPatienceMs = 4_000
const answerPatienceMs = 20_000

interface Failure {
  message: string
  code: string
  command: string
  responseCode: number | null
}

function failureOf(error: unknown): Failure {
  const field = (name: string): unknown => (error instanceof Error ? Reflect.get(error, name) : null)
  const code = field('code')
  const command = field('command')
  const responseCode = field('responseCode')
  return {
    message: error instanceof Error ? error.message : String(error),
    code: typeof code === 'string' ? code : '',
    command: typeof command === 'string' ? command : '',
    responseCode: typeof responseCode === 'number' ? responseCode : null,
  }
}

/** Refusals that speak of the person's address or of this e-mail; others speak of us and may be mended. */
const isOfRecipient = ({ command }: Failure): boolean => command === 'RCPT TO' || command === 'DATA'

export function resultOf(error: unknown, wasHandedOver: boolean): SendResult {
  const failure = failureOf(error)
  const { message, responseCode } = failure
  const reply = message.replace(/\s+/g, ' ')
  if (responseCode !== null && responseCode >= 500 && isOfRecipient(failure)) return { kind: 'refused', reply }
  if (responseCode !== null && responseCode >= 400) {
    return { kind: 'later', reply, isServerDown: !isOfRecipient(failure) }
  }
  if (wasHandedOver) return { kind: 'unknown', reply }
  return { kind: 'later', reply, isServerDown: true }
}

export function createTransport({ url, from, clientName, patienceMs = usualPatienceMs }: TransportOptions): Transport {
  const server = new URL(url)
  const isSecure = server.protocol === 'smtps:'
  const isNear = isLoopback(server.hostname)
  const options = {
    host: server.hostname.replace(/^\[|\]$/g, ''),
    port: Number(server.port) || (isSecure ? 465 : isNear ? 25 : 587),
    secure: isSecure,
    // In the clear only within this machine.
    requireTLS: !isSecure && !isNear,
    ignoreTLS: !isSecure && isNear,
    name: clientName,
    connectionTimeout: patienceMs,
    greetingTimeout: patienceMs,
    dnsTimeout: patienceMs,
    socketTimeout: answerPatienceMs,
    socketCloseTimeout: 500,
    tls: { minVersion: 'TLSv1.2' as const },
  }
  const auth = server.username
    ? { user: decodeURIComponent(server.username), pass: decodeURIComponent(server.password) }
    : null

  return {
    async send(written, envelope) {
      const raw = await compose(written, envelope, from)
      const connection = new SMTPConnection(options)
      let wasHandedOver = false
      const body = Readable.from(
        (async function* () {
          if (!(await envelope.beforeData())) throw new Error('The lease of this e-mail was lost')
          wasHandedOver = true
          yield raw
        })(),
        { objectMode: false },
      )
      try {
        const reply = await talk(connection, auth, { from: addressIn(from), to: [envelope.to], size: raw.length }, body)
        return { kind: 'accepted', reply }
      } catch (error) {
        return resultOf(error, wasHandedOver)
      } finally {
        connection.close()
      }
    },
  }
}

/** The bare address of `Name <address>`. */
const addressIn = (from: string): string => /<([^<>]+)>\s*$/.exec(from)?.[1] ?? from.trim()

function talk(
  connection: SMTPConnection,
  auth: { user: string; pass: string } | null,
  envelope: { from: string; to: string[]; size: number },
  body: Readable,
): Promise<string> {
  return new Promise((resolve, reject) => {
    connection.on('error', reject)
    connection.on('end', () => reject(new Error('The mail server ended the connection')))
    const send = () =>
      connection.send(envelope, body, (error, info) => {
        if (error) return reject(error)
        connection.quit()
        resolve(String(info?.response ?? ''))
      })
    connection.connect((error) => {
      if (error) return reject(error)
      if (!auth) return send()
      connection.login(auth, (refused) => (refused ? reject(refused) : send()))
    })
  })
}

function compose(written: Written, { to, messageIdHeader, senderName, date }: Envelope, from: string): Promise<Buffer> {
  const composer = new MailComposer({
    from: senderName ? { name: senderName, address: addressIn(from) } : from,
    to,
    subject: written.subject,
    text: written.text,
    html: written.html,
    messageId: messageIdHeader,
    date,
    // Asks programs that answer by themselves to keep quiet (RFC 3834).
    headers: { 'Auto-Submitted': 'auto-generated', 'X-Auto-Response-Suppress': 'All' },
    attachments: written.pictures.map(({ cid, name, png }) => ({
      filename: name,
      cid,
      content: png,
      contentType: 'image/png',
      contentDisposition: 'inline' as const,
    })),
    disableFileAccess: true,
    disableUrlAccess: true,
  })
  return composer.compile().build()
}
