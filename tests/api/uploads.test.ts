/** Files of readings from the page's request to stored minutes, and back out again. */
import { once } from 'node:events'
import { mkdtemp, readdir, rm } from 'node:fs/promises'
import { request } from 'node:http'
import type { AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import type { Express } from 'express'
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import { startTakeInFiles } from '../../server/jobs/takeInFiles.ts'
import type { TakeInFiles } from '../../server/jobs/takeInFiles.ts'
import { Audit, AuxiliaryReading, LongJob, ReadingBlock, Upload } from '../../server/models/index.ts'
import { readWindow } from '../../server/services/readings.ts'
import { beginLinks } from '../../server/services/readings/links.ts'
import type { UploadLayout, UploadView } from '../../shared/schemas/stationSetUpUploads.ts'
import { signedIn } from '../support/browser.ts'
import type { Browser } from '../support/browser.ts'
import { makePerson, makeStation, usualPassword } from '../support/factories.ts'
import type { StationMade } from '../support/factories.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'
import { until } from '../support/until.ts'

const noon = new Date('2026-12-01T12:00:00Z')
let parts: TestParts
let app: Express
let browser: Browser
let job: TakeInFiles
let made: StationMade
let folder: string

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'offing-uploads-'))
  const own = await testParts()
  parts = { ...own, environment: { ...own.environment, dataFolder: folder } }
  app = createApp(parts)
  browser = await signedIn(app, (await makePerson(parts.clock, { role: 'admin' })).email)
  job = startTakeInFiles(parts)
})
afterAll(async () => {
  await job.stop()
  await rm(folder, { recursive: true, force: true })
})
beforeEach(async () => {
  parts.clock.set(noon)
  beginLinks(parts.clock)
  made = await makeStation(parts.clock)
})

const letters = () => made.sensors.map(({ letter }) => letter)
const valueAt = (sensor: number, n: number): number =>
  11 + sensor + Math.round(4000 * Math.sin(n / 7 + sensor)) / 10_000

/** Three minutes at 4 Hz from 10:00, an hour and a half ago. */
function lines(count = 720): string[] {
  const from = Date.parse('2026-12-01T10:00:00Z')
  const rows = Array.from({ length: count }, (_, n) => [new Date(from + n * 250).toISOString(), ...[0, 1, 2].map((m) => valueAt(m, n).toFixed(4))].join(',')) // prettier-ignore
  return [`time,${letters().join(',')}`, ...rows]
}

async function upload(content: string | Buffer, kind = 'readings', stationId = made.station.id): Promise<UploadView> {
  const path = `/api/stations/${stationId}/uploads?kind=${kind}&fileName=logger.csv`
  return (await browser.post(path).type('text/csv').send(content).expect(201)).body
}

async function order(act: 'check' | 'store', { id, layout }: UploadView, given?: Partial<UploadLayout>) {
  const body = { layout: { ...layout, ...given } }
  await browser.post(`/api/uploads/${id}/${act}`).send(body).expect(202)
  await job.wake()
  return (await browser.get(`/api/uploads/${id}`).expect(200)).body as UploadView
}

const blocks = () => ReadingBlock.count({ where: { stationId: made.station.id } })

