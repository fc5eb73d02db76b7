/** The one registry of what a limit may be set on: name, unit, sense, and how it is read. SI units inside. */
import { opposite } from '../directions.ts'
import type { LimitClass, QuantityKey, QuantityView, SubjectKind } from '../schemas/limit.ts'
import { placeQuantityKey } from '../schemas/placeQuantity.ts'
import type { PlaceQuantityKey } from '../schemas/placeQuantity.ts'
import { placeQuantityOf } from '../places/quantities.ts'
import type { QualityFlag } from '../schemas/estimate.ts'
import { flagOf, nothing } from './figures.ts'
import type { HealthFigures, Reading, SeaFigures, Seen, SystemFigures } from './figures.ts'

export interface Quantity extends QuantityView {
  /** Needs a resolved vector: fails with it. */
  isOfVector: boolean
  /** A figure of a place's outlook, with a flag of its own. */
  ofPlace?: PlaceQuantityKey
  read(seen: Seen): Reading
}

type SystemKey = 'leading' | 'swell' | 'windSea'
const systemNames: Record<SystemKey, string> = { leading: 'leading system', swell: 'swell', windSea: 'wind sea' }
const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1)
const orNaN = (value: number | null): number => value ?? NaN

interface Form {
  unit: string
  toUnit?: number
  decimals: number
  least: number
  most: number
}
const form = (unit: string, decimals: number, least: number, most: number, toUnit = 1): Form => ({ unit, decimals, least, most, toUnit }) // prettier-ignore
const heightForm = form('m', 2, 0.01, 25)
const periodForm = form('s', 1, 1, 60)
const bearingForm = form('°', 0, 0, 360)
const speedForm = form('m/s', 1, 0.1, 40)

function wave(
  key: QuantityKey,
  name: string,
  shape: Form,
  read: (sea: SeaFigures) => Reading,
  { isOfVector = false, isCircular = false } = {},
): Quantity {
  return {
    ...{ key, name, limitClass: 'wave', subjects: ['station'], toUnit: 1, ...shape, isCircular, isOfVector },
    hasRise: !isCircular,
    read: ({ sea }) => (sea ? read(sea) : nothing),
  }
}

function health(
  key: QuantityKey & keyof HealthFigures,
  name: string,
  shape: Form,
  subjects: SubjectKind[] = ['station'],
): Quantity {
  const limitClass: LimitClass = 'dataHealth'
  return {
    ...{ key, name, limitClass, subjects, toUnit: 1, ...shape, isCircular: false, isOfVector: false, hasRise: false },
    read: ({ health: seen }) => ({ value: orNaN(seen?.[key] ?? null), sd: 0, atMost: NaN }),
  }
}

/** Of a place's outlook, where the sea's own flags do not count but the figure's. */
function ofPlace(key: PlaceQuantityKey): Quantity {
  const { name, unit, toUnit, decimals, least, most } = placeQuantityOf(key)
  return {
    ...{ key, name, limitClass: 'wave', subjects: ['place'], unit, toUnit, decimals, least, most },
    ...{ isCircular: false, isOfVector: false, hasRise: true, ofPlace: key },
    read({ sea }) {
      const figure = sea?.atPlace?.figures[key]
      return figure ? plain(figure.value, figure.sd) : nothing
    },
  }
}

const plain = (value: number | null, sd: number | null = null): Reading => ({
  value: orNaN(value),
  sd: orNaN(sd),
  atMost: NaN,
})

/** Relative sampling error of the total height: the best that is known for the height of a system of the same record. */
const relativeSd = (sea: SeaFigures): number => orNaN(sea.significantWaveHeightSd) / orNaN(sea.significantWaveHeight)

/**
 * A system that was not found has at most what the total energy leaves: heights add as squares, for a sum of separate
 * systems has the sum of their variances (H = 4 sqrt(m0); Longuet-Higgins 1952).
 */
export function heightLeft(total: number, others: number): number {
  return Math.sqrt(Math.max(0, total ** 2 - (Number.isNaN(others) ? 0 : others) ** 2))
}

