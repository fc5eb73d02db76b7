/** A draft over the packed days of the last week, month or year, with other values beside it. */
import { backTest, figuresNeeded, shifted, storedErrorOf, storedFigureOf } from '../../../shared/alerts/backTest.ts'
import type { BackTest, StoredFigure, Stretch } from '../../../shared/alerts/backTest.ts'
import { flagOf } from '../../../shared/alerts/figures.ts'
import { opposite } from '../../../shared/directions.ts'
import { risesOf } from '../../../shared/alerts/condition.ts'
import { thresholdsOf } from '../../../shared/alerts/describe.ts'
import type { BackTestQuestion, BackTestView } from '../../../shared/schemas/backTest.ts'
import type { Condition, SubjectKind } from '../../../shared/schemas/limit.ts'
import type { Parts } from '../../config/parts.ts'
import { Place, Station } from '../../models/index.ts'
import { unpackDay } from '../../models/seriesDayPayload.ts'
import { select } from '../../models/sql.ts'
import { outlooksBetween } from '../alerts/placeFigures.ts'
import { seaBetween } from '../alerts/seaFigures.ts'
import type { SeaWindow } from '../alerts/seaFigures.ts'
import { invalidInput, notFound } from '../problems.ts'

const dayMs = 86_400_000
const minuteMs = 60_000

interface DayRow {
  day: string
  quantity: string
  stepSeconds: number
  payload: Buffer
}

/** Of whom the series are: a station by itself, a place by its outlooks. */
export interface SeriesSubject {
  subjectKind: 'station' | 'place'
  subjectId: number
}

/** Where the flags of the height itself are kept, beside its error. Of a place each figure has its own. */
const flagSeries = 'significantWaveHeightSd'

/** The packed days of these figures from a moment on, rising in time. */
export async function packedStretches(
  { sequelize }: Pick<Parts, 'sequelize'>,
  { subjectKind, subjectId }: SeriesSubject,
  figures: StoredFigure[],
  from: number,
  to: number,
): Promise<Stretch[]> {
  const rows = await select<DayRow>(
    sequelize,
    `SELECT DATE_FORMAT(day, '%Y-%m-%d') AS day, quantity, stepSeconds, payload FROM seriesDays
     WHERE subjectKind = :subjectKind AND subjectId = :subjectId AND quantity IN (:figures) AND day BETWEEN :first AND :last`,
    { subjectKind, subjectId, figures, first: isoDay(from), last: isoDay(to) },
  )
  const days = new Map<string, Stretch>()
  for (const { day, quantity, stepSeconds, payload } of rows) {
    const stretch = days.get(day) ?? {
      startsAt: Date.parse(`${day}T00:00:00Z`),
      stepMs: stepSeconds * 1000,
      flags: new Uint8Array(),
      series: {},
    }
    days.set(day, stretch)
    const { values, flags } = unpackDay(payload)
    const figure = figures.find((name) => name === quantity)
    if (figure) stretch.series[figure] = values
    const isLeading = subjectKind === 'station' ? quantity === flagSeries : quantity === figures[0]
    if (isLeading || stretch.flags.length === 0) stretch.flags = flags
  }
  return [...days.values()].sort((a, b) => a.startsAt - b.startsAt)
}

const isoDay = (ms: number): string => new Date(ms).toISOString().slice(0, 10)

/** One window of what is not packed yet. */
interface FreshWindow {
  windowEndsAt: number
  flag: number
  values: Partial<Record<string, number | null>>
}

function ofStation({ windowEndsAt, sea }: SeaWindow): FreshWindow {
  const of = (name: 'swell' | 'windSea') => ({
    [`${name}Height`]: sea[name].height,
    [`${name}Period`]: sea[name].period,
    [`${name}TowardDegrees`]: sea[name].toward,
    [`${name}TowardDegreesSd`]: sea[name].towardSd,
    [`${name}Speed`]: sea[name].speed,
    [`${name}SpeedSd`]: sea[name].speedSd,
  })
  const { height, period, toward, towardSd, speed, speedSd } = sea.leading
  const { significantWaveHeight, significantWaveHeightSd, peakPeriod, meanPeriod, energyPeriod, energyFlux } = sea
  const leading = { height, period, towardDegrees: toward, towardDegreesSd: towardSd, speed, speedSd }
  const all = { significantWaveHeight, significantWaveHeightSd, peakPeriod, meanPeriod, energyPeriod, energyFlux }
  const values = { ...all, surgeHeight: sea.surgeHeight, ...leading, ...of('swell'), ...of('windSea') }
  return { windowEndsAt, flag: flagOf(sea, false), values }
}

