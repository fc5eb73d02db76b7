import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { readRecording } from '../../../simulator/replay/recording.ts'

let folder: string
beforeAll(() => (folder = mkdtempSync(join(tmpdir(), 'offing-recording-'))))
afterAll(() => rmSync(folder, { recursive: true, force: true }))

const sensors = [
  { id: 'A', kind: 'surface', east: 0, north: 0, heightAboveBed: 8 },
  { id: 'B', kind: 'pressure', east: 9, north: 0, heightAboveBed: 0.5 },
]

function recording(rows: string[], sampleRate = 2) {
  const station = join(folder, 'station.json')
  const readings = join(folder, 'readings.csv')
  writeFileSync(station, JSON.stringify({ name: 'x', sampleRate, sensors }))
  writeFileSync(readings, rows.join('\n'))
  return readRecording(station, readings)
}

const row = (seconds: number, ...cells: string[]) =>
  [new Date(Date.parse('2026-05-01T00:00:00Z') + 1000 * seconds).toISOString(), ...cells].join(',')

describe('a recorded file', () => {
  it('is read in the order of the station’s sensors, with gaps as missing samples', () => {
    const { samples } = recording(['time,B,A', row(0, '8.1', '0.2'), row(0.5, '', '0.3'), row(2, '8.3', '-0.1')])
    expect(samples).toEqual([
      [0.2, 8.1],
      [0.3, null],
      [null, null],
      [null, null],
      [-0.1, 8.3],
    ])
  })

  it.each([
    { rows: ['when,A,B'], reason: 'line 1: the first column must be "time"' },
    { rows: ['time,A'], reason: 'line 1: there is no column for sensor B' },
    { rows: ['time,A,B', 'noon,1,2'], reason: 'line 2: "noon" is no time' },
    { rows: ['time,A,B', row(0, '1', '2'), row(0.5, 'x', '2')], reason: 'line 3: "x" is no number' },
    { rows: ['time,A,B', row(1, '1', '2'), row(0, '1', '2')], reason: 'line 3: time does not go on' },
    { rows: ['time,A,B', row(0, '1', '2'), row(0.25, '1', '2')], reason: 'line 3: the rows do not come at 2 Hz' },
    { rows: ['time,A,B', row(0, '1', '2'), row(0.7, '1', '2')], reason: 'line 3: the rows do not come at 2 Hz' },
    { rows: ['time,A,B', row(0, '1', '2')], reason: 'less than one second' },
  ])('is refused with $reason', ({ rows, reason }) => {
    expect(() => recording(rows)).toThrow(reason)
  })

  it('is refused when its rate is no whole number of samples a second', () => {
    expect(() => recording(['time,A,B'], 2.5)).toThrow('2.5 Hz is no whole number of samples a second')
  })
})
