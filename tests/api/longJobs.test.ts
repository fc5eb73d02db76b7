import { beforeAll, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { Audit } from '../../server/models/index.ts'
import {
  addJob,
  failJob,
  finishJob,
  listJobs,
  readJob,
  reportProgress,
  takeJob,
} from '../../server/services/longJobs.ts'
import { signedIn } from '../support/browser.ts'
import { makePerson } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
beforeAll(async () => {
  parts = await testParts()
})

const heard = () => parts.news.filter(({ topic }) => topic === 'job.progressed').map(({ news }) => news)

describe('a long job', () => {
  test('goes from queued to done and tells each step', async () => {
    const id = await addJob(parts, { kind: 'import', title: 'A file of Outer Ledge', parameters: { file: 'a.csv' } })
    expect(await takeJob(parts, 'import')).toEqual({ id, parameters: { file: 'a.csv' } })
    expect(await reportProgress(parts, id, 0.4, '40 of 100 minutes')).toBe(true)
    await finishJob(parts, id)
    expect(heard()).toMatchObject([
      { id, status: 'queued', progress: 0, startedAt: null },
      { id, status: 'running', progress: 0, startedAt: '2026-12-01T06:00:00.000Z' },
      { id, status: 'running', progress: 0.4, detail: '40 of 100 minutes' },
      { id, status: 'done', progress: 1, detail: null },
    ])
    expect(await readJob(id)).toEqual(heard().at(-1))
    expect(await takeJob(parts, 'import')).toBeNull()
  })

  test('is taken by one of many who ask at once', async () => {
    const id = await addJob(parts, { kind: 'export', title: 'A year' })
    const taken = await Promise.all(Array.from({ length: 4 }, () => takeJob(parts, 'export')))
    expect(taken.filter((job) => job !== null)).toEqual([{ id, parameters: {} }])
  })

  test('whose worker is gone is taken again when its lease has run out, and no sooner', async () => {
    const id = await addJob(parts, { kind: 'recompute', title: 'A week' })
    await takeJob(parts, 'recompute')
    parts.clock.advance(59)
    await reportProgress(parts, id, 0.1)
    parts.clock.advance(59)
    expect(await takeJob(parts, 'recompute')).toBeNull()
    parts.clock.advance(2)
    expect((await takeJob(parts, 'recompute'))?.id).toBe(id)
    await failJob(parts, id, 'The file cannot be read.')
    expect(await readJob(id)).toMatchObject({ status: 'failed', progress: 0.1, detail: 'The file cannot be read.' })
  })

  test('cancelled by an administrator tells its worker to stop, once and for all', async () => {
    const app = createApp(parts)
    const browser = await signedIn(app, (await makePerson(parts.clock, { role: 'admin' })).email)
    const id = await addJob(parts, { kind: 'bundle', title: 'A bundle' })
    await takeJob(parts, 'bundle')
    await browser.post(`/api/jobs/${id}/cancel`).expect(200)
    expect((await browser.post(`/api/jobs/${id}/cancel`).expect(200)).body.status).toBe('cancelled')
    expect(await reportProgress(parts, id, 0.9)).toBe(false)
    await finishJob(parts, id)
    expect((await browser.get(`/api/jobs/${id}`).expect(200)).body.status).toBe('cancelled')
    expect(await Audit.count({ where: { action: 'job.cancel', entityId: String(id) } })).toBe(1)
  })

  test('that ended more than a day ago is no longer listed', async () => {
    expect((await listJobs(parts)).length).toBeGreaterThan(0)
    parts.clock.advance(2 * 24 * 3600)
    expect((await listJobs(parts)).map((job) => job.status)).toEqual(['running'])
  })
})
