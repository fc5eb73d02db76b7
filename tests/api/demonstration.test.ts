import { readFile, rm, stat, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { beforeAll, describe, expect, test } from 'vitest'
import { createApp } from '../../server/app.ts'
import {
  Deployment,
  DeploymentSensor,
  Person,
  Station,
  StationKey,
  StationSettings,
} from '../../server/models/index.ts'
import { seedDemonstration } from '../../server/seeders/demonstration.ts'
import { peopleFile, readDemonstrationPeople, stationKeysFile } from '../../server/setup/demonstrationPeople.ts'
import { demonstrationStations } from '../../shared/demonstration/stations.ts'
import { publicSettings } from '../../shared/schemas/coast.ts'
import { stationSettingsContent } from '../../shared/schemas/stationSettings.ts'
import { signedIn } from '../support/browser.ts'
import { testParts } from '../support/parts.ts'
import type { TestParts } from '../support/parts.ts'

let parts: TestParts
const file = (name: string) => join(parts.environment.dataFolder, name)
beforeAll(async () => {
  parts = await testParts({ INSTALLATION_KIND: 'demonstration' })
})

const rows = () =>
  Promise.all([
    Person.count(),
    Station.count(),
    StationKey.count(),
    StationSettings.count(),
    Deployment.count(),
    DeploymentSensor.count(),
  ])

describe('the demonstration', () => {
  test('killed between its files and its rows is made whole by the next start, with the same secrets', async () => {
    const stopped = new Error('stopped here')
    const clock = {
      ...parts.clock,
      now: () => {
        throw stopped
      },
    }
    await expect(seedDemonstration({ ...parts, clock })).rejects.toBe(stopped)
    expect(await rows()).toEqual([0, 0, 0, 0, 0, 0])
    const before = await readFile(file(peopleFile), 'utf8')
    expect(await seedDemonstration(parts)).toBe(true)
    expect(await readFile(file(peopleFile), 'utf8')).toBe(before)
    expect(await rows()).toEqual([5, 3, 3, 3, 3, 15])
  })

  test('seeded again changes nothing', async () => {
    expect(await seedDemonstration(parts)).toBe(false)
    expect(await rows()).toEqual([5, 3, 3, 3, 3, 15])
  })

  test('keeps its secrets for the eyes of its user, in words that can be read aloud', async () => {
    for (const name of [peopleFile, stationKeysFile]) expect((await stat(file(name))).mode & 0o777).toBe(0o600)
    const people = await readDemonstrationPeople(parts.environment.dataFolder)
    for (const { password } of people) expect(password).toMatch(/^[a-z]{6}-[a-z]{6}-[a-z]{6}$/)
    expect(new Set(people.map(({ password }) => password)).size).toBe(5)
  })

  test('lets each of its people sign in and shows them port, lead station, cautions and coast', async () => {
    const app = createApp(parts)
    for (const { email, password } of await readDemonstrationPeople(parts.environment.dataFolder)) {
      const browser = await signedIn(app, email, password)
      const settings = publicSettings.parse((await browser.get('/api/settings').expect(200)).body)
      const lead = await Station.findByPk(settings.leadStationId ?? 0)
      expect([settings.portName, lead?.code]).toEqual(['Marrowick', 'OL'])
      expect(settings.coast?.features.length).toBeGreaterThan(10)
      for (const caution of Object.values(settings.cautions)) expect(caution).not.toMatch(/\bis safe\b/)
    }
  })

  test('has for every station the survey that the simulator streams by, and settings in their shape', async () => {
    const keys: Record<string, string> = JSON.parse(await readFile(file(stationKeysFile), 'utf8'))
    for (const { code, sensors, waterDepth, landSectors } of demonstrationStations) {
      const station = await Station.findOne({ where: { code } })
      const deployment = await Deployment.findOne({ where: { stationId: station?.id ?? 0 } })
      expect([deployment?.waterDepth, deployment?.levelOfBed]).toEqual([waterDepth, -waterDepth])
      const placed = await DeploymentSensor.findAll({
        where: { deploymentId: deployment?.id ?? 0 },
        order: [['position', 'ASC']],
      })
      expect(placed.map(({ letter, east, north }) => [letter, east, north])).toEqual(
        sensors.map(({ letter, east, north }) => [letter, east, north]),
      )
      const settings = await StationSettings.findOne({ where: { stationId: station?.id ?? 0 } })
      expect(stationSettingsContent.parse(settings?.content).landSectors).toEqual(landSectors)
      const prefix = keys[code]?.split('.')[0] ?? ''
      expect((await StationKey.findOne({ where: { prefix } }))?.stationId).toBe(station?.id)
    }
  })

  test('whose files were lost gets new ones that work', async () => {
    await rm(file(peopleFile))
    await writeFile(file(stationKeysFile), 'spoilt')
    expect(await seedDemonstration(parts)).toBe(false)
    const [person] = await readDemonstrationPeople(parts.environment.dataFolder)
    await signedIn(createApp(parts), person?.email ?? '', person?.password)
    expect(await rows()).toEqual([5, 3, 6, 3, 3, 15])
  })
})
