/** An alert with its limit, lists and first message as they stand when it has been raised. */
import { messageContentOf, messageTextOf, subjectLineOf } from '../../shared/alerts/messageText.ts'
import type { Condition, Priority, TimeSpan } from '../../shared/schemas/limit.ts'
import {
  Alert,
  DistributionList,
  Escalation,
  Limit,
  LimitVersion,
  ListMember,
  Message,
} from '../../server/models/index.ts'
import type { Clock } from '../../server/config/clock.ts'

interface WithClock {
  clock: Clock
}

const everyPriority: Priority[] = ['low', 'medium', 'high', 'urgent']

export async function makeList(
  { clock }: WithClock,
  name: string,
  members: (number | { personId: number; hours?: TimeSpan['hours']; priorities?: Priority[] })[],
  isSafety = false,
): Promise<number> {
  const times = { createdAt: clock.now(), updatedAt: clock.now(), retiredAt: null }
  const { id } = await DistributionList.create({ name, purpose: '', isSafety, ...times })
  for (const [position, member] of members.entries()) {
    const given = typeof member === 'number' ? { personId: member } : member
    await ListMember.create({ listId: id, position, hours: null, priorities: everyPriority, ...given })
  }
  return id
}

export interface LimitWanted {
  steps: { afterSeconds: number; listIds: number[] }[]
  remindEverySeconds?: number | null
  priority?: Priority
  stationId?: number
}

const condition: Condition = {
  comparisons: [{ kind: 'above', quantity: 'significantWaveHeight', raise: 2.5, clear: 2.1, riseOverSeconds: null }],
  when: null,
  onDelaySeconds: 0,
  offDelaySeconds: 0,
  clearSigmas: 0,
  worstQuality: 3,
  latches: false,
}

export async function makeLimit({ clock }: WithClock, wanted: LimitWanted): Promise<LimitVersion> {
  const now = clock.now()
  const limit = await Limit.create({
    subjectKind: 'station',
    subjectId: wanted.stationId ?? 1,
    limitClass: 'wave',
    createdAt: now,
    updatedAt: now,
  })
  const version = await LimitVersion.create({
    limitId: limit.id,
    number: 1,
    validFrom: now,
    condition,
    priority: wanted.priority ?? 'high',
    steps: { steps: wanted.steps, remindEverySeconds: wanted.remindEverySeconds ?? null },
    note: '',
    toCheck: 'Moorings at berths 3 to 6',
    isPublished: false,
    reason: 'test',
  })
  await limit.update({ currentVersionId: version.id })
  return version
}

/** With its first message and the stored times of its steps, as the transaction that raises it leaves them. */
export async function raiseAlert(
  { clock }: WithClock,
  version: LimitVersion,
  { isExercise = false, title = null as string | null } = {},
): Promise<Alert> {
  const now = clock.now()
  const alert = await Alert.create({
    limitId: version.limitId,
    limitVersionId: version.id,
    state: 'unacknowledgedActive',
    priority: version.priority,
    crossedAt: now,
    raisedAt: now,
    announcedAt: now,
    windowEndsAt: now,
    revision: 1,
    value: 2.61,
    valueSd: 0.14,
    extremeValue: 2.61,
    isExercise,
  })
  await tell({ clock }, alert, 'alert', title)
  const { steps, remindEverySeconds } = version.steps
  for (const [step, { afterSeconds }] of steps.entries()) {
    const isAtOnce = step === 0 && afterSeconds === 0
    const later = (seconds: number) => new Date(now.getTime() + seconds * 1000)
    await Escalation.create({
      alertId: alert.id,
      step,
      dueAt: later(afterSeconds),
      sentAt: isAtOnce ? now : null,
      nextReminderAt: isAtOnce && remindEverySeconds !== null ? later(remindEverySeconds) : null,
    })
  }
  return alert
}

export async function tell(
  { clock }: WithClock,
  alert: Alert,
  kind: 'alert' | 'allClear',
  title: string | null = null,
): Promise<Message> {
  const now = clock.now()
  const content = messageContentOf({
    kind,
    alertId: alert.id,
    isExercise: alert.isExercise,
    isDemonstration: false,
    portName: 'Harbour',
    timeZone: 'Etc/UTC',
    caution: 'Figures support and never replace judgement.',
    subjectName: 'Outer Ledge',
    title,
    condition,
    priority: alert.priority,
    toCheck: 'Moorings at berths 3 to 6',
    value: alert.value,
    valueSd: alert.valueSd,
    windowEndsAt: now.getTime(),
    crossedAt: alert.crossedAt.getTime(),
    clearedAt: null,
    sea: null,
    isCaughtUp: false,
    handling: '',
  })
  return Message.create({
    kind,
    alertId: alert.id,
    step: kind === 'alert' ? 0 : null,
    subject: subjectLineOf(kind, content),
    text: messageTextOf(kind, content),
    content,
    isExercise: alert.isExercise,
    createdAt: now,
  })
}
