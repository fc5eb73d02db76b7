/**
 * Packs each day of the series when it has closed, and again when a late estimate fell into it. A stored watermark
 * says which days are due; what was touched since is kept until it is packed.
 */
import { schedule } from 'node-cron'
import type { Parts, RunningPart } from '../config/parts.ts'
import { readTimelines } from '../services/estimates.ts'
import { packPlaceDays, rebuildPlaceDay } from '../services/places.ts'
import { dayMs, dayOf, daysLacking, firstUnpackedDay, notePacked, rebuildSeriesDay } from '../services/series.ts'

/** Estimates of a day may come a little after it: it closes then. */
const closesAfterMs = 5 * 60_000
/** Days of a station that are packed again in one turn, where a newer version keeps more quantities than they have. */
const repackedATurn = 40

export interface KeepSeriesDays extends RunningPart {
  /** Resolves when every closed day is packed. */
  wake(): Promise<void>
}

export function startKeepSeriesDays(parts: Parts, { isUnscheduled = false } = {}): KeepSeriesDays {
  const { bus, clock, logger, sequelize } = parts
  const touched = new Map<string, { stationId: number; day: string }>()
  const touchedPlaces = new Map<string, { placeId: number; day: string }>()
  let running: Promise<void> | null = null

  /** The first day that is not closed yet. */
  const openDay = (): string => dayOf(clock.now().getTime() - closesAfterMs)

  async function packClosed(stationId: number): Promise<void> {
    const first = await firstUnpackedDay(parts, stationId)
    const open = openDay()
    if (first === null || first >= open) return
    for (let day = first; day < open; day = dayOf(Date.parse(day) + dayMs))
      await rebuildSeriesDay(parts, stationId, day)
    await notePacked(parts, stationId, open)
  }

  async function packAll(): Promise<void> {
    try {
      for (const { id } of await readTimelines(sequelize)) await packClosed(id)
      for (const [key, { stationId, day }] of [...touched]) {
        touched.delete(key)
        await rebuildSeriesDay(parts, stationId, day)
      }
      await packPlaceDays(parts, openDay())
      for (const [key, { placeId, day }] of [...touchedPlaces]) {
        touchedPlaces.delete(key)
        await rebuildPlaceDay(parts, placeId, day)
      }
      for (const { id } of await readTimelines(sequelize)) {
        for (const day of await daysLacking(parts, id, repackedATurn)) await rebuildSeriesDay(parts, id, day)
      }
    } catch (error) {
      logger.error({ error }, 'days of the series could not be packed now; they stay due')
    }
  }

  const wake = (): Promise<void> => (running ??= packAll().finally(() => (running = null)))

  const subscriptions = [
    bus.subscribe('estimate.saved', ({ stationId, windowEndsAt }) => {
      const day = dayOf(windowEndsAt)
      if (day < openDay()) touched.set(`${stationId}/${day}`, { stationId, day })
    }),
    bus.subscribe('outlook.saved', ({ placeId, windowEndsAt }) => {
      const day = dayOf(windowEndsAt)
      if (day < openDay()) touchedPlaces.set(`${placeId}/${day}`, { placeId, day })
    }),
  ]
  const task = isUnscheduled
    ? null
    : schedule('40 7,22,37,52 * * * *', () => void wake(), { timezone: 'UTC', name: 'keepSeriesDays' })

  if (!isUnscheduled) void wake()

  return {
    wake,
    async stop() {
      for (const unsubscribe of subscriptions) unsubscribe()
      await task?.destroy()
      await running
    },
  }
}
