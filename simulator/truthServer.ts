/**
 * The truth behind the readings, as JSON on a loopback port of the simulator's own. It never travels with the
 * telemetry; tests and curious people ask for it here.
 */
import { createServer, type Server } from 'node:http'
import type { DemonstrationStation } from '../shared/demonstration/stations.ts'
import type { SimulatorClock } from './clock.ts'
import type { SeaChoice } from './options.ts'
import { faultsAt, truthAt } from './sea/truth.ts'
import { parseMoment } from './timeWords.ts'
import { UsageError } from './usageError.ts'

/** Resolves once it listens. */
export function serveTruth(
  port: number,
  sea: SeaChoice,
  stations: DemonstrationStation[],
  clock: SimulatorClock,
): Promise<Server> {
  const server = createServer((request, response) => {
    const { status, body } = answer(request.url ?? '/', sea, stations, clock.now())
    response.writeHead(status, { 'content-type': 'application/json; charset=utf-8', 'cache-control': 'no-store' })
    response.end(JSON.stringify(body))
  })
  return new Promise((resolve, reject) => {
    server.once('error', (error) => reject(new UsageError(`--truth-port ${port}: ${error.message}`)))
    server.listen(port, '127.0.0.1', () => resolve(server))
  })
}

function answer(path: string, sea: SeaChoice, stations: DemonstrationStation[], now: number) {
  const url = new URL(path, 'http://127.0.0.1')
  if (url.pathname !== '/truth')
    return { status: 404, body: { error: 'ask for /truth?station=CODE&at=MOMENT&seconds=1200' } }
  const station = stations.find(({ code }) => code === url.searchParams.get('station'))
  if (!station) return { status: 404, body: { error: `stations: ${stations.map(({ code }) => code).join(', ')}` } }
  const seconds = Number(url.searchParams.get('seconds') ?? 0)
  if (!(seconds >= 0 && seconds <= 86_400)) return { status: 400, body: { error: 'seconds: a number from 0 to 86400' } }
  try {
    const at = parseMoment(url.searchParams.get('at') ?? 'now', 'at', now)
    const seen = { scenario: sea.scenario, anchor: sea.anchor, site: station }
    const made = { scenario: sea.scenario.name, seed: sea.seed, anchor: new Date(sea.anchor).toISOString() }
    const where = { station: station.code, at: new Date(at).toISOString(), seconds }
    return { status: 200, body: { ...where, ...made, ...truthAt(seen, at, seconds), faults: faultsAt(seen, at) } }
  } catch (error) {
    if (error instanceof UsageError) return { status: 400, body: { error: error.message } }
    throw error
  }
}
