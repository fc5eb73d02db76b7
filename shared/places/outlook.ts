/**
 * The outlook of a place: what the newest estimate of a station of its order means there. Pure; the same estimate, settings and tide give
 * the same outlook. Nothing in it says that a place is safe.
 */
import { arrival } from '../hazards/arrival.ts'
import { depthNow } from '../hazards/depths.ts'
import type { PathDepth } from '../hazards/depths.ts'
import { seaOf } from '../hazards/sea.ts'
import type { Uncertain } from '../hazards/uncertain.ts'
import type { QualityFlag } from '../schemas/estimate.ts'
import type { OutlookContent, TideNow } from '../schemas/placeOutlook.ts'
import type { PlaceFeed, PlaceSettingsContent } from '../schemas/placeSettings.ts'
import { beachOutlook } from './beach.ts'
import { berthOutlook } from './berth.ts'
import { breakwaterOutlook } from './breakwater.ts'
import { entranceOutlook } from './entrance.ts'
import type { KindOutlook } from './entrance.ts'
import { chooseFeed, refusalOf } from './feed.ts'
import type { Feed, FeedStation } from './feed.ts'
import type { Grounds } from './flags.ts'
import { withLocalFits } from './localFits.ts'
import { seaHere, widened, withHeightErrors } from './seaHere.ts'

export interface OutlookQuestion {
  /** The moment it is for, ms since 1970 UTC: live, the newest window's end. */
  at: number
  settings: PlaceSettingsContent
  /** In the order of the settings. */
  stations: FeedStation[]
  tide: TideNow
}

export interface Outlook {
  content: OutlookContent
  /** Null: none of the stations could feed the place. */
  feed: Feed | null
}

type Surroundings = { level: Uncertain; tide: TideNow }

/** ± of the length of a sounded path, share of it. */
const distanceSdShare = 0.02

export function outlookOf({ at, settings, stations, tide }: OutlookQuestion): Outlook {
  const { feed, refusals } = chooseFeed(stations, settings.kind, at)
  const around = { level: { value: tide.level, sd: tide.sd }, tide }
  const arrivals = arrivalsOf(settings, stations, around, at)
  if (!feed) {
    return { content: { ...nothingKnown(tide, arrivals), reason: `${refusals.join('; ')}.` }, feed: null }
  }
  const isSubstitute = feed.index > 0
  const substituteWords = isSubstitute
    ? `Not measured here. ${refusals.join('; ')}. ${feed.station.name}'s figures stand in: ${wideningWords(settings)} added to ±.`
    : null
  const computed = settings.kind === 'berth' ? atBerth(settings, feed, around) : withSea(settings, feed, around)
  if (computed === null) {
    const content = { ...nothingKnown(tide, arrivals), reason: `${feed.station.name} has no height.` }
    return { content, feed }
  }
  const { systems, sea, ...computedKind } = computed
  const fitted = withLocalFits(computedKind.figures, settings)
  const kind = { ...computedKind, figures: fitted.figures }
  const lead = kind.figures.find(({ quantity }) => quantity === settings.leadQuantity)
  return {
    content: {
      ...kind,
      ...{ reason: null, substituteWords, tide, arrivals, chances: fitted.chances },
      qualityFlag: lead?.qualityFlag ?? 4,
      sea: sea && { ...sea, systems },
    },
    feed,
  }
}

const wideningWords = ({ kind, substitute: { relativeSd, headingSd } }: PlaceSettingsContent): string =>
  `${Math.round(relativeSd * 100)} % of each height${kind === 'berth' ? '' : ` and ${headingSd}° of direction`}`

const nothingKnown = (tide: TideNow, arrivals: OutlookContent['arrivals']): Omit<OutlookContent, 'reason'> => ({
  ...{ qualityFlag: 9, substituteWords: null, tide, sea: null, arrivals },
  ...{ figures: [], courses: [], rip: null, chances: [], basin: [], longWaves: null, remarks: [] },
})

type Computed = KindOutlook & {
  sea: Pick<NonNullable<OutlookContent['sea']>, 'height' | 'heightSd' | 'peakPeriod'> | null
}

const groundsOf = (flag: QualityFlag, index: number, isCarriedInRange: boolean): Grounds => ({
  ...{ qualityFlag: flag, isSubstitute: index > 0, isCarriedInRange },
})

function atBerth(
  settings: Extract<PlaceSettingsContent, { kind: 'berth' }>,
  { estimate, index }: Feed,
  { level }: Surroundings,
): Computed {
  const { surgeHeight, surgeSpectrum = null, qualityFlag, resolved } = estimate
  // A refused direction leaves long waves standing, as it does the height.
  const grounds = groundsOf(resolved ? qualityFlag : 3, index, true)
  const relativeSd = index > 0 ? settings.substitute.relativeSd : 0
  const measured = { surgeHeight, surgeSpectrum, feed: settings.stationOrder[index], level, relativeSd }
  return { ...berthOutlook(settings, measured, grounds), sea: null }
}

function withSea(
  settings: Exclude<PlaceSettingsContent, { kind: 'berth' }>,
  { station, estimate, index }: Feed,
  { level, tide }: Surroundings,
): Computed | null {
  const measured = seaOf(estimate)
  if (!measured) return null
  const known = withHeightErrors(measured)
  const sea = index > 0 ? widened(known, settings.substitute) : known
  const bed =
    settings.kind === 'entrance' ? settings.bedLevel : settings.kind === 'breakwater' ? settings.toeBedLevel : null
  const feed: PlaceFeed = settings.stationOrder[index]
  const carried = seaHere(feed, sea, { here: bed && depthNow(level, bed), levelSd: level.sd })
  const grounds = groundsOf(estimate.qualityFlag, index, carried.inRange)
  const kind =
    settings.kind === 'entrance'
      ? entranceOutlook(settings, carried, grounds)
      : settings.kind === 'breakwater'
        ? breakwaterOutlook(settings, carried, level, grounds)
        : beachOutlook(settings, carried, { tide, at: estimate.windowEndsAt, stationName: station.name }, grounds)
  const { height, peakPeriod } = sea
  return {
    ...kind,
    remarks: [...carried.remarks, ...kind.remarks],
    sea: { height: height.value, heightSd: height.sd, peakPeriod: peakPeriod?.value ?? null },
  }
}

/** From every station with a path and a live direction, its leading system's groups. */
function arrivalsOf(
  settings: PlaceSettingsContent,
  stations: FeedStation[],
  { level }: Surroundings,
  at: number,
): OutlookContent['arrivals'] {
  if (settings.kind === 'berth') return []
  return settings.stationOrder.flatMap(({ stationId, path }, index) => {
    const station = stations[index]
    const estimate = station?.estimate
    if (path.length < 2 || !estimate || refusalOf(station, settings.kind, at) !== null) return []
    const [leading] = estimate.systems
    const depths: PathDepth[] = path.map(({ distance, bedLevel }) => ({ distance, depth: level.value - bedLevel }))
    const { groups, crests, distance } = arrival({
      path: depths,
      period: { value: leading.peakPeriod, sd: 0.03 * leading.peakPeriod },
      ...{ levelSd: level.sd, distanceSdShare },
      windowSeconds: (estimate.windowEndsAt - estimate.windowStartsAt) / 1000,
      ageSeconds: Math.max(0, (at - estimate.windowEndsAt) / 1000),
    })
    return [{ stationId, distance, groups, crests }]
  })
}
