import type { AddressInfo } from 'node:net'
import type { Server } from 'node:http'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { demonstrationStations } from '../../../shared/demonstration/stations.ts'
import { crossingSeas } from '../../../simulator/scenarios/crossingSeas.ts'
import { serveTruth } from '../../../simulator/truthServer.ts'
import { handClock } from '../../support/simulator/handClock.ts'

const now = Date.parse('2026-11-12T14:30:00Z')
let server: Server
let address: string

beforeAll(async () => {
  const sea = { scenario: crossingSeas, seed: 4, anchor: now }
  server = await serveTruth(0, sea, demonstrationStations, handClock(now))
  const { address: host, port } = server.address() as AddressInfo
  expect(host).toBe('127.0.0.1')
  address = `http://127.0.0.1:${port}`
})
afterAll(() => new Promise((resolve) => server.close(resolve)))

describe('the truth on its loopback port', () => {
  it('names station, time and systems, highest first', async () => {
    const answer = await fetch(`${address}/truth?station=OL&at=2026-11-12T14:00:00Z&seconds=1200`)
    expect(await answer.json()).toMatchObject({
      station: 'OL',
      at: '2026-11-12T14:00:00.000Z',
      seconds: 1200,
      scenario: 'crossing-seas',
      seed: 4,
      significantWaveHeight: expect.closeTo(Math.hypot(1.5, 1.4), 6),
      systems: [
        {
          name: 'swell',
          peakPeriod: expect.closeTo(13, 6),
          from: expect.closeTo(262, 6),
          toward: expect.closeTo(82, 6),
        },
        { name: 'wind sea', significantWaveHeight: expect.closeTo(1.4, 6), from: expect.closeTo(188, 6) },
      ],
      faults: [],
    })
  })

  it.each([
    { path: '/', status: 404 },
    { path: '/truth?station=XX', status: 404 },
    { path: '/truth?station=OL&at=noon', status: 400 },
    { path: '/truth?station=OL&seconds=-1', status: 400 },
  ])('answers $status to $path, with the reason', async ({ path, status }) => {
    const answer = await fetch(address + path)
    expect(answer.status).toBe(status)
    expect(await answer.json()).toMatchObject({ error: expect.any(String) })
  })
})
