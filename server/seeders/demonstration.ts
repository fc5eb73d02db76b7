/** Fills an empty database with the demonstration: an invented port, its people, its stations. May be run again. */
import { demonstrationCoast } from '../../shared/demonstration/coast.ts'
import { demonstrationPort, demonstrationStations } from '../../shared/demonstration/stations.ts'
import type { Parts } from '../config/parts.ts'
import { Person, Station } from '../models/index.ts'
import { changeSetting } from '../services/settings.ts'
import { inTransaction } from '../services/transaction.ts'
import { writeSystemLine } from '../services/watchLog.ts'
import { seedDemonstrationLimits } from './demonstrationLimits.ts'
import { seedDemonstrationTide } from './demonstrationPlaces.ts'
import { prepareDemonstrationPeople } from './demonstrationPeople.ts'
import { demonstrationKeys, seedStation } from './demonstrationStations.ts'

/** By the port's clock. */
const demonstrationRota = [
  { name: 'A', from: '06:00', to: '12:00' },
  { name: 'B', from: '12:00', to: '18:00' },
  { name: 'C', from: '18:00', to: '00:00' },
  { name: 'D', from: '00:00', to: '06:00' },
]

/**
 * Everything in one transaction (lists and limits in the next), after the files with the secrets: a stop in between leaves nothing half done, and
 * lost files are made anew. Answers whether the database was empty.
 */
export async function seedDemonstration(parts: Parts): Promise<boolean> {
  const isFirst = (await Person.count()) === 0 && (await Station.count()) === 0
  const keys = await demonstrationKeys(parts)
  const addPeople = await prepareDemonstrationPeople(parts)
  await inTransaction(parts.sequelize, async (transaction) => {
    await addPeople(transaction)
    const stations: Station[] = []
    for (const described of demonstrationStations) {
      stations.push(await seedStation(parts, described, keys[described.code] ?? '', transaction))
    }
    if (!isFirst) return
    const by = { personId: null, reason: 'Demonstration' }
    await changeSetting(parts, 'port', demonstrationPort, by, transaction)
    await changeSetting(parts, 'watch', { leadStationId: stations[0]?.id ?? null }, by, transaction)
    await changeSetting(parts, 'coast', { plan: demonstrationCoast }, by, transaction)
    await changeSetting(parts, 'rota', { watches: demonstrationRota }, by, transaction)
    const alerts = { asksSecondPerson: true, longestShelfHours: 8, capSender: 'duty@marrowick.example' }
    await changeSetting(parts, 'alerts', alerts, by, transaction)
    const text = `Demonstration set up: ${demonstrationPort.portName} and its ${stations.length} stations are invented.`
    await writeSystemLine(parts, { kind: 'system', text }, transaction)
  })
  await seedDemonstrationLimits(parts)
  await seedDemonstrationTide(parts)
  return isFirst
}
