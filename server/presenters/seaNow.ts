/** The lead station's figures at this moment, for what people write and sign. */
import { freezeStation } from '../../shared/bulletins/freezeStation.ts'
import type { LogEntryView } from '../../shared/schemas/watchLog.ts'
import type { Parts } from '../config/parts.ts'
import { settingInForce } from '../services/settings.ts'
import { presentStation } from './station.ts'

/** Null: the office has no lead station. */
export async function leadSeaNow(parts: Parts): Promise<LogEntryView['figures']> {
  const { leadStationId } = await settingInForce(parts, 'watch')
  if (leadStationId === null) return null
  return freezeStation(await presentStation(parts, leadStationId), parts.clock.now().getTime())
}
