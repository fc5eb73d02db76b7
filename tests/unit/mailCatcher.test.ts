import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { createTransport } from 'nodemailer'
import { afterEach, beforeEach, expect, test } from 'vitest'
import { startMailCatcher } from '../../server/mail/mailCatcher.ts'
import type { MailCatcher } from '../../server/mail/mailCatcher.ts'

const clock = { now: () => new Date('2026-12-01T06:30:00Z'), monotonic: () => 0 }
let folder: string
let catcher: MailCatcher

beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'offing-mail-'))
  catcher = await startMailCatcher({ folder, clock })
})

afterEach(async () => {
  await catcher.stop()
  await rm(folder, { recursive: true })
})

const send = (mail: Parameters<ReturnType<typeof createTransport>['sendMail']>[0]) =>
  createTransport(catcher.url).sendMail({ from: 'watch@marrowick.example', ...mail })

test('an e-mail to two people is kept once, with both envelope addresses and its text', async () => {
  await send({
    to: 'pilot@marrowick.example',
    bcc: 'warden@marrowick.example',
    subject: 'Swell from 247° T',
    text: 'H 2.1 m',
  })
  const mails = await catcher.list()
  expect(mails).toHaveLength(1)
  expect(mails[0]).toMatchObject({
    receivedAt: new Date('2026-12-01T06:30:00Z'),
    from: 'watch@marrowick.example',
    to: ['pilot@marrowick.example', 'warden@marrowick.example'],
    subject: 'Swell from 247° T',
    html: null,
  })
  expect(mails[0]?.text.trim()).toBe('H 2.1 m')
})

test('an e-mail larger than the limit is refused for good and leaves no file', async () => {
  const attachments = [{ filename: 'a.bin', content: Buffer.alloc(11 * 1024 * 1024) }]
  await expect(send({ to: 'pilot@marrowick.example', subject: 'Large', attachments })).rejects.toMatchObject({
    responseCode: 552,
  })
  expect(await catcher.list()).toEqual([])
})

test('a catcher started again still lists what it kept before', async () => {
  await send({ to: 'pilot@marrowick.example', subject: 'First', text: 'a' })
  await catcher.stop()
  catcher = await startMailCatcher({ folder, clock })
  expect((await catcher.list()).map((mail) => mail.subject)).toEqual(['First'])
})
