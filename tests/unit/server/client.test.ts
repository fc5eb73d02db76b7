import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import express from 'express'
import request from 'supertest'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { client } from '../../../server/middleware/client.ts'

const folder = mkdtempSync(join(tmpdir(), 'offing-client-'))
const app = express().use(client(folder))

beforeAll(() => {
  mkdirSync(join(folder, 'assets'))
  writeFileSync(join(folder, 'index.html'), '<title>Offing</title>')
  writeFileSync(join(folder, 'assets', 'index-a1b2c3.js'), 'export {}')
})
afterAll(() => rmSync(folder, { recursive: true }))

describe('the built client', () => {
  test('is the same page at every path of its router, and never from a cache', async () => {
    for (const path of [
      '/',
      '/watch',
      '/stations/OL',
      '/receipt/7.tpf3x3.ToPk5XtvI2qpNn4zyPUWpyD0SCQ4PbHg',
      '/welcome/1.tpqfj8.YtU5nF0fHY',
    ]) {
      const answer = await request(app).get(path).expect(200)
      expect(answer.text).toBe('<title>Offing</title>')
      expect(answer.get('Cache-Control')).toBe('no-cache')
    }
  })

  test('gives hashed files for ever', async () => {
    const answer = await request(app).get('/assets/index-a1b2c3.js').expect(200)
    expect(answer.get('Cache-Control')).toBe('public, max-age=31536000, immutable')
  })

  test.each(['/assets/index-old.js', '/missing.png', '/..%2f..%2fetc%2fpasswd.txt', '/%2e%2e/%2e%2e/package.json'])(
    'gives nothing for %s',
    async (path) => {
      const answer = await request(app).get(path)
      expect(answer.status).toBeGreaterThanOrEqual(400)
      expect(answer.text).not.toContain('Offing')
    },
  )
})
