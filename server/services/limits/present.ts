/** Limits as the API shows them. */
import { Op } from 'sequelize'
import { conditionWords, titleOf } from '../../../shared/alerts/describe.ts'
import {
  alertState,
  condition,
  limitContent,
  notJudgedReason,
  recipients,
  timeSpan,
} from '../../../shared/schemas/limit.ts'
import type {
  LimitVersionView,
  LimitView,
  PersonName,
  ShelfView,
  SubjectKind,
  SubjectView,
} from '../../../shared/schemas/limit.ts'
import type { Parts } from '../../config/parts.ts'
import type { Limit } from '../../models/index.ts'
import { Alert, LimitState, LimitVersion, Person, Place, Shelving, Station } from '../../models/index.ts'
import { fromJson } from './rows.ts'

export type NameOf = (personId: number | null) => PersonName | null

/** People by id, so that a list asks once. */
export async function namesOf(personIds: (number | null)[]): Promise<NameOf> {
  const ids = [...new Set(personIds.filter((id): id is number => id !== null))]
  const people = ids.length === 0 ? [] : await Person.findAll({ where: { id: ids }, attributes: ['id', 'name'] })
  const byId = new Map(people.map(({ id, name }) => [id, { id, name }]))
  return (personId) => (personId === null ? null : (byId.get(personId) ?? null))
}

export interface Subjects {
  viewOf(limit: Pick<Limit, 'subjectKind' | 'subjectId'>): SubjectView
  /** Wave limits are judged on windows: where these stopped for the station's stale limit, they are not judged. */
  isStale(
    limit: Pick<Limit, 'subjectKind' | 'subjectId' | 'limitClass'>,
    state: LimitState | undefined,
    now: Date,
  ): boolean
}

type OfSubject = Pick<Limit, 'subjectKind' | 'subjectId'>

export async function subjectsOf(limits: OfSubject[]): Promise<Subjects> {
  const idsOf = (wanted: SubjectKind): number[] => [
    ...new Set(
      limits.flatMap(({ subjectKind, subjectId }) => (subjectKind === wanted && subjectId ? [subjectId] : [])),
    ),
  ]
  const [stationIds, placeIds] = [idsOf('station'), idsOf('place')]
  const [stations, places, longest] = await Promise.all([
    stationIds.length === 0 ? [] : Station.findAll({ where: { id: stationIds } }),
    placeIds.length === 0 ? [] : Place.findAll({ where: { id: placeIds } }),
    placeIds.length === 0
      ? null
      : Station.max<number | null, Station>('staleAfterSeconds', { where: { retiredAt: null } }),
  ])
  const stationOf = ({ subjectKind, subjectId }: OfSubject) =>
    subjectKind === 'station' ? stations.find(({ id }) => id === subjectId) : undefined
  const placeOf = ({ subjectKind, subjectId }: OfSubject) =>
    subjectKind === 'place' ? places.find(({ id }) => id === subjectId) : undefined
  return {
    viewOf(limit) {
      const { subjectKind: kind, subjectId: id } = limit
      const named = stationOf(limit) ?? placeOf(limit)
      if (named) return { kind, id, name: named.name, code: named.code }
      const isSystem = kind === 'system'
      return { kind, id, name: isSystem ? 'Offing itself' : `${kind} ${id}`, code: isSystem ? 'SYSTEM' : '' }
    },
    isStale(limit, state, now) {
      const last = state?.lastWindowEndsAt ?? null
      // A place may be fed by any station: it is stale when the most patient of them would be.
      const staleAfter = stationOf(limit)?.staleAfterSeconds ?? (placeOf(limit) ? longest : null) ?? Infinity
      return limit.limitClass === 'wave' && last !== null && now.getTime() - last.getTime() > staleAfter * 1000
    },
  }
}

