/** The demonstration's lists and limits, once: what people made of them since is theirs. */
import { demonstrationLimits, demonstrationLists } from '../../shared/demonstration/limits.ts'
import type { DemonstrationLimit } from '../../shared/demonstration/limits.ts'
import type { Recipients } from '../../shared/schemas/limit.ts'
import type { Parts } from '../config/parts.ts'
import { DistributionList, Limit, ListMember, Person, Station } from '../models/index.ts'
import { officeOf } from '../presenters/office.ts'
import { atDesk, noConsent } from '../services/alerts.ts'
import type { Desk } from '../services/alerts.ts'
import { seedDemonstrationPlaces } from './demonstrationPlaces.ts'
import { addLimit, staleContent } from '../services/limits.ts'
import type { NewLimit } from '../services/limits.ts'

const remindEverySeconds = 480

async function addLists({ now, transaction }: Desk): Promise<Map<string, number>> {
  const ids = new Map<string, number>()
  const times = { createdAt: new Date(now), updatedAt: new Date(now), retiredAt: null }
  for (const { members, ...list } of demonstrationLists) {
    const { id } = await DistributionList.create({ ...list, ...times }, { transaction })
    ids.set(list.name, id)
    const people = await Person.findAll({ where: { email: members }, order: [['id', 'ASC']], transaction })
    for (const [position, { id: personId }] of people.entries()) {
      const priorities: ('low' | 'medium' | 'high' | 'urgent')[] = ['low', 'medium', 'high', 'urgent']
      await ListMember.create({ listId: id, personId, position, hours: null, priorities }, { transaction })
    }
  }
  return ids
}

function recipientsOf(steps: DemonstrationLimit['steps'], lists: Map<string, number>): Recipients {
  return {
    steps: steps.map(({ afterMinutes, lists: names }) => ({
      afterSeconds: afterMinutes * 60,
      listIds: names.flatMap((name) => lists.get(name) ?? []),
    })),
    remindEverySeconds: steps.length === 0 ? null : remindEverySeconds,
  }
}

type Subject = Pick<NewLimit, 'subjectKind' | 'subjectId'>

const ofStation = (id: number): Subject => ({ subjectKind: 'station', subjectId: id })
const ofSystem: Subject = { subjectKind: 'system', subjectId: null }

const draftOf = (subject: Subject, content: NewLimit['content']): NewLimit => ({
  ...subject,
  content,
  reason: 'Demonstration',
  consent: noConsent,
})

export async function seedDemonstrationLimits(parts: Parts): Promise<void> {
  if ((await Limit.count()) > 0 || (await DistributionList.count()) > 0) return
  const stations = await Station.findAll({ order: [['id', 'ASC']] })
  await atDesk(parts, await officeOf(parts), async (desk) => {
    const lists = await addLists(desk)
    const places = await seedDemonstrationPlaces(desk, stations, lists)
    for (const { stationCode, placeCode, steps, content } of demonstrationLimits) {
      const station = stations.find(({ code }) => code === stationCode)
      const placeId = placeCode === undefined ? undefined : places.get(placeCode)
      const atPlace: Subject | null = placeId === undefined ? null : { subjectKind: 'place', subjectId: placeId }
      const subject = atPlace ?? (station ? ofStation(station.id) : ofSystem)
      await addLimit(desk, draftOf(subject, { ...content, recipients: recipientsOf(steps, lists) }), null)
    }
    const duty = recipientsOf([{ afterMinutes: 0, lists: ['Harbour duty'] }], lists)
    for (const { id, staleAfterSeconds } of stations) {
      await addLimit(desk, draftOf(ofStation(id), staleContent(staleAfterSeconds, duty)), null)
    }
  })
}
