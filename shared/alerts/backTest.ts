/**
 * What a condition would have done over stored figures: the same comparisons and delays as the live judgement, over
 * packed series. Pure; times are ms since 1970 UTC.
 */
import { opposite } from '../directions.ts'
import type { Comparison, Condition, QuantityKey } from '../schemas/limit.ts'
import { joinVerdicts, judgeComparison } from './compare.ts'
import type { Verdict } from './compare.ts'
import { atRest, follow } from './follow.ts'
import type { Track } from './follow.ts'
import { heightLeft, quantityOf } from './quantities.ts'
import type { PlaceQuantityKey } from '../schemas/placeQuantity.ts'
import { spanChecker } from './timeSpan.ts'

/** Quantities of the packed days: of stations by their columns, of places by their own names. */
export type StoredFigure =
  | PlaceQuantityKey | `${PlaceQuantityKey}Sd`
  | 'towardDegreesSd' | 'speedSd' | 'swellTowardDegreesSd' | 'swellSpeedSd' | 'windSeaTowardDegreesSd' | 'windSeaSpeedSd'
  | 'significantWaveHeight' | 'significantWaveHeightSd' | 'peakPeriod' | 'meanPeriod' | 'energyPeriod' | 'energyFlux'
  | 'surgeHeight' | 'height' | 'period' | 'towardDegrees' | 'speed' | 'swellHeight' | 'swellPeriod' | 'swellTowardDegrees'
  | 'swellSpeed' | 'windSeaHeight' | 'windSeaPeriod' | 'windSeaTowardDegrees' | 'windSeaSpeed' // prettier-ignore

const stored: Partial<Record<QuantityKey, StoredFigure>> = {
  significantWaveHeight: 'significantWaveHeight',
  peakPeriod: 'peakPeriod',
  meanPeriod: 'meanPeriod',
  energyPeriod: 'energyPeriod',
  energyFlux: 'energyFlux',
  surgeHeight: 'surgeHeight',
  leadingHeight: 'height',
  leadingPeriod: 'period',
  leadingFrom: 'towardDegrees',
  leadingSpeed: 'speed',
  swellHeight: 'swellHeight',
  swellPeriod: 'swellPeriod',
  swellFrom: 'swellTowardDegrees',
  swellSpeed: 'swellSpeed',
  windSeaHeight: 'windSeaHeight',
  windSeaPeriod: 'windSeaPeriod',
  windSeaFrom: 'windSeaTowardDegrees',
  windSeaSpeed: 'windSeaSpeed',
}

/** Null for quantities of which no series is kept: data health. */
export const storedFigureOf = (key: QuantityKey): StoredFigure | null => stored[key] ?? quantityOf(key).ofPlace ?? null

const storedErrors: Partial<Record<QuantityKey, StoredFigure>> = {
  leadingFrom: 'towardDegreesSd',
  leadingSpeed: 'speedSd',
  swellFrom: 'swellTowardDegreesSd',
  swellSpeed: 'swellSpeedSd',
  windSeaFrom: 'windSeaTowardDegreesSd',
  windSeaSpeed: 'windSeaSpeedSd',
}

/** Standard deviations that are kept beside the figure; null where none is, as live: of periods none is known. */
export function storedErrorOf(key: QuantityKey): StoredFigure | null {
  const { ofPlace } = quantityOf(key)
  return ofPlace ? `${ofPlace}Sd` : (storedErrors[key] ?? null)
}

const otherOf: Partial<Record<QuantityKey, StoredFigure>> = {
  swellHeight: 'windSeaHeight',
  windSeaHeight: 'swellHeight',
}

/** Every series that a condition needs. */
export function figuresNeeded(condition: Condition): StoredFigure[] {
  const isOfPlace = condition.comparisons.every(({ quantity }) => quantityOf(quantity).ofPlace !== undefined)
  const needed = new Set<StoredFigure>(isOfPlace ? [] : ['significantWaveHeight', 'significantWaveHeightSd'])
  for (const { quantity } of condition.comparisons) {
    const figures = [storedFigureOf(quantity), otherOf[quantity], storedErrorOf(quantity)]
    for (const figure of figures) if (figure) needed.add(figure)
  }
  return [...needed]
}

/** Windows of one even step, such as a packed day: slot n ends at `startsAt` + n × `stepMs`. */
export interface Stretch {
  startsAt: number
  stepMs: number
  /** Flags of the height as `flagOf` gives them; 0 where there was no window. */
  flags: Uint8Array
  /** NaN where there is none. Directions are toward, degrees true. */
  series: Partial<Record<StoredFigure, Float32Array>>
}

export interface Episode {
  raisedAt: number
  /** Null: still active at the end. */
  clearedAt: number | null
  /** Of what the first comparison compares; null for a bearing. */
  extreme: number | null
  extremeAt: number
}

export interface BackTest {
  episodes: Episode[]
  judgedMs: number
}

/** Looks at one stretch at a time, so that its series are looked up once. */
interface Judge {
  turnTo(stretch: Stretch): void
  ask(slot: number): Verdict
  /** What it compared last. */
  compared: number
}

/** The value of an earlier window, looked up by time in the stretches that were passed. */
type Earlier = (figure: StoredFigure, at: number) => number

/** How many times the relative error of the total height a quantity has, as the live reading has it; 0: not known. */
function relativeErrors(key: QuantityKey): number {
  if (key === 'energyFlux') return 2
  return key === 'significantWaveHeight' || isOfSystem(key) ? 1 : 0
}

const isOfSystem = (key: QuantityKey): boolean => /^(leading|swell|windSea)Height$/.test(key)
const empty: Float32Array = new Float32Array()
const valueIn = (series: Float32Array, slot: number): number => (slot < series.length ? series[slot] : NaN)