/** Days that are not packed yet come from the estimates or outlooks themselves. */
function stretchOf(windows: FreshWindow[], startsAt: number, figures: StoredFigure[]): Stretch {
  const steps = windows.slice(1).map(({ windowEndsAt }, n) => windowEndsAt - windows[n].windowEndsAt)
  const stepMs = Math.min(...steps, steps.length === 0 ? minuteMs : 60 * minuteMs)
  const length = Math.ceil(dayMs / stepMs)
  const series: Stretch['series'] = {}
  for (const figure of figures) series[figure] = new Float32Array(length).fill(NaN)
  const stretch: Stretch = { startsAt, stepMs, flags: new Uint8Array(length), series }
  for (const { windowEndsAt, flag, values } of windows) {
    const slot = Math.floor((windowEndsAt - startsAt) / stepMs)
    if (slot < 0 || slot >= length) continue
    stretch.flags[slot] = flag
    for (const figure of figures) {
      const value = values[figure]
      const kept = series[figure]
      if (kept && typeof value === 'number') kept[slot] = value
    }
  }
  return stretch
}

/** Packed days, and whatever days of the span are not packed. */
async function stretchesOf(parts: Parts, subject: SeriesSubject, figures: StoredFigure[], from: number, to: number) {
  const packed = await packedStretches(parts, subject, figures, from, to)
  const known = new Set(packed.map(({ startsAt }) => startsAt))
  const missing: number[] = []
  for (let start = Math.floor(from / dayMs) * dayMs; start <= to; start += dayMs)
    if (!known.has(start)) missing.push(start)
  const fresh: Stretch[] = []
  for (const start of missing) {
    const windows = await freshWindows(parts, subject, figures, start - 1, Math.min(to, start + dayMs - 1))
    if (windows.length > 0) fresh.push(stretchOf(windows, start, figures))
  }
  return [...packed, ...fresh].sort((a, b) => a.startsAt - b.startsAt)
}

async function freshWindows(
  { sequelize }: Parts,
  { subjectKind, subjectId }: SeriesSubject,
  figures: StoredFigure[],
  from: number,
  to: number,
): Promise<FreshWindow[]> {
  if (subjectKind === 'station') return (await seaBetween(sequelize, subjectId, from, to)).map(ofStation)
  const windows = await outlooksBetween(sequelize, subjectId, from, to)
  return windows.map(({ windowEndsAt, figures: told }) => {
    const known = Object.entries(told).flatMap(([name, figure]) => (figure ? [[name, figure.value], [`${name}Sd`, figure.sd]] : [])) // prettier-ignore
    const [first] = figures
    const leading = Object.entries(told).find(([name]) => name === first)?.[1]
    return { windowEndsAt, flag: leading?.qualityFlag ?? 9, values: Object.fromEntries(known) }
  })
}

const pointsWanted = 480

/** Least and most of the first figure by step, for a drawing; and the gaps of more than an hour. */
function drawn(stretches: Stretch[], condition: Condition, from: number, to: number) {
  const figure = storedFigureOf(condition.comparisons[0].quantity)
  const isBearing = condition.comparisons[0].kind === 'sector'
  const stepMs = Math.max(minuteMs, Math.ceil((to - from) / pointsWanted / minuteMs) * minuteMs)
  const steps = new Map<number, { least: number; most: number }>()
  const gaps: { from: string; to: string }[] = []
  let lastAt = from
  let missingMs = 0
  for (const { startsAt, stepMs: slotMs, flags, series } of stretches) {
    const values = figure ? series[figure] : undefined
    // A day that was packed before the quantity was kept tells as little of it as one without windows.
    if (!values) continue
    for (let slot = 0; slot < flags.length; slot += 1) {
      const at = startsAt + slot * slotMs
      if (at < from || at > to || flags[slot] === 0 || flags[slot] > 3) continue
      if (at - lastAt > 2 * slotMs) {
        missingMs += at - lastAt
        if (at - lastAt > 60 * minuteMs) gaps.push(gap(lastAt, at))
      }
      lastAt = at
      const stored = values[slot] ?? NaN
      if (Number.isNaN(stored)) continue
      const value = isBearing ? opposite(stored) : stored
      const step = Math.floor(at / stepMs) * stepMs
      const known = steps.get(step)
      steps.set(step, { least: Math.min(known?.least ?? value, value), most: Math.max(known?.most ?? value, value) })
    }
  }
  if (to - lastAt > 60 * minuteMs) {
    gaps.push(gap(lastAt, to))
    missingMs += to - lastAt
  }
  const points = [...steps].map(([at, extremes]) => ({ at: new Date(at).toISOString(), ...extremes }))
  return { stepSeconds: stepMs / 1000, points, gaps: gaps.slice(-200), missingSeconds: missingMs / 1000 }
}

