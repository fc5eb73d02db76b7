import type { LogEntryDraft, LogEntryView } from '../../../shared/schemas/watchLog.ts'
import type { Parts } from '../../config/parts.ts'
import { Alert, LogEntry, Place } from '../../models/index.ts'
import { invalidInput } from '../problems.ts'
import { inTransaction } from '../transaction.ts'

interface Written {
  draft: LogEntryDraft
  personId: number
  /** Of the lead station now. */
  figures: LogEntryView['figures']
}

/** A line of a person, stamped with the sea as it is now. Answers its number. */
export async function writeEntry(
  { sequelize, clock, bus }: Pick<Parts, 'sequelize' | 'clock' | 'bus'>,
  { draft, personId, figures }: Written,
): Promise<number> {
  const { text, correctsId, alertId, placeId } = draft
  const id = await inTransaction(sequelize, async (transaction) => {
    if (correctsId !== null && !(await LogEntry.findByPk(correctsId, { transaction }))) {
      throw invalidInput([{ path: 'correctsId', message: 'names no entry of the log' }])
    }
    if (alertId !== null && !(await Alert.findByPk(alertId, { transaction }))) {
      throw invalidInput([{ path: 'alertId', message: 'names no alert' }])
    }
    if (placeId !== null && !(await Place.findByPk(placeId, { transaction }))) {
      throw invalidInput([{ path: 'placeId', message: 'names no place' }])
    }
    const links = { ...(alertId !== null && { alertId }), ...(placeId !== null && { placeId }) }
    const row = { at: clock.now(), kind: 'entry', personId, text, correctsId, figures, links }
    const entry = await LogEntry.create(row, { transaction })
    return Number(entry.id)
  })
  bus.publish('log.written', { entryIds: correctsId === null ? [id] : [id, correctsId] })
  return id
}
