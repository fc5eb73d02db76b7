import type { Express } from 'express'
import { beforeAll, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { Audit, LogEntry } from '../../server/models/index.ts'
import { writeSystemLine } from '../../server/services/watchLog.ts'
import { signedIn } from '../support/browser.ts'
import { makePerson } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
let app: Express

beforeAll(async () => {
  parts = await testParts()
  app = createApp(parts)
})

async function operator() {
  const person = await makePerson(parts.clock, { role: 'operator' })
  return { person, browser: await signedIn(app, person.email) }
}

const png = Buffer.from(
  'iVBORw0KGgoAAAANSUhEUgAAAAEAAAABCAYAAAAfFcSJAAAADUlEQVR42mNk+M9QDwADhgGAWjR9awAAAABJRU5ErkJggg==',
  'base64',
)

describe('the watch log', () => {
  test('takes an entry with its time and author; a correction names the old one, which says so', async () => {
    const { browser, person } = await operator()
    const first = await browser
      .post('/api/log')
      .send({ text: 'Patrol reports green water over the Long Arm' })
      .expect(201)
    expect(first.body).toMatchObject({ kind: 'entry', person: { name: person.name }, corrects: null, correctedBy: [] })
    const correction = { text: 'It was spray, not green water', correctsId: first.body.id }
    const second = await browser.post('/api/log').send(correction).expect(201)
    expect(second.body.corrects.id).toBe(first.body.id)
    const old = await browser.get(`/api/log/${first.body.id}`).expect(200)
    expect(old.body).toMatchObject({ text: first.body.text, correctedBy: [{ id: second.body.id }] })
  })

  test('keeps both entries of two people who write at once, in the order of writing', async () => {
    const [one, other] = [await operator(), await operator()]
    await Promise.all([
      one.browser.post('/api/log').send({ text: 'from the first desk' }).expect(201),
      other.browser.post('/api/log').send({ text: 'from the second desk' }).expect(201),
    ])
    const { body } = await one.browser.get('/api/log?text=desk').expect(200)
    expect(body.entries.map(({ text }: { text: string }) => text).sort()).toEqual([
      'from the first desk',
      'from the second desk',
    ])
  })

  test('is found by kind, person, alert, span and words, with the mark of an alert as it stood', async () => {
    const { browser } = await operator()
    const figures = { state: 'unacknowledgedActive', priority: 'high' }
    await writeSystemLine(parts, { kind: 'alert', text: 'Raised: 100 % sure', figures, links: { alertId: 77 } })
    await writeSystemLine(parts, { kind: 'alert', text: 'Raised: another', links: { alertId: 770 } })
    const { body } = await browser.get('/api/log?kind=alert&alertId=77').expect(200)
    expect(body.entries).toHaveLength(1)
    expect(body.entries[0]).toMatchObject({ person: null, mark: figures, links: { alertId: 77 } })
    const words = await browser.get(`/api/log?text=${encodeURIComponent('100 %')}`).expect(200)
    expect(words.body.entries).toHaveLength(1)
    await browser.get('/api/log?alertId=7%20OR%201').expect(422)
    const none = await browser.get('/api/log?from=2040-01-01T00:00:00.000Z').expect(200)
    expect(none.body.entries).toEqual([])
  })

  test('refuses an empty entry and one that corrects what is not there, and cannot be changed', async () => {
    const { browser } = await operator()
    await browser.post('/api/log').send({ text: '   ' }).expect(422)
    await browser.post('/api/log').send({ text: 'x', correctsId: 999_999 }).expect(422)
    await browser.put('/api/log/1').send({ text: 'y' }).expect(404)
    await browser.delete('/api/log/1').expect(404)
  })
})

describe('a file of an entry', () => {
  async function entry() {
    const { browser } = await operator()
    const { body } = await browser.post('/api/log').send({ text: 'With a photo' }).expect(201)
    return { browser, path: `/api/log/${body.id}/attachments` }
  }
  const sent = (browser: Awaited<ReturnType<typeof signedIn>>, path: string, content: Buffer | string) =>
    browser.post(path).set('Content-Type', 'application/octet-stream').send(content)

  test('is kept with its hash, and comes back to be saved, never shown', async () => {
    const { browser, path } = await entry()
    const { body } = await sent(browser, `${path}?name=long%20arm.png`, png).expect(201)
    expect(body.attachments).toMatchObject([{ name: 'long arm.png', mediaType: 'image/png', bytes: png.length }])
    const saved = await browser.get(`${path}/${body.attachments[0].id}`).buffer(true).expect(200)
    expect(saved.headers['content-disposition']).toBe('attachment; filename="long arm.png"')
    expect(saved.headers['x-content-type-options']).toBe('nosniff')
    expect(Buffer.compare(saved.body, png)).toBe(0)
    expect(await Audit.count({ where: { action: 'attachment.add' } })).toBe(1)
  })

  test('is known by its content: a program that calls itself a picture is refused, and nothing is kept', async () => {
    const { browser, path } = await entry()
    const program = Buffer.from([0x7f, 0x45, 0x4c, 0x46, 0, 1, 2, 3])
    const { body } = await sent(browser, `${path}?name=photo.jpg`, program).expect(415)
    expect(body.code).toBe('attachment.kind')
    const page = await sent(browser, `${path}?name=..%2F..%2Fpage.html`, '<script>alert(1)</script>').expect(201)
    expect(page.body.attachments).toMatchObject([{ name: 'page.html', mediaType: 'text/plain' }])
  })

  test('is refused to an entry of somebody else, and over 12 MiB', async () => {
    const { path } = await entry()
    const { browser } = await operator()
    await sent(browser, `${path}?name=a.png`, png).expect(403)
    const own = await entry()
    await sent(own.browser, `${own.path}?name=big.txt`, 'a'.repeat(12 * 1024 * 1024 + 1)).expect(413)
    expect(await LogEntry.count()).toBeGreaterThan(0)
  })
})
