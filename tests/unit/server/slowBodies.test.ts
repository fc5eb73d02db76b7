import { once } from 'node:events'
import { request as ask } from 'node:http'
import type { AddressInfo } from 'node:net'
import express from 'express'
import type { ErrorRequestHandler } from 'express'
import { expect, test } from 'vitest'
import { slowBodies } from '../../../server/middleware/slowBodies.ts'
import { Refused } from '../../../server/services/problems.ts'

const told: ErrorRequestHandler = (error, _request, response, next) =>
  error instanceof Refused ? void response.status(error.refusal.status).end() : next(error)

/** A server that waits so long for a body, and what becomes of a request that begins one and stops. */
async function stalled(path: string, milliseconds: number): Promise<number | 'cut off'> {
  const app = express()
  app.use(slowBodies({ isFile: (request) => request.path === '/file', milliseconds }))
  app.use(express.json())
  app.post('/file', (request) => void request.resume())
  app.use(told)
  const server = app.listen(0, '127.0.0.1')
  await once(server, 'listening')
  const { port } = server.address() as AddressInfo
  const headers = { 'Content-Type': path === '/file' ? 'text/csv' : 'application/json', 'Content-Length': '100' }
  const sending = ask({ port, path, method: 'POST', headers })
  const outcome = new Promise<number | 'cut off'>((resolve) => {
    sending.on('response', ({ statusCode }) => resolve(statusCode ?? 0))
    sending.on('error', () => resolve('cut off'))
  })
  sending.write('{"a":')
  const ended = await outcome
  server.closeAllConnections()
  server.close()
  return ended
}

test('a body that stops coming is answered 408', async () => {
  expect(await stalled('/other', 40)).toBe(408)
})

test('a file that stops coming is cut off', async () => {
  expect(await stalled('/file', 40)).toBe('cut off')
})