describe('a file of readings', () => {
  test('is looked at, checked without storing, stored, told again as repeated, and undone', async () => {
    const received = await upload(lines().join('\n'))
    expect(received).toMatchObject({ state: 'received', fileName: 'logger.csv', headings: ['time', ...letters()], reason: null }) // prettier-ignore
    const checked = await order('check', received)
    expect(checked).toMatchObject({ state: 'checked', report: { rows: 720, minutes: 3, stored: 2160, repeated: 0, faults: [] } }) // prettier-ignore
    expect(checked.report?.startsAt).toBe('2026-12-01T10:00:00.000Z')
    expect(await blocks()).toBe(0)
    const stored = await order('store', checked)
    expect(stored).toMatchObject({ state: 'stored', report: { stored: 2160 } })
    expect(await blocks()).toBe(3)
    const from = Date.parse('2026-12-01T10:00:00Z')
    const window = await readWindow(made.station.id, from, from + 180_000, { letters: letters() })
    expect(window.series[1]?.[100]).toBeCloseTo(valueAt(1, 100), 4)
    expect((await browser.post(`/api/uploads/${received.id}/store`).send({ layout: received.layout }).expect(409)).body.code).toBe('upload.stored') // prettier-ignore

    const again = await order('check', await upload(lines().join('\n')))
    expect(again.report).toMatchObject({ stored: 0, repeated: 2160, conflicting: 0 })

    const [imported] = (await browser.get(`/api/stations/${made.station.id}/imports`).expect(200)).body
    expect(imported).toMatchObject({ id: stored.importId, status: 'done', report: { stored: 2160, endsAt: '2026-12-01T10:03:00.000Z' } }) // prettier-ignore
    await browser.post(`/api/imports/${imported.id}/undo`).send({ reason: 'x' }).expect(422)
    const undone = await browser.post(`/api/imports/${imported.id}/undo`).send({ reason: 'Wrong station' }).expect(200)
    expect(undone.body).toMatchObject({ status: 'undone', undoneAt: noon.toISOString() })
    expect(await blocks()).toBe(0)
    const audit = await Audit.findOne({ where: { action: 'import.undo', entityId: String(imported.id) } })
    expect(audit?.after).toEqual({ reason: 'Wrong station' })
  })

  test('with semicolons, decimal commas, a byte order mark, other units and lines above its heading is the same', async () => {
    const foreign = lines(240)
      .slice(1)
      .map((line) => {
        const [time = '', ...values] = line.split(',')
        return [time.replace('T', ' ').replace('Z', ''), ...values.map((value) => (Number(value) * 1000).toFixed(1).replace('.', ','))].join(';') // prettier-ignore
      })
    const heading = `Date and time;${letters().map((letter) => `${letter} (cm)`).join(';')}` // prettier-ignore
    const text = `\uFEFFLogger 7\r\nExported\r\n${[heading, ...foreign].join('\r\n')}\r\n`
    const received = await upload(text)
    expect(received.layout).toMatchObject({ delimiter: ';', decimal: ',', linesAbove: 2, timeColumn: 'Date and time' })
    // Pressure is not told in centimetres: the guess takes the unit from the heading, and the check refuses it.
    const wrong = await order('check', received)
    expect(wrong.report?.faults[0]?.reason).toMatch(/cannot be in cm; it can be in .*dbar/)
    const columns = received.layout!.columns.map((column) => ({ ...column, unit: 'mbar' as const }))
    const checked = await order('store', { ...received, layout: { ...received.layout!, columns } })
    expect(checked).toMatchObject({ state: 'stored', report: { stored: 720 } })
    const from = Date.parse('2026-12-01T10:00:00Z')
    const window = await readWindow(made.station.id, from, from + 60_000, { letters: letters() })
    expect(window.series[2]?.[7]).toBeCloseTo(valueAt(2, 7) * 10, 2)
  })

  test('that is cancelled while it waits stores nothing and says so', async () => {
    const received = await upload(lines().join('\n'))
    const { body } = await browser.post(`/api/uploads/${received.id}/store`).send({ layout: received.layout }).expect(202) // prettier-ignore
    await browser.post(`/api/jobs/${body.jobId}/cancel`)
    await job.wake()
    const after = (await browser.get(`/api/uploads/${received.id}`)).body
    expect(after.state === 'cancelled' ? await blocks() : 0).toBe(0)
    expect(['cancelled', 'stored']).toContain(after.state)
  })

  test('whose work a stop cut off is taken up again when its lease has run out, and stored once', async () => {
    const received = await upload(lines().join('\n'))
    await Upload.update({ state: 'storing', layout: received.layout }, { where: { id: received.id } })
    const leaseUntil = new Date(noon.getTime() - 1000)
    const times = { createdAt: noon, startedAt: noon, updatedAt: noon, leaseUntil }
    await LongJob.create({ kind: 'takeInFile', title: 'Left', status: 'running', parameters: { uploadId: received.id, act: 'store' }, ...times }) // prettier-ignore
    await job.wake()
    expect((await browser.get(`/api/uploads/${received.id}`)).body).toMatchObject({ state: 'stored' })
    expect(await blocks()).toBe(3)
  })

  test('that breaks off on its way in leaves nothing behind', async () => {
    const before = (await readdir(join(folder, 'uploads'))).length
    const server = app.listen(0, '127.0.0.1')
    await once(server, 'listening')
    const { port } = server.address() as AddressInfo
    const admin = await makePerson(parts.clock, { role: 'admin' })
    const signIn = await fetch(`http://127.0.0.1:${port}/api/session`, { method: 'POST', headers: { 'X-Offing': '1', 'Content-Type': 'application/json' }, body: JSON.stringify({ email: admin.email, password: usualPassword }) }) // prettier-ignore
    const cookie = signIn.headers.getSetCookie().map((one) => one.split(';')[0]).join('; ') // prettier-ignore
    const path = `/api/stations/${made.station.id}/uploads?kind=readings&fileName=a.csv`
    const headers = { 'X-Offing': '1', 'Content-Type': 'text/csv', 'Content-Length': '100000', Cookie: cookie }
    const sending = request({ port, path, method: 'POST', headers })
    sending.on('error', () => undefined)
    sending.write(lines(100).join('\n'))
    await until('the file begins to come in', async () => (await readdir(join(folder, 'uploads'))).length > before, 10_000) // prettier-ignore
    sending.destroy()
    await until('it is gone', async () => (await readdir(join(folder, 'uploads'))).length === before, 10_000)
    server.closeAllConnections()
    await new Promise((resolve) => server.close(resolve))
    expect((await browser.get(`/api/stations/${made.station.id}/uploads`)).body).toEqual([])
  })

  test('is thrown away, and is gone', async () => {
    const { id } = await upload(lines(40).join('\n'))
    await browser.delete(`/api/uploads/${id}`).expect(204)
    await browser.get(`/api/uploads/${id}`).expect(404)
    expect((await browser.get(`/api/stations/${made.station.id}/uploads`)).body).toEqual([])
  })

  test('of somebody who is no administrator, or of a station that is not there, is refused', async () => {
    const operator = await signedIn(app, (await makePerson(parts.clock, { role: 'operator' })).email)
    const path = `/api/stations/${made.station.id}/uploads?kind=readings&fileName=a.csv`
    await operator.post(path).type('text/csv').send('x').expect(403)
    await browser
      .post(path.replace(String(made.station.id), '999999'))
      .type('text/csv')
      .send('x')
      .expect(404)
  })
})

