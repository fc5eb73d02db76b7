/** Who of some lists gets an e-mail now: pure, so that hours, absences and deputies can be tried at any moment. */
import { isWithin } from '../../../shared/alerts/timeSpan.ts'
import type { Priority, TimeSpan } from '../../../shared/schemas/limit.ts'

export interface Member {
  personId: number
  hours: TimeSpan['hours']
  priorities: Priority[]
}

export interface Reachable {
  id: number
  name: string
  email: string | null
  isDisabled: boolean
  hours: TimeSpan['hours']
  isAbsent: boolean
  deputyId: number | null
}

export interface Asked {
  members: Member[]
  people: Map<number, Reachable>
  priority: Priority
  /** Ms since 1970 UTC. */
  at: number
  timeZone: string
}

export interface Chosen {
  /** In the order of the lists, each person and each address once. */
  recipients: { personId: number; address: string; standsInFor: string[] }[]
  /** Who was meant and cannot be reached, nor a deputy. */
  unreached: string[]
}

const longestChain = 3

const holds = (hours: TimeSpan['hours'], { at, timeZone }: Asked): boolean =>
  isWithin(hours && { hours, season: null }, at, timeZone)

/** The person, or the first deputy in turn who is there. */
function standIn(first: Reachable, asked: Asked): Reachable | null {
  let person: Reachable | undefined = first
  for (let turn = 0; person && turn <= longestChain; turn += 1) {
    if (person.email && !person.isDisabled && !person.isAbsent && holds(person.hours, asked)) return person
    person = person.deputyId === null ? undefined : asked.people.get(person.deputyId)
  }
  return null
}

export function chooseRecipients(asked: Asked): Chosen {
  const byAddress = new Map<string, Chosen['recipients'][number]>()
  const unreached = new Set<string>()
  for (const { personId, hours, priorities } of asked.members) {
    if (!priorities.includes(asked.priority) || !holds(hours, asked)) continue
    const meant = asked.people.get(personId)
    if (!meant) continue
    const person = standIn(meant, asked)
    if (!person?.email) {
      unreached.add(meant.name)
      continue
    }
    const key = person.email.toLowerCase()
    const recipient = byAddress.get(key) ?? { personId: person.id, address: person.email, standsInFor: [] }
    byAddress.set(key, recipient)
    if (person.id !== meant.id && !recipient.standsInFor.includes(meant.name)) recipient.standsInFor.push(meant.name)
  }
  return { recipients: [...byAddress.values()], unreached: [...unreached] }
}
