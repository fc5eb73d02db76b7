/** The command line, read and checked: a mistake is one sentence. */
import { readFileSync } from 'node:fs'
import { parseArgs } from 'node:util'
import { z } from 'zod'
import { pastManifest } from '../shared/demonstration/past.ts'
import { demonstrationStations, type DemonstrationStation } from '../shared/demonstration/stations.ts'
import { stationFile } from '../shared/schemas/stationFile.ts'
import { scenarioNamed, scenarios } from './scenarios/index.ts'
import type { Scenario } from './scenarios/scenario.ts'
import { parseMoment, parseSpan } from './timeWords.ts'
import { UsageError } from './usageError.ts'

/** What decides every reading, with the station and the time. */
export interface SeaChoice {
  scenario: Scenario
  seed: number
  /** Milliseconds since 1970 UTC. */
  anchor: number
}

export interface StreamOptions {
  url: string
  keys: Record<string, string>
  keysFile: string
  stateDirectory: string | null
  /** Where a new stream begins, milliseconds since 1970 UTC. */
  startAt: number
  /** How many times as fast as time the past is streamed; null: as back-fill. */
  rate: number | null
}

export type Options =
  | { mode: 'help' }
  | {
      mode: 'stream'
      sea: SeaChoice
      stations: DemonstrationStation[]
      stream: StreamOptions
      truthPort: number | null
    }
  | {
      mode: 'write-past'
      sea: SeaChoice
      stations: DemonstrationStation[]
      directory: string
      hours: number
      until: number
    }
  | { mode: 'replay'; stationFile: string; readingsFile: string; as: string; live: boolean; stream: StreamOptions }

/** A past is written as it led up to now; without one the anchor is fixed, so that a stream can be repeated. */
const defaultAnchorFor = (values: Given, now: number): number =>
  values['write-past'] === undefined ? Date.parse('2026-01-01T00:00:00Z') : Math.floor(now / 60_000) * 60_000

const known = {
  help: { type: 'boolean', short: 'h' },
  scenario: { type: 'string' },
  seed: { type: 'string' },
  anchor: { type: 'string' },
  continue: { type: 'string' },
  stations: { type: 'string' },
  'station-file': { type: 'string' },
  url: { type: 'string' },
  keys: { type: 'string' },
  state: { type: 'string' },
  backfill: { type: 'string' },
  from: { type: 'string' },
  rate: { type: 'string' },
  'truth-port': { type: 'string' },
  'write-past': { type: 'string' },
  hours: { type: 'string' },
  replay: { type: 'string' },
  as: { type: 'string' },
  live: { type: 'boolean' },
} as const

type Given = ReturnType<typeof readArguments>['values']

/** Errors: UsageError with one sentence. */
export function readOptions(args: string[], now: number): Options {
  const { values, positionals } = readArguments(args)
  if (values.help) return { mode: 'help' }
  if (values.replay === undefined && positionals.length)
    throw new UsageError(`"${positionals[0]}" is no option; see --help`)
  if (values.replay !== undefined) return replayOptions(values, positionals, now)
  const sea = seaChoice(values, now)
  const stations = values['station-file'] === undefined ? chosenStations(values.stations) : stationOfFile(values)
  if (values['write-past'] !== undefined) {
    const until = Math.floor((now - (values.backfill ? parseSpan(values.backfill, 'backfill') : 0)) / 60_000) * 60_000
    return {
      mode: 'write-past',
      sea,
      stations,
      directory: values['write-past'],
      hours: wholeNumber(values.hours ?? '12', 'hours', 1, 240),
      until,
    }
  }
  const truthPort =
    values['truth-port'] === undefined ? null : wholeNumber(values['truth-port'], 'truth-port', 0, 65535)
  const codes = stations.map(({ code }) => code)
  return { mode: 'stream', sea, stations, stream: streamOptions(values, codes, now), truthPort }
}

function readArguments(args: string[]) {
  try {
    return parseArgs({ args: joinNegative(args), options: known, allowPositionals: true, strict: true })
  } catch (error) {
    const sentence = error instanceof Error ? error.message.split('. ')[0] : String(error)
    throw new UsageError(`${sentence}; see --help`)
  }
}

/** `--from -6h` as it is written in one word: parseArgs takes a leading dash for an option. */
const joinNegative = (args: string[]): string[] =>
  args.reduce<string[]>((joined, arg) => {
    const last = joined[joined.length - 1]
    if (/^-\d/.test(arg) && last?.startsWith('--') && !last.includes('=')) joined[joined.length - 1] = `${last}=${arg}`
    else joined.push(arg)
    return joined
  }, [])

function seaChoice(values: Given, now: number): SeaChoice {
  if (values.continue === undefined) {
    return {
      scenario: namedScenario(values.scenario ?? scenarios[0].name),
      seed: wholeNumber(values.seed ?? '1', 'seed', 0, 2 ** 31 - 1),
      anchor: values.anchor === undefined ? defaultAnchorFor(values, now) : parseMoment(values.anchor, 'anchor', now),
    }
  }
  for (const option of ['scenario', 'seed', 'anchor'] as const) {
    if (values[option] !== undefined)
      throw new UsageError(`--continue already says the ${option}; leave --${option} out`)
  }
  const manifest = readManifest(values.continue)
  return { scenario: namedScenario(manifest.scenario), seed: manifest.seed, anchor: Date.parse(manifest.anchor) }
}