/** What each is refused with; nothing of any of them may be stored. */
const broken: [name: string, spoil: (lines: string[]) => string, reason: RegExp, row: number | null][] = [
  ['with a word for a number', (all) => all.map((line, n) => (n === 40 ? line.replace(/,[^,]*$/, ',abc') : line)).join('\n'), /"abc" under .* is no number/, 41], // prettier-ignore
  ['with a cell missing', (all) => all.map((line, n) => (n === 9 ? line.slice(0, line.lastIndexOf(',')) : line)).join('\n'), /^3 cells where the heading has 4$/, 10], // prettier-ignore
  [
    'cut in the middle of a line',
    (all) => all.join('\n').slice(0, -9),
    /cells where the heading has|is no number/,
    721,
  ],
  ['with a clock that runs backwards', (all) => [...all.slice(0, 60), all[20], ...all.slice(60)].join('\n'), /before that of the row above/, 61], // prettier-ignore
  ['with a row twice', (all) => [...all.slice(0, 60), all[59], ...all.slice(60)].join('\n'), /two rows lie in one sampling interval/, 61], // prettier-ignore
  ['with no time', (all) => all.map((line, n) => (n === 5 ? `soon${line.slice(line.indexOf(','))}` : line)).join('\n'), /"soon" is no time/, 6], // prettier-ignore
  ['at another rate', (all) => all.filter((_, n) => n % 4 === 0).join('\n'), /do not follow each other at 4 Hz/, null],
  ['of the future', (all) => all.join('\n').replaceAll('2026-12-01T10', '2026-12-01T13'), /lie in the future/, 2],
  [
    'from before the array',
    (all) => all.join('\n').replaceAll('2026-12-01T10', '2019-12-01T10'),
    /not yet deployed/,
    2,
  ],
  ['with values that cannot be', (all) => all.map((line, n) => (n === 30 ? line.replace(/,[^,]*$/, ',1e9') : line)).join('\n'), /out of range/, 31], // prettier-ignore
  ['with a heading alone', (all) => `${all[0]}\n`, /no rows|heading/, null],
]

