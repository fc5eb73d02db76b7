/** Bulletins as they are shown: an issue from its frozen content, a draft from what it would be if it went out now. */
import { chosenFigures } from '../../../shared/bulletins/figureKey.ts'
import type { BulletinContent, BulletinView, PublicBulletin } from '../../../shared/schemas/bulletin.ts'
import type { Parts } from '../../config/parts.ts'
import { Bulletin, DistributionList, Person } from '../../models/index.ts'
import { select } from '../../models/sql.ts'
import { countReached } from '../messages.ts'
import type { BulletinOffice } from './office.ts'

/** What an issue would say now. */
export function contentOf(
  { draft, figures }: Pick<Bulletin, 'draft' | 'figures'>,
  office: BulletinOffice,
  issue: { number: string | null; issuedAt: Date | null; replaces: string | null },
): BulletinContent {
  return {
    ...{ marker: draft.marker, audience: draft.audience, headline: draft.headline, meaning: draft.meaning },
    ...{ validFrom: draft.validFrom, validUntil: draft.validUntil, nextIssueAt: draft.nextIssueAt },
    ...{ portName: office.portName, timeZone: office.timeZone, cautions: office.cautions },
    ...{ isExercise: draft.isExercise, isDemonstration: office.isDemonstration, cancelled: null },
    ...{ number: issue.number, issuedAt: issue.issuedAt?.toISOString() ?? null, replaces: issue.replaces },
    figures: chosenFigures(figures, draft.chosen),
  }
}

const withCancellation = (content: BulletinContent, { cancelledAt, cancelReason }: Bulletin): BulletinContent => ({
  ...content,
  cancelled: cancelledAt === null ? null : { at: cancelledAt.toISOString(), reason: cancelReason ?? '' },
})

type PresentParts = Pick<Parts, 'clock' | 'sequelize'>

interface Around {
  numbers: Map<number, string>
  people: Map<number, string>
  lists: Map<number, string>
  deliveries: Map<number, { accepted: number; notOut: number }>
}

export async function presentBulletins(
  parts: PresentParts,
  office: BulletinOffice,
  rows: Bulletin[],
): Promise<BulletinView[]> {
  const around = await aroundOf(parts, rows)
  return Promise.all(rows.map((row) => presentOne(parts, office, row, around)))
}

async function aroundOf({ sequelize }: PresentParts, rows: Bulletin[]): Promise<Around> {
  const ids = rows.map(({ id }) => id)
  const people = rows.flatMap(({ authorId, consentById }) => [authorId, ...(consentById === null ? [] : [consentById])])
  const [replaced, named, lists] = await Promise.all([
    Bulletin.findAll({ where: { id: rows.flatMap(({ replacesId }) => replacesId ?? []) } }),
    Person.findAll({ where: { id: people }, attributes: ['id', 'name'] }),
    DistributionList.findAll({ where: { id: rows.flatMap(({ draft }) => draft.listIds) } }),
  ])
  return {
    numbers: new Map(replaced.flatMap(({ id, number }) => (number === null ? [] : [[id, number]]))),
    people: new Map(named.map(({ id, name }) => [id, name])),
    lists: new Map(lists.map(({ id, name }) => [id, name])),
    deliveries: ids.length === 0 ? new Map() : await deliveriesOf(sequelize, ids),
  }
}

async function deliveriesOf(sequelize: Parts['sequelize'], ids: number[]): Promise<Around['deliveries']> {
  const rows = await select<{ bulletinId: number; accepted: number; others: number }>(
    sequelize,
    `SELECT m.bulletinId, CAST(SUM(d.state IN ('accepted', 'unknown')) AS SIGNED) AS accepted,
            CAST(SUM(d.state NOT IN ('accepted', 'unknown')) AS SIGNED) AS others
     FROM messages m JOIN deliveries d ON d.messageId = m.id
     WHERE m.bulletinId IN (:ids) GROUP BY m.bulletinId`,
    { ids },
  )
  return new Map(rows.map(({ bulletinId, accepted, others }) => [bulletinId, { accepted, notOut: others }]))
}

async function presentOne(
  parts: PresentParts,
  office: BulletinOffice,
  row: Bulletin,
  { numbers, people, lists, deliveries }: Around,
): Promise<BulletinView> {
  const replaces = row.replacesId === null ? null : (numbers.get(row.replacesId) ?? null)
  const isDraft = row.status === 'draft'
  const content = row.content ?? contentOf(row, office, { number: null, issuedAt: null, replaces })
  const named = (id: number) => ({ id, name: people.get(id) ?? `Person ${id}` })
  return {
    ...withCancellation(content, row),
    ...{ id: row.id, version: row.version, chainId: row.chainId ?? row.id, status: row.status },
    draft: isDraft ? row.draft : null,
    frozen: row.status === 'draft' ? row.figures : [],
    asksSecondPerson: office.asksSecondPerson,
    frozenAt: row.frozenAt?.toISOString() ?? null,
    author: named(row.authorId),
    consentBy: row.consentById === null ? null : named(row.consentById),
    aloneReason: row.aloneReason,
    reach: {
      lists: row.draft.listIds.map((id) => ({ id, name: lists.get(id) ?? `List ${id}` })),
      people: row.people ?? (await reachOf(parts, office, row)),
    },
    deliveries: deliveries.get(row.id) ?? { accepted: 0, notOut: 0 },
  }
}

/** A warning goes to those too who take high and urgent ones alone. */
export const priorityOfBulletin = ({ draft }: Pick<Bulletin, 'draft'>): 'medium' | 'high' =>
  draft.marker === 'warning' ? 'high' : 'medium'

const reachOf = (parts: PresentParts, office: BulletinOffice, row: Bulletin): Promise<number> =>
  countReached(parts, { listIds: row.draft.listIds, priority: priorityOfBulletin(row), timeZone: office.timeZone })

/** Without anybody's name, list or e-mail. Drafts are not for the public. */
export function publicOf(row: Bulletin): PublicBulletin[] {
  if (row.status === 'draft' || row.content === null) return []
  return [{ ...withCancellation(row.content, row), id: row.id, status: row.status }]
}
