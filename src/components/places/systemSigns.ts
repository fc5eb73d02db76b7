/** Colour, line and title of a system at a place: the same as at its station. */
import { opposite } from '../../../shared/directions.ts'
import type { OutlookView, SystemAtPlace } from '../../../shared/schemas/placeOutlook.ts'
import { systemSign, systemTitle } from '../../../shared/waveSystemNames.ts'
import type { SystemSign } from '../../../shared/waveSystemNames.ts'

type Named = Parameters<typeof systemSign>[0]
type WithSea = Pick<OutlookView, 'sea'>

const namedOf = ({ sea }: WithSea): Named[] =>
  (sea?.systems ?? []).flatMap(({ key, name, toward }) =>
    key === null || toward === null || (name !== 'swell' && name !== 'wind sea')
      ? []
      : [{ key, name, from: opposite(toward) }],
  )
const ownOf = ({ key }: SystemAtPlace, all: readonly Named[]): Named | undefined => all.find((one) => one.key === key)

/** Energy of no system has no sign. */
export function signOf(system: SystemAtPlace, outlook: WithSea): SystemSign | null {
  const all = namedOf(outlook)
  const own = ownOf(system, all)
  return own ? systemSign(own, all) : null
}

/** `Swell`, `West swell`; energy of no system keeps its own words. */
export function titleOf(system: SystemAtPlace, outlook: WithSea): string {
  const all = namedOf(outlook)
  const own = ownOf(system, all)
  return own ? systemTitle(own, all) : system.name.charAt(0).toUpperCase() + system.name.slice(1)
}

export function systemInk(system: SystemAtPlace, outlook: WithSea): { color: string } {
  const sign = signOf(system, outlook)
  return { color: sign === null ? 'var(--of-ink)' : `var(--of-sys-${sign})` }
}
