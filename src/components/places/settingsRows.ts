/** The settings of a place as rows of words, each value with its ± and where it comes from. Pure. */
import { threeDigits } from '../../../shared/directions.ts'
import { placeQuantityOf } from '../../../shared/places/quantities.ts'
import type { TimeSpan } from '../../../shared/schemas/limit.ts'
import type { PlaceView } from '../../../shared/schemas/place.ts'
import type { PlaceFeed, PlaceSettingsContent } from '../../../shared/schemas/placeSettings.ts'
import { decimals, metres, percent } from '../../../shared/units.ts'
import { feedNames, formNames, slopeWords } from './placeWords.ts'

export interface SettingsRow {
  name: string
  words: string
  source: string
}

interface Surveyed {
  value: number
  sd: number | null
  source: string
}
const row = (name: string, words: string, source = ''): SettingsRow => ({ name, words, source })
const sdWords = (sd: number | null, places: number): string =>
  sd === null ? ', ± not known' : ` ± ${decimals(sd, places)}`
const level = (name: string, { value, sd, source }: Surveyed): SettingsRow =>
  row(name, `${value >= 0 ? '+' : ''}${metres(value)} above datum${sdWords(sd, 1)}`, source)
const slope = (name: string, { value, sd, source }: Surveyed): SettingsRow =>
  row(name, `${slopeWords(value)} (${decimals(value, 3)}${sdWords(sd, 3)})`, source)
const bearing = (degrees: number): string => `${threeDigits(degrees)} T`

const dayNames = ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun']
export function spanWords({ hours, season }: TimeSpan): string {
  const days = hours && hours.days.length < 7 ? ` on ${hours.days.map((day) => dayNames[day - 1]).join(', ')}` : ''
  const clock = hours ? `${hours.from} to ${hours.to} local${days}` : 'round the clock'
  return season ? `${clock}, ${season.from} to ${season.to} (month-day)` : clock
}

function transferWords({ transfer, validSector, path }: PlaceFeed): string {
  const how =
    transfer.kind === 'asMeasured'
      ? 'taken over as measured'
      : transfer.kind === 'parallelContours'
        ? `carried over straight parallel contours, shore facing ${bearing(transfer.shoreNormal)}`
        : `carried by a table (${transfer.origin}), ± ${percent(transfer.relativeSd)}`
  const sector = validSector ? `; meant for waves from ${bearing(validSector.from)} to ${bearing(validSector.to)}` : ''
  const last = path.at(-1)
  return `${how}${sector}${last ? `; sounded path of ${decimals(last.distance / 1000, 2)} km` : ''}`
}

function feedRows(place: PlaceView, content: PlaceSettingsContent): SettingsRow[] {
  const names = feedNames(place)
  const rank = (n: number): string => (n === 0 ? 'Fed by' : `Substitute ${n}`)
  if (content.kind === 'berth')
    return content.stationOrder.map(({ factor, isInBasin }, n) =>
      row(
        rank(n),
        `${names[n]}, ${isInBasin ? 'a gauge in the basin' : `outside, times ${decimals(factor.value, 2)}${sdWords(factor.sd, 2)}`}`,
        factor.source,
      ),
    )
  return content.stationOrder.map((feed, n) => row(rank(n), `${names[n]}, ${transferWords(feed)}`))
}

export function settingsRows(place: PlaceView): SettingsRow[] {
  const { content } = place.settings
  const { relativeSd, headingSd } = content.substitute
  const tideName = place.stations.find(({ id }) => id === content.tideStationId)?.name
  return [
    ...kindRows(content),
    ...feedRows(place, content),
    row(
      'A substitute adds to ±',
      `${percent(relativeSd)} of each height${content.kind === 'berth' ? '' : `, ${headingSd}° of direction`}`,
    ),
    row('Level of the water', tideName ? `tide or level at ${tideName}` : 'no tide or level is read'),
    level('Where neither is known', content.nominalLevel),
    row('Leads', placeQuantityOf(content.leadQuantity).name),
    row('Flags and closures by', place.team ?? 'operators alone'),
  ]
}

function kindRows(content: PlaceSettingsContent): SettingsRow[] {
  switch (content.kind) {
    case 'entrance':
      return [
        row('Channel axis', `inbound ${bearing(content.channelAxis)}`),
        row('Least width', metres(content.width, 0)),
        level('Bed', content.bedLevel),
        ...content.courses.map(({ name, bearing: course }) => row('Course', `${name} ${bearing(course)}`)),
      ]
    case 'breakwater':
      return [
        row('Form', formNames[content.form]),
        ...(content.seawardSlope ? [slope('Seaward slope', content.seawardSlope)] : []),
        level('Crest', content.crestLevel),
        level('Bed at the toe', content.toeBedLevel),
        row(
          'Roughness',
          `${decimals(content.roughness.value, 2)}${sdWords(content.roughness.sd, 2)}`,
          content.roughness.source,
        ),
        row('Seaward face looks toward', bearing(content.seawardNormal)),
        row('Public access', content.hasPublicAccess ? content.accessNote || 'yes' : 'none'),
      ]
    case 'berth':
      return [
        row(
          'Basin',
          `${decimals(content.basin.length, 0)} m by ${decimals(content.basin.width, 0)} m, mouth: ${content.basin.mouth}`,
        ),
        level('Bed of the basin', content.basin.bedLevel),
        ...content.meanings.map(({ craft, from, words }) => row(craft, `from ${metres(from, 2)} on: ${words}`)),
      ]
    case 'beach':
      return [
        row('Faces', bearing(content.shoreNormal)),
        slope('Foreshore', content.foreshoreSlope),
        slope('Nearshore', content.nearshoreSlope),
        row('Of', content.sediment),
        row('Patrol', content.patrol.length === 0 ? 'never' : content.patrol.map(spanWords).join('; ')),
        row(
          'Reasons for a rip caution count',
          `height from ${metres(content.ripReasons.height)}, within ${content.ripReasons.incidence}° of square, spread up to ${content.ripReasons.spread}°, within ${decimals(content.ripReasons.lowWaterHours, 1)} h of low water`,
        ),
      ]
  }
}
