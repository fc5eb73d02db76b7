import { withoutNote } from '../../../shared/watchLog/handOverSheet.ts'
import type { HandOverView, WatchView } from '../../../shared/schemas/watch.ts'
import { Person, Watch } from '../../models/index.ts'
import type { HandOver } from '../../models/index.ts'

export async function presentWatches(rows: Watch[]): Promise<WatchView[]> {
  const people = await Person.findAll({
    where: { id: rows.map(({ personId }) => personId) },
    attributes: ['id', 'name'],
  })
  const named = new Map(people.map(({ id, name }) => [id, name]))
  return rows.map(({ id, personId, name, startedAt, endedAt }) => ({
    ...{ id, name, person: { id: personId, name: named.get(personId) ?? `Person ${personId}` } },
    ...{ startedAt: startedAt.toISOString(), endedAt: endedAt?.toISOString() ?? null },
  }))
}

export async function presentHandOvers(rows: HandOver[]): Promise<HandOverView[]> {
  const ids = rows.flatMap(({ fromWatchId, toWatchId }) => [fromWatchId, toWatchId])
  const watches = await presentWatches(await Watch.findAll({ where: { id: ids } }))
  const watchOf = (id: number): WatchView[] => watches.filter((watch) => watch.id === id)
  return rows.flatMap((row) => {
    const [[from], [to]] = [watchOf(row.fromWatchId), watchOf(row.toWatchId)]
    if (!from || !to) return []
    return [
      {
        ...{ id: row.id, from, to, sheet: row.sheet, reason: row.reason },
        signedFromAt: row.signedFromAt?.toISOString() ?? null,
        signedToAt: row.signedToAt.toISOString(),
        owed: row.signedFromAt === null ? withoutNote(row.sheet) : [],
      },
    ]
  })
}
