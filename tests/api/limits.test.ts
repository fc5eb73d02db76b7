import { describe, expect, it } from 'vitest'
import { LimitState } from '../../server/models/index.ts'
import { judgedStation, plainCondition } from '../support/judgedStation.ts'

const held = judgedStation()

describe('a change of a limit', () => {
  it('needs the version it was made from: 428 without, 412 with the one that holds now', async () => {
    const limitId = await held.setLimit()
    const change = { content: held.contentOf({ note: 'Port order 5' }), reason: 'New order' }
    await held.desk.put(`/api/limits/${limitId}`).send(change).expect(428)
    const { body } = await held.desk.put(`/api/limits/${limitId}`).set('If-Match', '"1"').send(change).expect(200)
    expect(body).toMatchObject({ version: 2, current: { number: 2, author: { name: 'Duty officer A' } } })
    const late = await held.otherDesk.put(`/api/limits/${limitId}`).set('If-Match', '"1"').send(change).expect(412)
    expect(late.body.current).toMatchObject({ version: 2, current: { content: { note: 'Port order 5' } } })
    const history = (await held.desk.get(`/api/limits/${limitId}`).expect(200)).body
    expect(history.versions.map(({ number }: { number: number }) => number)).toEqual([2, 1])
  })

  it.each([
    ['a bearing above a value', { kind: 'above', quantity: 'swellFrom', raise: 10, clear: 5, riseOverSeconds: null }],
    [
      'clear above raise',
      { kind: 'above', quantity: 'significantWaveHeight', raise: 1, clear: 2, riseOverSeconds: null },
    ],
    [
      'a height out of range',
      { kind: 'above', quantity: 'significantWaveHeight', raise: 99, clear: 1, riseOverSeconds: null },
    ],
    ['the disk of a station', { kind: 'below', quantity: 'diskFree', raise: 0.1, clear: 0.2 }],
  ])('to %s is refused', async (_, comparison) => {
    const content = { ...held.contentOf(), condition: { ...plainCondition, comparisons: [comparison] } }
    await held.desk
      .post('/api/limits')
      .send({ ...held.draftOf(), content })
      .expect(422)
  })

  it('that retires it closes its open alert and keeps both', async () => {
    const limitId = await held.setLimit()
    await held.sea(0, 10, { height: 2.8 })
    const retire = held.desk.delete(`/api/limits/${limitId}`).set('If-Match', '"1"').send({ reason: 'Berth closed' })
    expect((await retire.expect(200)).body.retiredAt).not.toBeNull()
    expect((await held.alerts(limitId))[0]).toMatchObject({ state: 'normal' })
    expect(await LimitState.count({ where: { limitId } })).toBe(1)
  })
})
