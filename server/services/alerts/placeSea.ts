/** Outlooks of a place as its limits look at them: the figures there, with the sea of the estimate behind them. */
import { promisify } from 'node:util'
import { inflateRaw } from 'node:zlib'
import type { Sequelize } from 'sequelize'
import type { SeaAtPlace, SeaFigures, SystemFigures } from '../../../shared/alerts/figures.ts'
import { outlookContent } from '../../../shared/schemas/placeOutlook.ts'
import { select } from '../../models/sql.ts'
import { outlooksBetween } from './placeFigures.ts'
import type { PlaceWindow } from './placeFigures.ts'
import { seaAt } from './seaFigures.ts'
import type { SeaWindow } from './seaFigures.ts'

const inflate = promisify(inflateRaw)

interface SourceRow {
  windowEndsAt: Date
  stationId: number | null
  stationName: string | null
  payload: Buffer | null
}

const noSystem: SystemFigures = { height: null, period: null, toward: null, towardSd: null, speed: null, speedSd: null }
/** None of the stations could feed the place. */
const noSea: SeaFigures = {
  ...{ resolved: false, reason: null, qualityFlag: 9, significantWaveHeight: null, significantWaveHeightSd: null },
  ...{ peakPeriod: null, meanPeriod: null, energyPeriod: null, energyFlux: null, surgeHeight: null },
  ...{ leading: noSystem, swell: noSystem, windSea: noSystem },
}

/** Words are read where people may be told of the window: of a long row of old ones they are left out. */
const mostWithWords = 20

async function wordsOf(
  payload: Buffer | null,
): Promise<Pick<SeaAtPlace, 'substituteWords'> & { of: Map<string, string> }> {
  if (!payload) return { substituteWords: null, of: new Map() }
  const { figures, substituteWords } = outlookContent.parse(JSON.parse((await inflate(payload)).toString('utf8')))
  const of = new Map(
    figures.flatMap(({ quantity, figure }) => (figure.words === null ? [] : [[quantity, figure.words]])),
  )
  return { substituteWords, of }
}

async function sourcesOf(
  sequelize: Sequelize,
  placeId: number,
  windows: PlaceWindow[],
): Promise<Map<number, SourceRow>> {
  const hasWords = windows.length <= mostWithWords
  const keys = windows.map(({ windowEndsAt, revision }) => [new Date(windowEndsAt), revision])
  const rows = await select<SourceRow>(
    sequelize,
    `SELECT o.windowEndsAt, o.stationId, s.name AS stationName, ${hasWords ? 'o.payload' : 'NULL AS payload'}
     FROM outlooks o LEFT JOIN stations s ON s.id = o.stationId
     WHERE o.placeId = :placeId AND (o.windowEndsAt, o.revision) IN (:keys)`,
    { placeId, keys },
  )
  return new Map(rows.map((row) => [row.windowEndsAt.getTime(), row]))
}

async function presentWindows(sequelize: Sequelize, placeId: number, windows: PlaceWindow[]): Promise<SeaWindow[]> {
  if (windows.length === 0) return []
  const sources = await sourcesOf(sequelize, placeId, windows)
  const ends = new Map<number, number[]>()
  for (const { windowEndsAt } of windows) {
    const stationId = sources.get(windowEndsAt)?.stationId ?? null
    if (stationId !== null) ends.set(stationId, [...(ends.get(stationId) ?? []), windowEndsAt])
  }
  const seas = new Map<number, SeaFigures>()
  for (const [stationId, wanted] of ends) {
    for (const [at, sea] of await seaAt(sequelize, stationId, wanted)) seas.set(at, sea)
  }
  return Promise.all(
    windows.map(async ({ windowEndsAt, revision, figures }) => {
      const source = sources.get(windowEndsAt)
      const { of, substituteWords } = await wordsOf(source?.payload ?? null)
      const worded: SeaAtPlace['figures'] = {}
      for (const [quantity, figure] of Object.entries(figures)) {
        Object.assign(worded, { [quantity]: { ...figure, words: of.get(quantity) ?? null } })
      }
      const atPlace = { figures: worded, stationName: source?.stationName ?? null, substituteWords }
      const sea = seas.get(windowEndsAt) ?? noSea
      return { windowEndsAt, revision, origin: 'live', sea: { ...sea, atPlace } }
    }),
  )
}

/** Windows that end after `from` and not after `to`, rising in time. */
export async function placeSeaBetween(
  sequelize: Sequelize,
  placeId: number,
  from: number,
  to: number,
  most: number,
): Promise<SeaWindow[]> {
  const windows = await outlooksBetween(sequelize, placeId, from, to)
  return presentWindows(sequelize, placeId, windows.slice(0, most))
}

/** The windows that end at these very moments. */
export async function placeSeaAt(
  sequelize: Sequelize,
  placeId: number,
  ends: number[],
): Promise<Map<number, SeaFigures>> {
  const found = new Map<number, SeaFigures>()
  for (const end of ends) {
    const windows = await outlooksBetween(sequelize, placeId, end - 1, end)
    for (const { windowEndsAt, sea } of await presentWindows(sequelize, placeId, windows)) found.set(windowEndsAt, sea)
  }
  return found
}