function namedScenario(name: string): Scenario {
  const scenario = scenarioNamed(name)
  if (!scenario) {
    throw new UsageError(`--scenario: there is no "${name}"; there are ${scenarios.map((one) => one.name).join(', ')}`)
  }
  return scenario
}

const readManifest = (file: string) => readJson(file, 'continue', pastManifest, 'no manifest of a past')

function readJson<T>(file: string, option: string, schema: z.ZodType<T>, otherwise: string): T {
  let content: unknown
  try {
    content = JSON.parse(readFileSync(file, 'utf8'))
  } catch (error) {
    throw new UsageError(
      `--${option}: ${file} cannot be read: ${error instanceof Error ? error.message : String(error)}`,
    )
  }
  const parsed = schema.safeParse(content)
  if (!parsed.success) throw new UsageError(`--${option}: ${file} is ${otherwise}`)
  return parsed.data
}

/** A station that a server set up, or that somebody wrote down. */
function stationOfFile({ stations, 'station-file': file = '' }: Given): DemonstrationStation[] {
  if (stations !== undefined) throw new UsageError('--stations and --station-file exclude each other')
  const { sensors, ...station } = readJson(file, 'station-file', stationFile, 'no station: see the API, stationFile')
  if (![1, 2, 4, 8, 16].includes(station.sampleRate)) {
    throw new UsageError(`--station-file: a sea at ${station.sampleRate} Hz cannot be made: 1, 2, 4, 8 or 16 Hz can`)
  }
  return [{ ...station, sensors: sensors.map(({ id, positionSd: _, ...sensor }) => ({ letter: id, ...sensor })) }]
}

function chosenStations(codes: string | undefined): DemonstrationStation[] {
  if (codes === undefined) return demonstrationStations
  return codes.split(',').map((code) => {
    const station = demonstrationStations.find((one) => one.code === code.trim())
    if (station) return station
    throw new UsageError(
      `--stations: there is no "${code}"; there are ${demonstrationStations.map((one) => one.code).join(', ')}`,
    )
  })
}

function streamOptions(values: Given, codes: string[], now: number): StreamOptions {
  if (values.url === undefined)
    throw new UsageError('--url is missing: the telemetry address, ws://127.0.0.1:PORT/telemetry')
  if (!URL.canParse(values.url) || !/^wss?:$/.test(new URL(values.url).protocol)) {
    throw new UsageError(`--url: "${values.url}" is no websocket address; it begins with ws:// or wss://`)
  }
  if (values.keys === undefined) throw new UsageError('--keys is missing: a JSON file {"OL": "prefix.secret", …}')
  const keys = readJson(
    values.keys,
    'keys',
    z.record(z.string(), z.string()),
    'no JSON object of station codes and keys',
  )
  for (const code of codes) {
    if (!keys[code]) throw new UsageError(`--keys: ${values.keys} holds no key for station ${code}`)
  }
  return {
    url: values.url,
    keys,
    keysFile: values.keys,
    stateDirectory: values.state ?? null,
    ...beginning(values, now),
  }
}

function beginning(values: Given, now: number): Pick<StreamOptions, 'startAt' | 'rate'> {
  if (values.from !== undefined && values.backfill !== undefined) {
    throw new UsageError('--from and --backfill exclude each other')
  }
  if (values.rate !== undefined && values.from === undefined) throw new UsageError('--rate goes with --from')
  if (values.from !== undefined) {
    const startAt = parseMoment(values.from, 'from', now)
    if (startAt > now) throw new UsageError('--from lies in the future; the stream never runs ahead of time')
    return { startAt, rate: wholeNumber(values.rate ?? '60', 'rate', 1, 1000) }
  }
  const backfill = values.backfill === undefined ? 0 : parseSpan(values.backfill, 'backfill')
  const pastEnd = values.continue === undefined ? now : Date.parse(readManifest(values.continue).until)
  const startAt = Math.min(now - backfill, pastEnd > now - longestJoin ? pastEnd : now)
  return { startAt, rate: null }
}

/** A past that ended longer ago than this is not joined to: the gap is shown as what it is. */
const longestJoin = 2 * 3_600_000

function replayOptions(values: Given, positionals: string[], now: number): Options {
  if (positionals.length !== 1) throw new UsageError('--replay wants two files: station.json and readings.csv')
  if (values.as === undefined) throw new UsageError('--as is missing: the code of the station to send as')
  for (const option of ['scenario', 'from', 'backfill', 'continue', 'truth-port', 'write-past'] as const) {
    if (values[option] !== undefined) throw new UsageError(`--${option} does not go with --replay`)
  }
  return {
    mode: 'replay',
    stationFile: values.replay ?? '',
    readingsFile: positionals[0],
    as: values.as,
    live: values.live ?? false,
    stream: streamOptions(values, [values.as], now),
  }
}

function wholeNumber(text: string, option: string, least: number, most: number): number {
  const value = /^\d+$/.test(text) ? Number(text) : NaN
  if (value >= least && value <= most) return value
  throw new UsageError(`--${option}: "${text}" is no whole number from ${least} to ${most}`)
}
