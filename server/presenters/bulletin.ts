/** What bulletins need of settings, stations and places. */
import { freezePlace } from '../../shared/bulletins/freezePlace.ts'
import { freezeStation } from '../../shared/bulletins/freezeStation.ts'
import type { BulletinFigure } from '../../shared/schemas/bulletin.ts'
import type { Parts } from '../config/parts.ts'
import type { BulletinOffice } from '../services/bulletins.ts'
import { settingInForce } from '../services/settings.ts'
import { presentPlaces } from './place.ts'
import { presentStations } from './station.ts'

export async function bulletinOfficeOf(parts: Parts): Promise<BulletinOffice> {
  const [port, cautions, bulletins] = await Promise.all([
    settingInForce(parts, 'port'),
    settingInForce(parts, 'cautions'),
    settingInForce(parts, 'bulletins'),
  ])
  return {
    ...port,
    cautions: [cautions.figures, cautions.array],
    isDemonstration: parts.environment.installationKind === 'demonstration',
    asksSecondPerson: bulletins.asksSecondPerson,
  }
}

/** Everything that a bulletin can speak of, as it is now. */
export async function bulletinFiguresOf(parts: Parts): Promise<BulletinFigure[]> {
  const now = parts.clock.now().getTime()
  const [stations, places] = await Promise.all([presentStations(parts), presentPlaces(parts)])
  return [
    ...stations.filter(({ state }) => state !== 'retired').map((station) => freezeStation(station, now)),
    ...places.map((place) => freezePlace(place, now)),
  ]
}
