/** From the form to the contract, or its faults by path, such as `settings.crestLevel.value`. Pure. */
import { placeChange } from '../../../../shared/schemas/place.ts'
import type { PlaceChange } from '../../../../shared/schemas/place.ts'
import { placeSettingsContent } from '../../../../shared/schemas/placeSettings.ts'
import type { PlaceSettingsContent } from '../../../../shared/schemas/placeSettings.ts'
import { numberIn, spanOf } from '../../limits/limitForm.ts'
import { degreesIn } from '../../setUp/degrees.ts'
import { faultsOf } from '../../setUp/formFaults.ts'
import type { FeedForm, PlaceForm, SurveyedForm } from './placeForm.ts'

export type Described = Omit<PlaceChange, 'reason'>
const described = placeChange.omit({ reason: true })

/** Pairs of numbers, one pair a line; NaN where a line is none. */
export function pairsIn(text: string): [number, number][] {
  return text
    .split('\n')
    .map((line) => line.trim())
    .filter((line) => line !== '')
    .map((line) => {
      const cells = line.split(/[\s;]+/)
      return cells.length === 2 ? [numberIn(cells[0]), numberIn(cells[1])] : [NaN, NaN]
    })
}

export type DescribedResult = { fields: Described; faults: null } | { fields: null; faults: Record<string, string> }

export function describedOf(form: PlaceForm): DescribedResult {
  const area = pairsIn(form.area)
  const parsed = described.safeParse({
    ...{ code: form.code, shortName: form.shortName, name: form.name, team: form.team === '' ? null : form.team },
    latitude: degreesIn(form.latitude, 'latitude'),
    longitude: degreesIn(form.longitude, 'longitude'),
    areaPolygon: area.length === 0 ? null : area,
    ...{ position: numberIn(form.position), noticeListIds: form.noticeListIds },
  })
  if (parsed.success) return { fields: parsed.data, faults: null }
  const faults = faultsOf(parsed.error)
  const area0 = Object.keys(faults).find((path) => path.startsWith('areaPolygon'))
  if (area0) faults.areaPolygon = 'four corners at least, each a line of longitude and latitude, the last as the first'
  for (const axis of ['latitude', 'longitude'] as const)
    if (faults[axis] === 'must be a number') faults[axis] = 'degrees, such as 47.4865 or 47° 29.19′ N'
  return { fields: null, faults }
}

const surveyed = ({ value, sd, source }: SurveyedForm): unknown => ({
  ...{ value: numberIn(value), sd: sd.trim() === '' ? null : numberIn(sd), source },
})

function feedOf(form: FeedForm, isBerth: boolean): unknown {
  const { stationId } = form
  if (isBerth) return { stationId, factor: surveyed(form.factor), isInBasin: form.isInBasin }
  const transfer =
    form.transferKind === 'table'
      ? { ...(form.table ?? { kind: 'table' }), origin: form.tableOrigin, relativeSd: numberIn(form.tableSd) / 100 }
      : form.transferKind === 'parallelContours'
        ? { kind: 'parallelContours', shoreNormal: numberIn(form.shoreNormal) }
        : { kind: 'asMeasured' }
  return {
    ...{ stationId, transfer },
    path: pairsIn(form.path).map(([distance, bedLevel]) => ({ distance, bedLevel })),
    validSector: form.hasSector ? { from: numberIn(form.sectorFrom), to: numberIn(form.sectorTo) } : null,
  }
}

