/**
 * What people are told of an alert, written in the alert's own transaction: a frozen message and the stored times of
 * the steps to come. Who gets it by e-mail is worked out from these rows.
 */
import { quantityOf } from '../../../shared/alerts/quantities.ts'
import { messageContentOf, messageTextOf, subjectLineOf } from '../../../shared/alerts/messageText.ts'
import type { SeaFigures } from '../../../shared/alerts/figures.ts'
import type { MessageKind } from '../../../shared/schemas/message.ts'
import type { Alert } from '../../models/index.ts'
import { Escalation, Message } from '../../models/index.ts'
import type { LimitInForce } from '../limits/rows.ts'
import type { Desk } from './desk.ts'

export interface Telling {
  kind: MessageKind
  alert: Alert
  limit: LimitInForce
  sea: SeaFigures | null
  isCaughtUp: boolean
  step: number | null
}

const handling =
  'An operator on watch acknowledges the alert. Confirming receipt tells the watch that you have read this; it does not acknowledge.'

export async function writeMessage(desk: Desk, { kind, alert, limit, sea, isCaughtUp, step }: Telling): Promise<void> {
  const { office, transaction } = desk
  const { ofPlace } = quantityOf(limit.condition.comparisons[0].quantity)
  const content = messageContentOf({
    ...{ kind, sea, isCaughtUp, handling },
    ...{ isDemonstration: office.isDemonstration, portName: office.portName, timeZone: office.timeZone },
    caution: ofPlace ? office.placeCautions[ofPlace] : office.caution,
    alertId: alert.id,
    isExercise: Boolean(alert.isExercise),
    subjectName: limit.subjectName,
    title: limit.title,
    condition: limit.condition,
    priority: alert.priority,
    toCheck: limit.toCheck,
    value: alert.value,
    valueSd: alert.valueSd,
    windowEndsAt: alert.windowEndsAt.getTime(),
    crossedAt: alert.crossedAt.getTime(),
    clearedAt: alert.clearedAt?.getTime() ?? null,
  })
  const message = await Message.create(
    {
      ...{ kind, alertId: alert.id, bulletinId: null, rootMessageId: null, step, html: null, content },
      subject: subjectLineOf(kind, content),
      text: messageTextOf(kind, content),
      isExercise: Boolean(alert.isExercise),
      createdAt: new Date(desk.now),
      queuedAt: null,
    },
    { transaction },
  )
  desk.changed.messages.set(message.id, alert.id)
}

/** The first step at once; the others get their times. A second announcement of the same alert begins them anew. */
export async function announce(desk: Desk, telling: Omit<Telling, 'kind' | 'step'>): Promise<void> {
  const { alert, limit } = telling
  const { steps, remindEverySeconds } = limit.recipients
  await Escalation.destroy({ where: { alertId: alert.id }, transaction: desk.transaction })
  for (const [step, { afterSeconds }] of steps.entries()) {
    const isAtOnce = step === 0 && afterSeconds === 0
    // Where the first step waits too, its words are written now and queued when its time comes.
    if (step === 0) await writeMessage(desk, { ...telling, kind: 'alert', step })
    await Escalation.create(
      {
        ...{ alertId: alert.id, step, satisfiedAt: null, satisfiedById: null, endedAt: null },
        dueAt: new Date(desk.now + afterSeconds * 1000),
        sentAt: isAtOnce ? new Date(desk.now) : null,
        nextReminderAt: isAtOnce && remindEverySeconds !== null ? new Date(desk.now + remindEverySeconds * 1000) : null,
      },
      { transaction: desk.transaction },
    )
  }
}

/** To those who were told. */
export const tellAllClear = (desk: Desk, telling: Omit<Telling, 'kind' | 'step' | 'isCaughtUp'>): Promise<void> =>
  telling.limit.recipients.steps.length === 0
    ? Promise.resolve()
    : writeMessage(desk, { ...telling, kind: 'allClear', step: null, isCaughtUp: false })

/** No further step; reminders to those without a receipt go on unless `all` ends them too. */
export async function endSteps({ now, transaction }: Desk, alertId: number, all: boolean): Promise<void> {
  const open = { alertId, endedAt: null, ...(!all && { sentAt: null }) }
  await Escalation.update({ endedAt: new Date(now), nextReminderAt: null }, { where: open, transaction })
}