describe('a broken file', () => {
  test.each(broken)('%s is refused by its line, and nothing of it is stored', async (_, spoil, reason, row) => {
    const received = await upload(spoil(lines()))
    const layout = received.layout ?? {
      delimiter: ',', decimal: '.', linesAbove: 0, timeColumn: 'time', clockColumn: null, timeForm: 'iso', utcOffsetMinutes: 0, missing: [], columns: letters().map((letter) => ({ column: letter, letter, unit: null })) } as UploadLayout // prettier-ignore
    const after = await order('store', { ...received, layout })
    expect(after.state).toBe('failed')
    expect(after.report?.faults[0]).toEqual({ row, reason: expect.stringMatching(reason) })
    expect(await blocks()).toBe(0)
  })

  test.each<[string, Buffer, RegExp]>([
    ['in UTF-16', Buffer.from([0xff, 0xfe, 0x74, 0]), /UTF-16/],
    ['that is a workbook', Buffer.from('PK\u0003\u0004rest of it'), /workbook/],
    ['that is compressed', Buffer.from([0x1f, 0x8b, 8, 0]), /compressed/],
    ['with NUL bytes', Buffer.from('time,A\0B\n'), /no text/],
  ])('%s is refused as it comes in', async (_, content, detail) => {
    const path = `/api/stations/${made.station.id}/uploads?kind=readings&fileName=a.csv`
    const { body } = await browser.post(path).type('text/csv').send(content).expect(415)
    expect(body.detail).toMatch(detail)
  })

  test('without a heading, without a known column, or of one endless line says why nothing is guessed', async () => {
    const rows = lines(8).slice(1).join('\n')
    expect((await upload(rows)).reason).toMatch(/no heading/)
    expect((await upload(`time,X,Y\n${lines(3).slice(1).map((line) => line.split(',').slice(0, 3).join(',')).join('\n')}`)).reason).toMatch(/say which column/) // prettier-ignore
    const endless = await upload('x'.repeat(200_000))
    const layout = (await upload(lines(8).join('\n'))).layout
    expect((await order('check', { ...endless, layout })).report?.faults[0]?.reason).toMatch(/longer than any row/)
  })

  test('lists at most a hundred faults', async () => {
    const received = await upload(lines().map((line, n) => (n === 0 ? line : line.replace(/,[^,]*$/, ',x'))).join('\n')) // prettier-ignore
    expect((await order('check', received)).report?.faults).toHaveLength(100)
  })
})

