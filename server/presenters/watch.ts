/** The sheet of a hand-over and who is on watch, put together from what the office watches. */
import type { HandOverSheet, WatchNow } from '../../shared/schemas/watch.ts'
import { handOverSheet } from '../../shared/watchLog/handOverSheet.ts'
import type { Parts } from '../config/parts.ts'
import { listBulletins } from '../services/bulletins.ts'
import { listLimits } from '../services/limits.ts'
import { changesSince } from '../services/log.ts'
import { messagesNotOut } from '../services/messages.ts'
import { settingInForce } from '../services/settings.ts'
import { readWatchNow } from '../services/watches.ts'
import { bulletinOfficeOf } from './bulletin.ts'
import { presentPlaces } from './place.ts'
import { leadSeaNow } from './seaNow.ts'
import { presentStations } from './station.ts'

export async function presentWatchNow(parts: Parts): Promise<WatchNow> {
  const [{ watch, owed, handOver }, { watches }] = await Promise.all([readWatchNow(), settingInForce(parts, 'rota')])
  return { watch, owed, handOver, rota: watches }
}

/** As it would be signed now. */
export async function presentSheet(parts: Parts): Promise<HandOverSheet> {
  const now = parts.clock.now().getTime()
  const office = await bulletinOfficeOf(parts)
  const { watch, notes, expected } = await readWatchNow()
  const [sea, limits, stations, places, { bulletins }, notOut, { watches: rota }, log] = await Promise.all([
    leadSeaNow(parts),
    listLimits(parts),
    presentStations(parts),
    presentPlaces(parts),
    listBulletins(parts, office, null),
    messagesNotOut(parts),
    settingInForce(parts, 'rota'),
    watch ? changesSince(new Date(watch.startedAt)) : [],
  ])
  return handOverSheet({
    ...{ watchId: watch?.id ?? null, sea, limits, stations, places, bulletins, messagesNotOut: notOut, log },
    ...{ notes, expected, rota, timeZone: office.timeZone, now },
  })
}