function judgeOf(comparison: Comparison, condition: Condition, earlier: Earlier): Judge {
  const key = comparison.quantity
  const figure = storedFigureOf(key)
  const other = otherOf[key]
  const { isCircular } = quantityOf(key)
  const errors = relativeErrors(key)
  const errorFigure = storedErrorOf(key)
  const hasBound = isOfSystem(key)
  const rise = comparison.kind === 'above' ? comparison.riseOverSeconds : null
  let stretch: Stretch | null = null
  let values: Float32Array = empty
  let others: Float32Array = empty
  let totals: Float32Array = empty
  let totalSds: Float32Array = empty
  let ownSds: Float32Array = empty

  function ask(slot: number): Verdict {
    let value = valueIn(values, slot)
    if (isCircular) value = opposite(value)
    const total = valueIn(totals, slot)
    const totalSd = valueIn(totalSds, slot)
    let sd = errorFigure ? valueIn(ownSds, slot) : errors === 0 ? NaN : (errors * value * totalSd) / total
    let atMost = NaN
    if (rise !== null && figure && stretch) {
      const then = stretch.startsAt + slot * stretch.stepMs - rise * 1000
      const before = earlier(figure, then)
      if (errorFigure) sd = Math.hypot(sd, earlier(errorFigure, then))
      else if (errors !== 0) sd = Math.hypot(sd, (errors * before * totalSd) / total)
      value -= before
    } else if (hasBound && Number.isNaN(value)) {
      atMost = heightLeft(total, valueIn(others, slot))
      sd = totalSd
    }
    judge.compared = value
    return judgeComparison(comparison, value, sd, atMost, condition.clearSigmas)
  }
  function turnTo(next: Stretch): void {
    const { series } = next
    stretch = next
    values = (figure && series[figure]) ?? empty
    others = (other && series[other]) ?? empty
    totals = series.significantWaveHeight ?? empty
    totalSds = series.significantWaveHeightSd ?? empty
    ownSds = (errorFigure && series[errorFigure]) ?? empty
  }
  const judge: Judge = { ask, turnTo, compared: NaN }
  return judge
}

function createEarlier(stretches: Stretch[]): Earlier {
  let index = 0
  return (figure, at) => {
    while (index > 0 && stretches[index].startsAt > at) index -= 1
    while (index + 1 < stretches.length && stretches[index + 1].startsAt <= at) index += 1
    const stretch = stretches[index]
    const slot = (at - stretch.startsAt) / stretch.stepMs
    const isThere = Number.isInteger(slot) && slot >= 0 && slot < stretch.flags.length && isUsable(stretch.flags[slot])
    return isThere ? (stretch.series[figure]?.[slot] ?? NaN) : NaN
  }
}

const isUsable = (flag: number): boolean => flag > 0 && flag < 4

/** Stretches rising in time. `from`: what ends before only counts as an earlier value. */
export function backTest(condition: Condition, stretches: Stretch[], from: number, timeZone: string): BackTest {
  const earlier = createEarlier(stretches)
  const judges = condition.comparisons.map((one) => judgeOf(one, condition, earlier))
  const isIn = spanChecker(condition.when, timeZone)
  const isCircular = condition.comparisons[0].kind === 'sector'
  const isBelow = condition.comparisons[0].kind === 'below'
  const worst = condition.worstQuality
  const episodes: Episode[] = []
  let open: Episode | null = null
  let judgedMs = 0
  let track: Track = atRest
  let isOwn = false
  for (const stretch of stretches) {
    const { startsAt, stepMs, flags } = stretch
    for (const judge of judges) judge.turnTo(stretch)
    for (let slot = 0; slot < flags.length; slot += 1) {
      const at = startsAt + slot * stepMs
      if (at < from || !isUsable(flags[slot]) || flags[slot] > worst) continue
      let verdict: Verdict = 'raise'
      // One that is clear clears them all.
      for (let n = 0; n < judges.length && verdict !== 'clear'; n += 1) {
        verdict = joinVerdicts(verdict, judges[n].ask(slot))
      }
      if (!isIn(at)) verdict = 'clear'
      if (verdict === 'unknown') continue
      judgedMs += stepMs
      if (verdict !== (track.isActive ? 'clear' : 'raise') && track.pendingSince === null) {
        // Nothing but the newest moment changes, so that a quiet year makes no objects.
        if (!isOwn) track = { ...track }
        isOwn = true
        track.lastKnownAt = at
      } else {
        track = follow(track, verdict, at, condition)
        isOwn = false
      }
      if (track.isActive && !open) {
        open = { raisedAt: at, clearedAt: null, extreme: null, extremeAt: at }
        episodes.push(open)
      }
      if (open && !isCircular) noteExtreme(open, judges[0].compared, at, isBelow)
      if (open && !track.isActive) {
        open.clearedAt = at
        open = null
      }
    }
  }
  return { episodes, judgedMs }
}

function noteExtreme(episode: Episode, value: number, at: number, isBelow: boolean): void {
  const isFurther = episode.extreme === null || (isBelow ? value < episode.extreme : value > episode.extreme)
  if (Number.isNaN(value) || !isFurther) return
  episode.extreme = value
  episode.extremeAt = at
}

/** The condition with its first comparison moved by so much (SI): raise and clear keep their distance. */
export function shifted(condition: Condition, by: number): Condition {
  const [first, ...rest] = condition.comparisons
  if (first.kind === 'sector') return condition
  return { ...condition, comparisons: [{ ...first, raise: first.raise + by, clear: first.clear + by }, ...rest] }
}