function ofKind(form: PlaceForm): object {
  switch (form.kind) {
    case 'entrance':
      return {
        ...{ channelAxis: numberIn(form.channelAxis), width: numberIn(form.width), bedLevel: surveyed(form.bed) },
        courses: form.courses.map(({ name, bearing }) => ({ name, bearing: numberIn(bearing) })),
      }
    case 'breakwater':
      return {
        ...{ form: form.form, crestLevel: surveyed(form.crest), toeBedLevel: surveyed(form.bed) },
        seawardSlope: form.form === 'vertical' ? null : surveyed(form.seawardSlope),
        ...{ roughness: surveyed(form.roughness), seawardNormal: numberIn(form.seawardNormal) },
        ...{ hasPublicAccess: form.hasPublicAccess, accessNote: form.accessNote },
      }
    case 'berth':
      return {
        basin: {
          ...{ length: numberIn(form.basinLength), width: numberIn(form.basinWidth) },
          ...{ bedLevel: surveyed(form.bed), mouth: form.mouth },
        },
        meanings: form.meanings.map(({ craft, from, words }) => ({ craft, from: numberIn(from), words })),
      }
    case 'beach':
      return {
        ...{ shoreNormal: numberIn(form.shoreNormal), foreshoreSlope: surveyed(form.foreshore) },
        ...{ nearshoreSlope: surveyed(form.nearshore), sediment: form.sediment },
        patrol: form.patrol.map((span) => spanOf(span) ?? { hours: null, season: null }),
        ripReasons: {
          ...{ height: numberIn(form.rip.height), incidence: numberIn(form.rip.incidence) },
          ...{ spread: numberIn(form.rip.spread), lowWaterHours: numberIn(form.rip.lowWaterHours) },
        },
      }
  }
}

export type SettingsResult =
  { settings: PlaceSettingsContent; faults: null } | { settings: null; faults: Record<string, string> }

/** Faults carry `settings.` before the path, as the server's do. */
export function settingsOf(form: PlaceForm): SettingsResult {
  const parsed = placeSettingsContent.safeParse({
    ...{ kind: form.kind, leadQuantity: form.leadQuantity, tideStationId: form.tideStationId },
    substitute: { relativeSd: numberIn(form.substituteShare) / 100, headingSd: numberIn(form.substituteHeading) },
    ...{ nominalLevel: surveyed(form.nominal), localFits: form.localFits },
    stationOrder: form.feeds.map((feed) => feedOf(feed, form.kind === 'berth')),
    ...ofKind(form),
  })
  if (parsed.success) return { settings: parsed.data, faults: null }
  const found = faultsOf(parsed.error, { 'substitute.relativeSd': 0.01 })
  const faults = Object.fromEntries(Object.entries(found).map(([path, words]) => [`settings.${path}`, words]))
  form.feeds.forEach((feed, n) => {
    const at = `settings.stationOrder.${n}`
    const isOf = (part: string): boolean => Object.keys(faults).some((path) => path.startsWith(`${at}.${part}`))
    if (isOf('path')) faults[`${at}.path`] = 'a line each of distance and bed level, beginning at 0 and rising'
    if (feed.transferKind === 'table' && feed.table === null) faults[`${at}.table`] = 'needs a file'
  })
  return { settings: null, faults }
}

/** Which parts of the settings differ, in the words of the contract's fields. */
export function settingsChanges(before: PlaceSettingsContent, after: PlaceSettingsContent): string[] {
  const [old, next] = [
    new Map<string, unknown>(Object.entries(before)),
    new Map<string, unknown>(Object.entries(after)),
  ]
  return [...next]
    .filter(([key, value]) => JSON.stringify(value) !== JSON.stringify(old.get(key)))
    .map(([key]) => partNames[key] ?? key)
}

const partNames: Record<string, string> = {
  ...{ stationOrder: 'stations and how their sea is carried here', substitute: 'what a substitute adds to ±' },
  ...{ tideStationId: 'whose tide counts', nominalLevel: 'nominal level', leadQuantity: 'the quantity that leads' },
  ...{ channelAxis: 'channel axis', width: 'least width', bedLevel: 'level of the bed', courses: 'courses' },
  ...{ crestLevel: 'level of the crest', form: 'form', seawardSlope: 'seaward slope', roughness: 'roughness' },
  ...{ toeBedLevel: 'bed at the toe', seawardNormal: 'where the face looks', hasPublicAccess: 'public access' },
  ...{ accessNote: 'note on access', basin: 'the basin', meanings: 'what it means at the berth' },
  ...{ shoreNormal: 'where the beach looks', foreshoreSlope: 'foreshore slope', nearshoreSlope: 'nearshore slope' },
  ...{ sediment: 'sediment', patrol: 'patrol', ripReasons: 'from when on reasons for a rip caution count' },
}
