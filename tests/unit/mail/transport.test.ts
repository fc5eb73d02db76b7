import { describe, expect, test } from 'vitest'
import { createTransport, resultOf } from '../../../server/mail/transport.ts'
import { startTestMailServer } from '../../support/mailCatcher.ts'

const smtpError = (responseCode: number, command: string) =>
  Object.assign(new Error(`${responseCode} words`), { responseCode, command, code: 'EENVELOPE' })
const cut = Object.assign(new Error('Connection closed unexpectedly'), { code: 'ECONNECTION', command: 'CONN' })

describe('what a failure means', () => {
  test.each([
    ['a mailbox that does not exist', smtpError(550, 'RCPT TO'), false, 'refused'],
    ['an e-mail refused after it was read', smtpError(554, 'DATA'), true, 'refused'],
    ['greylisting', smtpError(451, 'RCPT TO'), false, 'later'],
    ['a sender that the server does not take', smtpError(550, 'MAIL FROM'), false, 'later'],
    ['a wrong password', smtpError(535, 'AUTH PLAIN'), false, 'later'],
    ['a connection cut before the e-mail', cut, false, 'later'],
    ['a connection cut after the e-mail', cut, true, 'unknown'],
    ['a server that puts the read e-mail off', smtpError(452, 'DATA'), true, 'later'],
  ])('%s', (_what, error, wasHandedOver, kind) => {
    expect(resultOf(error, wasHandedOver).kind).toBe(kind)
  })

  test('of ours is no reason to try the other recipients, of a recipient is', () => {
    const isDown = (error: Error) => {
      const result = resultOf(error, false)
      return result.kind === 'later' && result.isServerDown
    }
    expect([smtpError(535, 'AUTH PLAIN'), cut, smtpError(451, 'RCPT TO')].map(isDown)).toEqual([true, true, false])
  })
})

const written = { subject: 'Subject\r\nBcc: other@harbour.example', text: 'Text', html: '<p>Text</p>', pictures: [] }
const envelope = {
  to: 'pilot@harbour.example',
  messageIdHeader: '<1.abc@harbour.example>',
  date: new Date('2026-12-01T06:00:00Z'),
  beforeData: async () => true,
}

describe('a transport', () => {
  test('sends no header that a subject brought with it, and names itself an automatic sender', async () => {
    const server = await startTestMailServer()
    const transport = createTransport({
      url: server.url,
      from: 'Watch <watch@harbour.example>',
      clientName: 'localhost',
    })
    expect((await transport.send(written, envelope)).kind).toBe('accepted')
    const [{ mail, to }] = server.caught
    expect([to, mail.messageId, mail.date]).toEqual([envelope.to, envelope.messageIdHeader, envelope.date])
    expect(mail.bcc).toBeUndefined()
    expect(mail.headers.get('auto-submitted')).toBe('auto-generated')
    expect(server.asked).toEqual([envelope.to])
    await server.stop()
  })

  test('does not hand over an e-mail whose lease was lost meanwhile', async () => {
    const server = await startTestMailServer()
    const transport = createTransport({ url: server.url, from: 'watch@harbour.example', clientName: 'localhost' })
    const result = await transport.send(written, { ...envelope, beforeData: async () => false })
    expect(result.kind).toBe('later')
    expect(server.caught).toEqual([])
    await server.stop()
  })

  test('gives a server on another host nothing in the clear', async () => {
    // Any address but the named loopback ones counts as another host.
    const server = await startTestMailServer(0, '127.0.0.2')
    const transport = createTransport({ url: server.url, from: 'watch@harbour.example', clientName: 'localhost' })
    const result = await transport.send(written, envelope)
    expect(result).toMatchObject({ kind: 'later', isServerDown: true })
    expect([server.asked, server.caught]).toEqual([[], []])
    await server.stop()
  })
})
