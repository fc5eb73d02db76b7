/** A station whose loggers are set to another rate: what was taken before stays as it was, and no window mixes the two. */
import { expect, it } from 'vitest'
import { StationSettings } from '../../server/models/index.ts'
import { wholeEstimate } from '../../server/services/estimates.ts'
import { readWindow } from '../../server/services/readings.ts'
import { at, countTo, estimatingStation } from '../support/estimatingStation.ts'
import { storeSea } from '../support/storedSea.ts'

const e = estimatingStation()

it('computes windows by the rate in force at their end, and says of those over the change why they are not computed', async () => {
  const { station, settings } = e.made
  await settings.update({ content: { ...settings.content, windowSeconds: 300 } })
  await storeSea(e.made, { from: at(0), to: at(10), commitId: 1 })
  await StationSettings.update({ sampleRate: station.sampleRate }, { where: { stationId: station.id } })
  const { content } = settings
  await StationSettings.create({ stationId: station.id, validFrom: at(10), sampleRate: 4, content, authorId: null, reason: 'Loggers' }) // prettier-ignore
  station.sampleRate = 4
  await storeSea(e.made, { from: at(10), to: at(20), commitId: 2 })
  const asked: [minute: number, rate: number][] = []
  e.estimators.before = ({ windowEndsAt, window }) =>
    void asked.push([(windowEndsAt - at(0).getTime()) / 60_000, window.sampleRate])
  e.parts.clock.set(at(20))
  const job = await e.start()
  await job.wake()

  expect(await e.ends()).toEqual(countTo(20))
  expect(asked).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 15, 16, 17, 18, 19, 20].map((end) => [end, end < 10 ? 2 : 4]))
  const over = await wholeEstimate(e.parts, station.id, at(12), null)
  expect(over).toMatchObject({ resolved: false, reason: 'too-little-data', qualityFlag: 9 })
  expect(over?.detail?.tests[0]?.detail).toBe(
    `Until ${at(10).toISOString()} the readings came at 2 Hz, then at 4 Hz: no window over the change is computed`,
  )
  // What was measured before is read as it was.
  const before = await readWindow(station.id, at(0).getTime(), at(10).getTime())
  expect(before).toMatchObject({ sampleRate: 2, leftOut: null })
  expect(before.sampleCount).toBe(600 * 2 * 5)
})