const gap = (from: number, to: number) => ({ from: new Date(from).toISOString(), to: new Date(to).toISOString() })

function presentRun(condition: Condition, { episodes }: BackTest, from: number, to: number): BackTestView['draft'] {
  const lasted = episodes.map(({ raisedAt, clearedAt }) => ((clearedAt ?? to) - raisedAt) / 1000)
  return {
    ...thresholdsOf(condition),
    count: episodes.length,
    activeSeconds: lasted.reduce((sum, seconds) => sum + seconds, 0),
    aWeek: episodes.length / ((to - from) / (7 * dayMs)),
    episodes: episodes.map(({ raisedAt, clearedAt, extreme, extremeAt }, n) => ({
      raisedAt: new Date(raisedAt).toISOString(),
      clearedAt: clearedAt === null ? null : new Date(clearedAt).toISOString(),
      seconds: lasted[n],
      extreme,
      extremeAt: new Date(extremeAt).toISOString(),
    })),
  }
}

export async function askBackTest(parts: Parts, timeZone: string, question: BackTestQuestion): Promise<BackTestView> {
  const { condition, days, shifts, subjectId, subjectKind } = question
  const quantity = condition.comparisons[0].quantity
  if (condition.comparisons.some((one) => storedFigureOf(one.quantity) === null)) {
    throw invalidInput([{ path: 'condition.comparisons', message: 'no series is kept of data health' }])
  }
  const subject = await subjectOf(subjectKind, subjectId)
  const to = parts.clock.now().getTime()
  const from = to - days * dayMs
  const longestRise = Math.max(0, ...risesOf(condition)) * 1000
  const stretches = await stretchesOf(parts, subject, figuresNeeded(condition), from - longestRise, to)
  const runOf = (one: Condition) => backTest(one, stretches, from, timeZone)
  const draft = runOf(condition)
  return {
    from: new Date(from).toISOString(),
    to: new Date(to).toISOString(),
    quantity,
    judgedSeconds: draft.judgedMs / 1000,
    isInvented: await isInvented(parts, subject, from),
    ...lacking(stretches, condition),
    draft: presentRun(condition, draft, from, to),
    others: shifts.map((by) => {
      const other = shifted(condition, by)
      return presentRun(other, runOf(other), from, to)
    }),
    ...drawn(stretches, condition, from, to),
  }
}

/** Throws the 404. */
async function subjectOf(subjectKind: SubjectKind, subjectId: number): Promise<SeriesSubject> {
  if (subjectKind === 'system') throw notFound('series of the system', subjectId)
  const row = subjectKind === 'station' ? await Station.findByPk(subjectId) : await Place.findByPk(subjectId)
  if (!row) throw notFound(subjectKind, subjectId)
  return { subjectKind, subjectId }
}

/** Of a place: of any station, for outlooks follow them. */
async function isInvented(
  { sequelize }: Parts,
  { subjectKind, subjectId }: SeriesSubject,
  from: number,
): Promise<boolean> {
  const which = subjectKind === 'station' ? 'stationId = :subjectId AND' : ''
  const [invented] = await select<{ found: number }>(
    sequelize,
    `SELECT EXISTS (SELECT 1 FROM estimates WHERE ${which} runId = 0 AND windowEndsAt > :from
       AND origin = 'demonstration' LIMIT 1) AS found`,
    { subjectId, from: new Date(from) },
  )
  return Boolean(invented?.found)
}

/** Days that were packed before the first quantity, or its ±, was kept. */
function lacking(stretches: Stretch[], { comparisons: [{ quantity }] }: Condition) {
  const [figure, error] = [storedFigureOf(quantity), storedErrorOf(quantity)]
  const without = (name: StoredFigure | null): number =>
    name === null ? 0 : stretches.filter(({ series }) => series[name] === undefined).length
  return { daysWithoutFigure: without(figure), daysWithoutError: without(error) }
}
