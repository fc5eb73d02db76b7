/**
 * Writes the demonstration's past into a folder: readings as loggers would have kept them, and the sea states of the
 * time before, with a manifest that is written last, so that a folder with a manifest is whole.
 */
import { closeSync, mkdirSync, openSync, renameSync, rmSync, writeFileSync, writeSync } from 'node:fs'
import { join } from 'node:path'
import type { PastManifest, PastSeaState } from '../../shared/demonstration/past.ts'
import type { DemonstrationStation } from '../../shared/demonstration/stations.ts'
import { createReadings } from '../array/readings.ts'
import type { SeaChoice } from '../options.ts'
import { truthAt, type TrueSystem } from '../sea/truth.ts'

const hour = 3_600_000
const day = 24 * hour

/** Steps of the sea states before the readings, newest first: a month at one minute, the rest of a year at ten. */
const spans = [
  { stepSeconds: 60, daysBack: 30, daysAFile: 5 },
  { stepSeconds: 600, daysBack: 365, daysAFile: 50 },
]
const windowSeconds = 1200

export interface PastWanted {
  sea: SeaChoice
  stations: DemonstrationStation[]
  directory: string
  hours: number
  /** End of the readings, a whole minute in ms since 1970 UTC. */
  until: number
  madeAt: number
  say: (sentence: string) => void
}

export function writePast({ sea, stations, directory, hours, until, madeAt, say }: PastWanted): void {
  mkdirSync(directory, { recursive: true })
  rmSync(join(directory, 'manifest.json'), { force: true })
  const readingsFrom = until - hours * hour
  const written: PastManifest['stations'] = stations.map((station) => {
    const readingsFile = `${station.code}-readings.csv`
    writeReadings(join(directory, readingsFile), sea, station, readingsFrom, until)
    say(`${station.code}: ${hours} h of readings`)
    const seaStates = writeSeaStates(directory, sea, station, readingsFrom)
    say(`${station.code}: a year of sea states`)
    return { code: station.code, readingsFile, readingsFrom: iso(readingsFrom), seaStates }
  })
  const manifest: PastManifest = {
    madeAt: iso(madeAt),
    until: iso(until),
    scenario: sea.scenario.name,
    seed: sea.seed,
    anchor: iso(sea.anchor),
    stations: written,
  }
  writeFileSync(join(directory, 'manifest.json.new'), `${JSON.stringify(manifest, null, 1)}\n`)
  renameSync(join(directory, 'manifest.json.new'), join(directory, 'manifest.json'))
}

const iso = (time: number): string => new Date(time).toISOString()

function writeReadings(path: string, sea: SeaChoice, station: DemonstrationStation, from: number, until: number): void {
  const source = createReadings({ ...sea, station })
  const { sampleRate } = station
  const file = openSync(path, 'w')
  writeSync(file, `time,${station.sensors.map(({ letter }) => letter).join(',')}\n`)
  const minute = 60 * sampleRate
  for (let start = from; start < until; start += 60_000) {
    const readings = source.readings((start / 1000) * sampleRate, minute)
    const prefix = iso(start).slice(0, 17)
    const rows: string[] = []
    for (let n = 0; n < minute; n++) {
      let row = `${prefix}${(n / sampleRate).toFixed(3).padStart(6, '0')}Z`
      for (const values of readings) row += `,${values[n] ?? ''}`
      rows.push(row)
    }
    writeSync(file, `${rows.join('\n')}\n`)
  }
  closeSync(file)
}

function writeSeaStates(directory: string, sea: SeaChoice, station: DemonstrationStation, readingsFrom: number) {
  const files: PastManifest['stations'][number]['seaStates'] = []
  let end = readingsFrom
  for (const { stepSeconds, daysBack, daysAFile } of spans) {
    const oldest = readingsFrom - daysBack * day
    while (end > oldest) {
      const start = Math.max(oldest, end - daysAFile * day)
      const file = `${station.code}-states-${stepSeconds}s-${iso(start).slice(0, 10)}.json`
      writeFileSync(join(directory, file), JSON.stringify(statesBetween(sea, station, start, end, stepSeconds)))
      files.push({ file, stepSeconds })
      end = start
    }
  }
  return files
}

/** Rising in time, after `start` up to and with `end`. */
function statesBetween(sea: SeaChoice, station: DemonstrationStation, start: number, end: number, stepSeconds: number) {
  const step = stepSeconds * 1000
  const seen = { scenario: sea.scenario, anchor: sea.anchor, site: station }
  const states: PastSeaState[] = []
  for (let at = Math.floor(start / step) * step + step; at <= end; at += step) {
    const middle = at - (windowSeconds * 1000) / 2
    const truth = truthAt(seen, middle)
    states.push({ at: iso(at), waterDepth: rounded(truth.waterDepth, 3), systems: truth.systems.map(presentSystem) })
  }
  return states
}

const presentSystem = (system: TrueSystem): PastSeaState['systems'][number] => ({
  name: system.name,
  significantWaveHeight: rounded(system.significantWaveHeight, 3),
  peakPeriod: rounded(system.peakPeriod, 2),
  toward: rounded(system.toward, 1) % 360,
  directionalSpread: rounded(system.directionalSpread, 1),
  phaseSpeed: rounded(system.phaseSpeed, 3),
})

const rounded = (value: number, decimals: number): number => Math.round(value * 10 ** decimals) / 10 ** decimals
