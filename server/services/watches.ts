/** Who is on watch: taking over, handing over with a signed sheet, notes owed. */
import { Op } from 'sequelize'
import { HandOver, Watch } from '../models/index.ts'
import { presentHandOvers, presentWatches } from './watches/present.ts'
import type { HandOverView, WatchView } from '../../shared/schemas/watch.ts'

export { endWatch, startWatch } from './watches/begin.ts'
export { keepNotes, signHandOver, takeOverAtOnce, writeOwed } from './watches/handOver.ts'

/** What belongs to a watch now, but for the office's rota. */
export async function readWatchNow(): Promise<{
  watch: WatchView | null
  notes: Record<string, string>
  expected: string
  owed: HandOverView[]
  handOver: HandOverView | null
}> {
  const row = await Watch.findOne({ where: { endedAt: null } })
  const [watch] = row ? await presentWatches([row]) : []
  const [owed, began] = await Promise.all([
    HandOver.findAll({ where: { signedFromAt: null }, order: [['id', 'ASC']] }),
    row ? HandOver.findOne({ where: { toWatchId: row.id }, order: [['id', 'DESC']] }) : null,
  ])
  const [handOver] = began ? await presentHandOvers([began]) : []
  return {
    watch: watch ?? null,
    notes: row?.notes ?? {},
    expected: row?.expected ?? '',
    owed: await presentHandOvers(owed),
    handOver: handOver ?? null,
  }
}

const aPage = 40

/** Newest first; `before` is the last id of the page before. */
export async function listWatches(before: number | null): Promise<{ watches: WatchView[]; next: number | null }> {
  const where = before === null ? {} : { id: { [Op.lt]: before } }
  const rows = await Watch.findAll({ where, order: [['id', 'DESC']], limit: aPage + 1 })
  const page = rows.slice(0, aPage)
  return { watches: await presentWatches(page), next: rows.length > aPage ? (page.at(-1)?.id ?? null) : null }
}