export function presentVersion(version: LimitVersion, nameOf: NameOf): LimitVersionView {
  const { title, priority, note, toCheck, reviewOn } = version
  const content = limitContent.parse({
    ...{ title, priority, note, toCheck, reviewOn, isPublished: Boolean(version.isPublished) },
    condition: condition.parse(fromJson(version.condition)),
    recipients: recipients.parse(fromJson(version.steps)),
    schedule: timeSpan.nullable().parse(fromJson(version.schedule)),
  })
  return {
    id: version.id,
    number: version.number,
    validFrom: version.validFrom.toISOString(),
    content,
    author: nameOf(version.authorId),
    reason: version.reason,
    consentBy: nameOf(version.consentById),
    aloneReason: version.aloneReason,
  }
}

export const presentShelf = (shelf: Shelving, nameOf: NameOf): ShelfView => ({
  id: shelf.id,
  startsAt: shelf.startsAt.toISOString(),
  endsAt: shelf.endsAt.toISOString(),
  reason: shelf.reason,
  by: nameOf(shelf.personId),
  secondPerson: nameOf(shelf.secondPersonId),
})

/** The newest shelf that nobody has ended and that has not run out, by limit. */
export async function shelvesInForce(
  { clock }: Pick<Parts, 'clock'>,
  limitIds: number[],
): Promise<Map<number, Shelving>> {
  const where = { limitId: limitIds, endedAt: null, endsAt: { [Op.gt]: clock.now() } }
  const rows = limitIds.length === 0 ? [] : await Shelving.findAll({ where, order: [['id', 'ASC']] })
  return new Map(rows.map((row) => [row.limitId, row]))
}

/** In the order in which they were given. */
export async function presentLimits(parts: Pick<Parts, 'clock'>, limits: Limit[]): Promise<LimitView[]> {
  const ids = limits.map(({ id }) => id)
  if (ids.length === 0) return []
  const [versions, states, shelves, alerts, subjects] = await Promise.all([
    LimitVersion.findAll({ where: { id: limits.flatMap(({ currentVersionId }) => currentVersionId ?? []) } }),
    LimitState.findAll({ where: { limitId: ids } }),
    shelvesInForce(parts, ids),
    Alert.findAll({ where: { limitId: ids, closedAt: null, isExercise: false }, attributes: ['id', 'limitId'] }),
    subjectsOf(limits),
  ])
  const nameOf = await namesOf([
    ...versions.flatMap(({ authorId, consentById }) => [authorId, consentById]),
    ...limits.map(({ outOfServiceById }) => outOfServiceById),
    ...[...shelves.values()].flatMap(({ personId, secondPersonId }) => [personId, secondPersonId]),
  ])
  return limits.flatMap((limit) => {
    const version = versions.find(({ id }) => id === limit.currentVersionId)
    const state = states.find(({ limitId }) => limitId === limit.id)
    if (!version || !state) return []
    const shelf = shelves.get(limit.id)
    const { outOfServiceAt, outOfServiceReason, outOfServiceById } = limit
    const subject = subjects.viewOf(limit)
    const judgedNot = outOfServiceAt ? 'outOfService' : (state.notJudged ?? (subjects.isStale(limit, state, parts.clock.now()) ? 'stale' : null)) // prettier-ignore
    const current = presentVersion(version, nameOf)
    const view: LimitView = {
      id: limit.id,
      version: limit.version,
      subject,
      limitClass: limit.limitClass,
      title: titleOf(current.content.title, current.content.condition, subject.name),
      words: conditionWords(current.content.condition),
      current,
      state: alertState.parse(state.state),
      stateSince: state.since.toISOString(),
      isActive: Boolean(state.isActive),
      pendingSince: state.isActive ? null : (state.pendingSince?.toISOString() ?? null),
      lastJudgedAt: state.lastWindowEndsAt?.toISOString() ?? null,
      notJudged: notJudgedReason.nullable().parse(judgedNot),
      value: state.value,
      valueSd: state.valueSd,
      shelf: shelf ? presentShelf(shelf, nameOf) : null,
      outOfService: outOfServiceAt && {
        since: outOfServiceAt.toISOString(),
        reason: outOfServiceReason ?? '',
        by: nameOf(outOfServiceById),
      },
      retiredAt: limit.retiredAt?.toISOString() ?? null,
      openAlertId: alerts.find(({ limitId }) => limitId === limit.id)?.id ?? null,
    }
    return [view]
  })
}
