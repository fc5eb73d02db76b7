/** An e-mail that only shows that e-mails arrive. */
import { clockUtc, dateUtc } from '../../../shared/times.ts'
import type { Parts } from '../../config/parts.ts'
import { Person } from '../../models/index.ts'
import { recordAudit } from '../audit.ts'
import { invalidInput, notFound } from '../problems.ts'
import { inTransaction } from '../transaction.ts'
import { writeMessage } from './write.ts'

export async function writeTestMessage(
  parts: Parts,
  personId: number,
  by: { id: number; name: string },
  portName: string,
): Promise<number> {
  const person = await Person.findByPk(personId)
  if (!person) throw notFound('person', personId)
  const address = person.email
  if (!address || person.disabledAt) {
    throw invalidInput([{ path: 'personId', message: 'has no address to which e-mails go' }])
  }
  const now = parts.clock.now().getTime()
  const text = [
    `This is a test of the e-mails of ${portName}. No alert is behind it and nothing is asked of you.`,
    `Asked for by ${by.name}, ${dateUtc(now)}, ${clockUtc(now)} UTC.`,
  ].join('\n')
  const mark = parts.environment.installationKind === 'demonstration' ? 'DEMONSTRATION ' : ''
  const messageId = await inTransaction(parts.sequelize, async (transaction) => {
    const test = { kind: 'test' as const, subject: `${mark}Test e-mail of ${portName}`, text }
    const { id } = await writeMessage(parts, test, transaction, [{ personId, address }])
    const change = { action: 'message.test', entity: 'message', entityId: id, after: { personId } }
    await recordAudit(parts, { ...change, personId: by.id }, transaction)
    return id
  })
  parts.bus.publish('message.changed', { messageId, alertId: null })
  return messageId
}
