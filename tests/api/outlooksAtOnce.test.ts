import { expect, test } from 'vitest'
import { Outlook } from '../../server/models/index.ts'
import { saveOutlooks } from '../../server/services/places.ts'
import { testParts } from '../support/parts.ts'
import { makeSmallCoast, saveSea } from '../support/places.ts'

test('outlooks of two stations that feed a place at once stand from the better one, and neither estimate is lost', async () => {
  const parts = await testParts()
  const coast = await makeSmallCoast(parts)
  const beach = await coast.add('PS')
  const end = parts.clock.now()
  const window = { windowStartsAt: end.getTime() - 1_200_000, windowEndsAt: end.getTime() }
  // This transaction's view is taken before the other station's outlook is committed.
  await parts.sequelize.transaction(async (transaction) => {
    await Outlook.count({ transaction })
    await saveSea(parts, coast.stations.FW, end)
    await saveOutlooks(parts, { stationId: coast.stations.PB.id, ...window }, transaction)
  })
  const rows = await Outlook.findAll({ where: { placeId: beach, windowEndsAt: end } })
  expect(rows.map(({ revision }) => revision)).toEqual([1])
})
