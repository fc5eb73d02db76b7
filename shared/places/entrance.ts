/** What the sea does at an entrance: across and along the channel's axis, to a vessel on each course. */
import { crossSea } from '../hazards/crossSea.ts'
import type { CrossSea } from '../hazards/crossSea.ts'
import type { Figure } from '../hazards/figure.ts'
import { headOrFollowing, seaSides } from '../hazards/sides.ts'
import { radiansFromEast, threeDigits } from '../directions.ts'
import type { OutlookContent, SystemAtPlace } from '../schemas/placeOutlook.ts'
import type { EntranceSettings } from '../schemas/placeSettings.ts'
import { graded } from './flags.ts'
import type { Grounds } from './flags.ts'
import { heightHere } from './heightHere.ts'
import { systemRows } from './seaHere.ts'
import type { SeaHere } from './seaHere.ts'

export type KindOutlook = Pick<OutlookContent, 'figures' | 'courses' | 'rip' | 'basin' | 'longWaves' | 'remarks'> & {
  systems: SystemAtPlace[]
}

export const nothingElse = { courses: [], rip: null, basin: [], longWaves: null, remarks: [] }

export function entranceOutlook(settings: EntranceSettings, carried: SeaHere, grounds: Grounds): KindOutlook {
  const { here } = carried
  const sea = crossSea(here, radiansFromEast(settings.channelAxis))
  const courses = settings.courses.map(({ name, bearing }) => {
    const course = radiansFromEast(bearing)
    const { systems, words, setsTo } = seaSides(here.systems, sea.parts, course)
    return {
      ...{ name, bearing, words, setsTo },
      meets: headOrFollowing(here.systems, sea.parts, course),
      systems: systems.map(({ key, name: system, words: side }) => ({ key, name: system, words: side })),
    }
  })
  const [first] = courses
  const words = first?.words ? `${first.words}, ${first.name.toLowerCase()} ${threeDigits(first.bearing)} T` : null
  const across: Figure = sea.across.value === null ? sea.across : { ...sea.across, words }
  return {
    ...nothingElse,
    figures: [
      graded('crossSea', across, grounds),
      graded('alongSea', sea.along, grounds),
      graded('placeHeight', heightHere(carried), grounds),
    ],
    courses,
    systems: withParts(systemRows(carried), sea),
  }
}

function withParts(rows: SystemAtPlace[], { parts }: CrossSea): SystemAtPlace[] {
  const shares = (part: CrossSea['parts'][number] | undefined) =>
    part
      ? {
          ...{ across: part.across, along: part.along, acrossShare: part.acrossShare, alongShare: part.alongShare },
          spreadFrom: part.spreadFrom,
        }
      : {}
  const known = rows.map((row) => ({ ...row, ...shares(parts.find(({ key }) => key === row.key)) }))
  const rest = parts.filter(({ key }) => key === null)
  return [
    ...known,
    ...rest.map((part) => ({
      ...{ key: null, name: part.name, height: part.height, heightSd: null, period: null },
      ...{ toward: null, towardSd: null, spread: null, heightHere: part.height, towardHere: null, notCarried: null },
      ...{ across: null, along: null, acrossShare: null, alongShare: null, spreadFrom: null },
      ...shares(part),
    })),
  ]
}
