import { describe, expect, it } from 'vitest'
import { startKeepSeriesDays } from '../../server/jobs/keepSeriesDays.ts'
import { SeriesDay } from '../../server/models/index.ts'
import { rebuildSeriesDays } from '../../server/services/series.ts'
import { at, judgedStation, plainCondition } from '../support/judgedStation.ts'

const held = judgedStation()

const question = (changes: object = {}) => ({
  subjectKind: 'station',
  subjectId: held.station.id,
  condition: { ...plainCondition, clearSigmas: 0 },
  days: 7,
  shifts: [-0.5, 0.5],
  ...changes,
})

/** A storm of three hours in six, yesterday from noon. */
async function yesterday(): Promise<void> {
  const start = -24 * 60
  for (let minutes = start; minutes <= start + 360; minutes += 10) {
    const isStorm = minutes >= start + 60 && minutes < start + 240
    await held.estimate(minutes, { height: isStorm ? 2.8 : 1.2 })
  }
}

describe('a back-test', () => {
  it('of estimates that are not packed yet tells episodes, how long, the highest value, other values and gaps', async () => {
    await yesterday()
    held.parts.clock.set(at(0))
    const { body } = await held.desk.post('/api/backTests').send(question()).expect(200)
    expect(body.draft).toMatchObject({ count: 1, raise: 2.5, clear: 2.1 })
    expect(body.draft.episodes).toMatchObject([
      { raisedAt: at(-23 * 60 + 10).toISOString(), extreme: expect.closeTo(2.8, 5) },
    ])
    expect(body.draft.activeSeconds).toBe(200 * 60)
    expect(body.others.map(({ raise, count }: { raise: number; count: number }) => [raise, count])).toEqual([[2, 1], [3, 0]]) // prettier-ignore
    expect(body.gaps.at(-1).to).toBe(at(0).toISOString())
    expect(body.missingSeconds).toBeGreaterThan(6 * 86_400)
    expect(body.isInvented).toBe(false)
  })

  it('of packed days says the same as of the estimates', async () => {
    await yesterday()
    held.parts.clock.set(at(0))
    const fresh = await held.desk.post('/api/backTests').send(question()).expect(200)
    await rebuildSeriesDays(held.parts, held.station.id, '2026-11-30', '2026-11-30')
    const packed = await held.desk.post('/api/backTests').send(question()).expect(200)
    expect(packed.body.draft).toEqual(fresh.body.draft)
    expect(packed.body.gaps).toEqual(fresh.body.gaps)
    expect(packed.body.missingSeconds).toEqual(fresh.body.missingSeconds)
    expect(packed.body.judgedSeconds).toEqual(fresh.body.judgedSeconds)
  })

  it('of a direction keeps a refused one out, and a height that a refused direction leaves in', async () => {
    for (let minutes = -60; minutes <= 0; minutes += 1) {
      await held.estimate(minutes, { height: 2.8, flag: 4, reason: 'ambiguous' })
    }
    held.parts.clock.set(at(0))
    await rebuildSeriesDays(held.parts, held.station.id, '2026-12-01', '2026-12-01')
    const height = await held.desk.post('/api/backTests').send(question()).expect(200)
    expect(height.body.draft.count).toBe(1)
    const sector = { kind: 'sector', quantity: 'leadingFrom', from: 0, to: 359, deadBand: 5 }
    const condition = { ...plainCondition, comparisons: [sector] }
    const direction = await held.desk.post('/api/backTests').send(question({ condition })).expect(200)
    expect(direction.body).toMatchObject({ judgedSeconds: 0, draft: { count: 0 } })
  })

  it('counts the ± of a bearing as the live judgement does, packed or not, and says where it was not kept', async () => {
    const sector = { kind: 'sector', quantity: 'leadingFrom', from: 200, to: 245, deadBand: 2 }
    const condition = {
      ...plainCondition,
      comparisons: [sector],
      onDelaySeconds: 0,
      offDelaySeconds: 0,
      clearSigmas: 1,
    }
    const start = -24 * 60
    for (let minutes = start; minutes < start + 30; minutes += 1) {
      // From 240 inside; then from 249, 4° outside: with its ± of 3° no further than 1° for certain.
      await held.estimate(minutes, { toward: minutes < start + 10 ? 60 : 69 })
    }
    held.parts.clock.set(at(0))
    const ask = async () => (await held.desk.post('/api/backTests').send(question({ condition })).expect(200)).body
    const fresh = await ask()
    expect(fresh.draft).toMatchObject({ count: 1, episodes: [{ clearedAt: null }] })
    await rebuildSeriesDays(held.parts, held.station.id, '2026-11-30', '2026-11-30')
    const packed = await ask()
    expect(packed.draft).toEqual(fresh.draft)
    expect(packed).toMatchObject({ daysWithoutFigure: 0, daysWithoutError: 0 })
    const ofDay = { subjectKind: 'station', subjectId: held.station.id }
    await SeriesDay.destroy({ where: { ...ofDay, quantity: 'towardDegreesSd' } })
    const without = await ask()
    expect(without).toMatchObject({ daysWithoutFigure: 0, daysWithoutError: 1 })
    expect(without.draft.episodes[0].clearedAt).toBe(at(start + 10).toISOString())
    await SeriesDay.destroy({ where: { ...ofDay, quantity: 'towardDegrees' } })
    const older = await ask()
    expect(older).toMatchObject({ daysWithoutFigure: 1, judgedSeconds: 0, draft: { count: 0 }, points: [] })
    expect(older.missingSeconds).toBeGreaterThan(6.9 * 86_400)
  })

  it('finds days that were packed before a quantity was kept packed again by the job', async () => {
    await yesterday()
    held.parts.clock.set(at(0))
    const ofDay = { subjectKind: 'station', subjectId: held.station.id, day: '2026-11-30' }
    await rebuildSeriesDays(held.parts, held.station.id, '2026-11-30', '2026-11-30')
    const all = await SeriesDay.count({ where: ofDay })
    await SeriesDay.destroy({ where: { ...ofDay, quantity: 'speedSd' } })
    const job = startKeepSeriesDays(held.parts, { isUnscheduled: true })
    await job.wake()
    await job.stop()
    expect(await SeriesDay.count({ where: ofDay })).toBe(all)
  })

  it('of data health, of a place or of a station that are not there, is refused', async () => {
    const stale = { kind: 'above', quantity: 'dataAge', raise: 900, clear: 900, riseOverSeconds: null }
    const condition = { ...plainCondition, comparisons: [stale] }
    await held.desk.post('/api/backTests').send(question({ condition })).expect(422)
    await held.desk
      .post('/api/backTests')
      .send(question({ subjectKind: 'place' }))
      .expect(404)
    await held.desk
      .post('/api/backTests')
      .send(question({ subjectId: 999_999 }))
      .expect(404)
    await held.desk
      .post('/api/backTests')
      .send(question({ days: 8 }))
      .expect(422)
  })
})