function heightOf(sea: SeaFigures, system: SystemKey): Reading {
  const { height } = sea[system]
  const total = orNaN(sea.significantWaveHeight)
  if (height !== null) return { value: height, sd: height * relativeSd(sea), atMost: NaN }
  const other = system === 'swell' ? sea.windSea.height : system === 'windSea' ? sea.swell.height : null
  return { value: NaN, sd: total * relativeSd(sea), atMost: heightLeft(total, orNaN(other)) }
}

function ofSystem(system: SystemKey): Quantity[] {
  const name = systemNames[system]
  const vector = { isOfVector: true }
  const figures = (sea: SeaFigures): SystemFigures => sea[system]
  const named = (what: string) => `${capital(name)} ${what}`
  return [
    // Not of the vector: without one it is known to be no higher than the whole sea.
    wave(`${system}Height`, named('height'), heightForm, (sea) => heightOf(sea, system)),
    wave(`${system}Period`, named('period'), periodForm, (sea) => plain(figures(sea).period), vector),
    wave(
      `${system}From`,
      `${capital(name)} from`,
      bearingForm,
      (sea) => plain(figures(sea).toward === null ? null : opposite(figures(sea).toward ?? 0), figures(sea).towardSd),
      { ...vector, isCircular: true },
    ),
    wave(`${system}Speed`, named('speed'), speedForm, (sea) => plain(figures(sea).speed, figures(sea).speedSd), vector),
  ]
}

/** Energy goes with the square of the height, so its relative error is twice the height's. */
const fluxOf = (sea: SeaFigures): Reading => ({
  value: orNaN(sea.energyFlux),
  sd: 2 * relativeSd(sea) * orNaN(sea.energyFlux),
  atMost: NaN,
})

export const quantities: Quantity[] = [
  wave('significantWaveHeight', 'Total height', heightForm, (sea) =>
    plain(sea.significantWaveHeight, sea.significantWaveHeightSd),
  ),
  wave('peakPeriod', 'Peak period', periodForm, (sea) => plain(sea.peakPeriod)),
  wave('meanPeriod', 'Mean period', periodForm, (sea) => plain(sea.meanPeriod)),
  wave('energyPeriod', 'Energy period', periodForm, (sea) => plain(sea.energyPeriod)),
  wave('energyFlux', 'Energy flux', form('kW/m', 1, 10, 1e7, 1e-3), fluxOf),
  wave('surgeHeight', 'Surge height', heightForm, (sea) => plain(sea.surgeHeight)),
  ...ofSystem('leading'),
  ...ofSystem('swell'),
  ...ofSystem('windSea'),
  ...placeQuantityKey.options.map(ofPlace),
  health('dataAge', 'Data stale', form('min', 0, 60, 7 * 86_400, 1 / 60)),
  health('usableSensors', 'Usable sensors', form('', 0, 0, 64)),
  health('clockOffset', 'Clock difference', form('s', 1, 0.1, 86_400)),
  health('arrayDisagreement', 'Array disagreement', form('', 0, 0, 1)),
  health('mailQueueAge', 'Mail waiting', form('min', 0, 60, 7 * 86_400, 1 / 60), ['system']),
  health('diskFree', 'Disk free', form('%', 0, 0, 1, 100), ['system']),
]

const byKey = new Map(quantities.map((quantity) => [quantity.key, quantity]))

/** Throws on a key that is not registered, which the schemas do not let through. */
export function quantityOf(key: QuantityKey): Quantity {
  const quantity = byKey.get(key)
  if (!quantity) throw new RangeError(`no quantity ${key}`)
  return quantity
}

/** The flag that decides whether a quantity of these figures is judged; 9 where a place has no such figure. */
export const flagOfQuantity = (
  { ofPlace, isOfVector }: Pick<Quantity, 'ofPlace' | 'isOfVector'>,
  sea: SeaFigures,
): QualityFlag => (ofPlace ? (sea.atPlace?.figures[ofPlace]?.qualityFlag ?? 9) : flagOf(sea, isOfVector))

export const presentQuantity = ({ read: _, isOfVector: __, ofPlace: ___, ...view }: Quantity): QuantityView => view