describe('values beside the array', () => {
  const path = () => `/api/stations/${made.station.id}/auxiliary`

  test('are entered, repeated, replaced with the older kept in the audit, and flagged by their range', async () => {
    const reading = { kind: 'waterLevel', at: '2026-12-01T11:50:00Z', value: 1.24 }
    const enter = async (readings: object[]) => (await browser.post(path()).send({ readings }).expect(200)).body
    expect(await enter([reading, { kind: 'barometer', at: reading.at, value: 101_300 }])).toEqual({ stored: 2, repeated: 0, replaced: 0, flagged: 0 }) // prettier-ignore
    expect(await enter([reading])).toMatchObject({ repeated: 1, stored: 0 })
    expect(await enter([{ ...reading, value: 40 }])).toMatchObject({ replaced: 1, flagged: 1 })
    const audit = await Audit.findOne({ where: { action: 'auxiliary.store', entityId: String(made.station.id) }, order: [['id', 'DESC']] }) // prettier-ignore
    expect(audit?.before).toEqual([expect.objectContaining({ kind: 'waterLevel', value: 1.24 })])
    const views = (await browser.get(path()).expect(200)).body
    expect(
      views.map((view: { kind: string; isUsed: boolean; newest: { value: number } | null }) => [
        view.kind,
        view.isUsed,
        view.newest?.value ?? null,
      ]),
    ).toEqual([
      // prettier-ignore
      ['waterLevel', false, 40],
      ['tide', false, null],
      ['barometer', true, 101_300],
      ['windSpeed', false, null],
      ['windFrom', false, null],
    ])
  })

  test('come from a station by its key, and by no other', async () => {
    const other = await makeStation(parts.clock)
    const keyOf = async (id: number) => (await browser.post(`/api/stations/${id}/keys`).send({ validUntil: null }).expect(201)).body.key // prettier-ignore
    const push = (key: string) => browser.post(`${path()}/push`).set('Authorization', `Bearer ${key}`).send({ readings: [{ kind: 'windSpeed', at: noon.toISOString(), value: 8.2 }] }) // prettier-ignore
    await push(await keyOf(made.station.id)).expect(200)
    expect((await push(await keyOf(other.station.id)).expect(401)).body.code).toBe('stationKey.refused')
    await push('nonsense').expect(401)
    const own = await keyOf(made.station.id)
    await browser.post(`/api/stations/${made.station.id}/retire`).set('If-Match', '"1"').send({ reason: 'Over' }).expect(200) // prettier-ignore
    expect((await push(own).expect(409)).body.code).toBe('station.retired')
    expect(await AuxiliaryReading.count({ where: { stationId: made.station.id, source: 'push' } })).toBe(1)
  })

  test('of a tide table come as a file, reach ahead, leave what stands there, and are undone by its import', async () => {
    await browser.post(path()).send({ readings: [{ kind: 'tide', at: '2026-12-01T12:10:00Z', value: 0.5 }] }).expect(200) // prettier-ignore
    const rows = Array.from({ length: 12 }, (_, n) => `2026-12-01 12:${String(n * 5).padStart(2, '0')};${(1 + n / 10).toFixed(1).replace('.', ',')}`) // prettier-ignore
    const received = await upload(['Time;Predicted (m)', ...rows].join('\n'), 'auxiliary')
    expect(received.layout?.columns).toEqual([{ column: 'Predicted (m)', letter: 'tide', unit: 'm' }])
    const stored = await order('store', received)
    expect(stored.report).toMatchObject({ rows: 12, stored: 11, conflicting: 1, faults: [] })
    const tide = (await browser.get(path())).body[1]
    expect(tide).toMatchObject({ isUsed: true, reachesUntil: '2026-12-01T12:55:00.000Z', newest: { value: 1, source: 'file' } }) // prettier-ignore
    await browser.post(`/api/imports/${stored.importId}/undo`).send({ reason: 'Wrong port' }).expect(200)
    const left = await AuxiliaryReading.findAll({ where: { stationId: made.station.id, kind: 'tide' }, raw: true })
    expect(left.map(({ value }) => value)).toEqual([0.5])
  })

  test('that are measured cannot lie in the future', async () => {
    const { body } = await browser.post(path()).send({ readings: [{ kind: 'windFrom', at: '2026-12-01T13:00:00Z', value: 90 }] }).expect(422) // prettier-ignore
    expect(body.errors).toEqual([{ path: 'readings.0.at', message: 'lies in the future' }])
    const file = await order(
      'store',
      await upload('time,wind\n2026-12-01T11:00Z,5\n2026-12-01T14:00Z,6\n', 'auxiliary'),
    )
    expect(file).toMatchObject({ state: 'failed', report: { faults: [{ row: 3, reason: 'a measured value lies in the future' }] } }) // prettier-ignore
    expect(await AuxiliaryReading.count({ where: { stationId: made.station.id } })).toBe(0)
  })
})
