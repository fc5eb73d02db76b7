import { spawnSync } from 'node:child_process'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { readOptions } from '../../../simulator/options.ts'
import { UsageError } from '../../../simulator/usageError.ts'

const now = Date.parse('2026-11-12T14:30:20Z')
let folder: string
let keys: string
let manifest: string

beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'offing-options-'))
  keys = join(folder, 'keys.json')
  manifest = join(folder, 'manifest.json')
  writeFileSync(keys, JSON.stringify({ OL: 'a.b', FW: 'c.d', PB: 'e.f' }))
  writeManifest('2026-11-12T14:05:00.000Z')
})
afterAll(() => rmSync(folder, { recursive: true, force: true }))

function writeManifest(until: string): void {
  const content = { madeAt: until, until, scenario: 'quiet', seed: 9, anchor: '2026-11-12T14:00:00.000Z', stations: [] }
  writeFileSync(manifest, JSON.stringify(content))
}

const streaming = (...args: string[]) =>
  readOptions(['--url', 'ws://127.0.0.1:1/telemetry', '--keys', keys, ...args], now)

describe('the command line', () => {
  it('streams the demonstration from now by default', () => {
    expect(streaming()).toMatchObject({
      mode: 'stream',
      sea: { scenario: { name: 'demonstration' }, seed: 1 },
      stations: [{ code: 'OL' }, { code: 'FW' }, { code: 'PB' }],
      stream: { startAt: now, rate: null },
      truthPort: null,
    })
  })

  it('takes a past as a span, written with a dash in one word or two', () => {
    for (const from of [['--from', '-6h'], ['--from=-6h']]) {
      expect(streaming(...from, '--rate', '60')).toMatchObject({ stream: { startAt: now - 6 * 3_600_000, rate: 60 } })
    }
    expect(streaming('--backfill', '25m')).toMatchObject({ stream: { startAt: now - 25 * 60_000, rate: null } })
  })

  it('goes on with a past from where it ended, unless that is hours ago', () => {
    const sea = { scenario: { name: 'quiet' }, seed: 9, anchor: Date.parse('2026-11-12T14:00:00Z') }
    expect(streaming('--continue', manifest)).toMatchObject({
      sea,
      stream: { startAt: Date.parse('2026-11-12T14:05:00Z') },
    })
    writeManifest('2026-11-12T10:00:00.000Z')
    expect(streaming('--continue', manifest)).toMatchObject({ sea, stream: { startAt: now } })
  })

  it('writes a past that ends where the back-fill begins, at a whole minute', () => {
    expect(readOptions(['--write-past', 'past', '--backfill', '25m', '--hours', '6'], now)).toMatchObject({
      mode: 'write-past',
      sea: { anchor: Date.parse('2026-11-12T14:30:00Z') },
      directory: 'past',
      hours: 6,
      until: Date.parse('2026-11-12T14:05:00Z'),
    })
  })

  it.each([
    { args: ['--scenario', 'calm'], sentence: 'there is no "calm"' },
    { args: ['--seed', 'x'], sentence: '--seed: "x" is no whole number' },
    { args: ['--stations', 'OL,XX'], sentence: '--stations: there is no "XX"' },
    { args: ['--station-file', '/nowhere/station.json'], sentence: 'cannot be read' },
    { args: ['--station-file', 'x', '--stations', 'OL'], sentence: 'exclude each other' },
    { args: ['--backfill', '25'], sentence: '--backfill: "25" is no span of time' },
    { args: ['--from', 'yesterday'], sentence: '--from: "yesterday" is no moment' },
    { args: ['--from', '2026-11-13T00:00:00Z'], sentence: 'lies in the future' },
    { args: ['--from', '-1h', '--backfill', '5m'], sentence: 'exclude each other' },
    { args: ['--rate', '60'], sentence: '--rate goes with --from' },
    { args: ['--truth-port', '99999'], sentence: 'no whole number from 0 to 65535' },
    { args: ['--url', 'http://127.0.0.1/'], sentence: 'no websocket address' },
    { args: ['--keys', '/nowhere/keys.json'], sentence: 'cannot be read' },
    { args: ['--continue', '/nowhere/manifest.json'], sentence: 'cannot be read' },
    { args: ['--gale'], sentence: "Unknown option '--gale'" },
    { args: ['stray'], sentence: '"stray" is no option' },
    { args: ['--replay', 'station.json'], sentence: 'wants two files' },
    { args: ['--replay', 'station.json', 'readings.csv'], sentence: '--as is missing' },
    { args: ['--replay', 'a', 'b', '--as', 'QQ'], sentence: 'holds no key for station QQ' },
  ])('refuses $args in one sentence', ({ args, sentence }) => {
    const attempt = () => streaming(...args)
    expect(attempt).toThrow(UsageError)
    expect(attempt).toThrow(sentence)
  })

  it('wants an address and keys', () => {
    expect(() => readOptions([], now)).toThrow('--url is missing')
    expect(() => readOptions(['--url', 'ws://127.0.0.1:1/'], now)).toThrow('--keys is missing')
  })

  it('ends with code 2 and one line on standard error for a mistake', () => {
    const run = spawnSync(process.execPath, ['--import', 'tsx', 'simulator/index.ts', '--scenario', 'calm'], {
      encoding: 'utf8',
    })
    expect(run.status).toBe(2)
    expect(run.stdout).toBe('')
    expect(run.stderr.trim().split('\n')).toHaveLength(1)
  })
})
