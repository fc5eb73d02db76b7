/** Compares what a station was promised with what the database holds. */
import type { Sequelize } from 'sequelize'
import { select } from '../../server/models/sql.ts'
import { joinWindow, loadParts } from '../../server/services/readings/window.ts'
import type { DemonstrationStation } from '../../shared/demonstration/stations.ts'
import { countPresent, fromStored } from '../../shared/readings/span.ts'
import type { FaultReport } from '../../server/setup/testReports.ts'
import { sampleOf } from './recordingStation.ts'
import type { History } from './recordingStation.ts'

type Check = FaultReport['checks'][number]
type Described = Pick<DemonstrationStation, 'code' | 'sampleRate'> & { sensors: { letter: string }[] }

async function idOf(sequelize: Sequelize, code: string): Promise<number> {
  const rows = await select<{ id: number }>(sequelize, 'SELECT id FROM stations WHERE code = :code', { code })
  return Number(rows[0]?.id)
}

/** Acknowledged: there once, with its value. Sent and not acknowledged: there once or not at all. Nothing else. */
export async function checkHistory(sequelize: Sequelize, station: Described, history: History): Promise<Check[]> {
  const { code, sampleRate, sensors } = station
  const stationId = await idOf(sequelize, code)
  const from = history.firstSecond * 1000
  const to = from + history.sent * 1000
  const parts = await loadParts(stationId, from, to)
  const letters = sensors.map(({ letter }) => letter)
  const window = joinWindow(parts, from, to, { letters, sampleRate })
  let lost = 0
  let altered = 0
  for (let second = 0; second < history.sent; second += 1) {
    for (let index = 0; index < sampleRate; index += 1) {
      letters.forEach((letter, sensor) => {
        const stored = fromStored(window.series[sensor]?.[second * sampleRate + index] ?? NaN)
        if (Number.isNaN(stored)) lost += second < history.acknowledged ? 1 : 0
        else if (Math.abs(stored - sampleOf(letter, history.firstSecond + second, index)) > 1e-6) altered += 1
      })
    }
  }
  const twice = parts.reduce((sum, { span }) => sum + countPresent(span), 0) - countPresent(window)
  const promised = history.acknowledged * sampleRate * letters.length
  return [
    check(`${code}: no acknowledged reading is lost`, lost === 0 && promised > 0, `${lost} of ${promised} lost`),
    check(`${code}: no reading is stored twice`, twice === 0, `${twice} twice`),
    check(`${code}: every stored reading has the value that was sent`, altered === 0, `${altered} altered`),
    check(`${code}: no frame is refused`, history.refusals.length === 0, history.refusals.slice(0, 3).join('; ')),
    check(`${code}: promises on the wire hold`, history.broken.length === 0, history.broken.slice(0, 3).join('; ')),
  ]
}

/** A station whose stream never ended must have every sample of the span, once. */
export async function checkUnbroken(
  sequelize: Sequelize,
  { code, sampleRate, sensors }: Described,
  from: number,
  to: number,
): Promise<Check[]> {
  const parts = await loadParts(await idOf(sequelize, code), from, to)
  const window = joinWindow(parts, from, to, { letters: sensors.map(({ letter }) => letter), sampleRate })
  const expected = ((to - from) / 1000) * sampleRate * sensors.length
  const present = countPresent(window)
  const stored = parts.map(({ span }) => joinWindow([{ ...emptyPart, span }], from, to, { sampleRate }))
  const twice = stored.reduce((sum, span) => sum + countPresent(span), 0) - present
  return [
    check(`${code}: every reading of the stream is there`, present === expected, `${present} of ${expected}`),
    check(`${code}: none is there twice`, twice === 0, `${twice} twice`),
  ]
}

const emptyPart = { source: 'live' as const, firstCommitId: 0, lastCommitId: 0, clockOffset: null }

/** Window ends on the minute grid after `from` up to `to` that have no estimate, or more than one of a revision. */
export async function checkWindows(sequelize: Sequelize, code: string, from: number, to: number): Promise<Check[]> {
  const rows = await select<{ windowEndsAt: string }>(
    sequelize,
    `SELECT DATE_FORMAT(windowEndsAt, '%Y-%m-%dT%H:%i:%sZ') AS windowEndsAt FROM estimates
     WHERE stationId = :stationId AND runId = 0 AND windowEndsAt > :from AND windowEndsAt <= :to
     GROUP BY windowEndsAt`,
    { stationId: await idOf(sequelize, code), from: new Date(from), to: new Date(to) },
  )
  const present = new Set(rows.map(({ windowEndsAt }) => Date.parse(windowEndsAt)))
  const missing: string[] = []
  let due = 0
  for (let end = Math.floor(from / 60_000) * 60_000 + 60_000; end <= to; end += 60_000, due += 1) {
    if (!present.has(end)) missing.push(new Date(end).toISOString())
  }
  return [
    check(
      `${code}: all ${due} windows are there`,
      due > 0 && missing.length === 0,
      `missing: ${missing.slice(0, 5).join(', ')}`,
    ),
  ]
}

export const check = (name: string, passed: boolean, detail: string): Check => ({ name, passed, detail })
