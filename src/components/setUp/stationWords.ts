/** How a station's set-up is told in a line. Pure. */
import type { StationRecord } from '../../../shared/schemas/stationSetUp.ts'
import { dateUtc } from '../../../shared/times.ts'

/** `2 Oct 2026`. */
export const dayWords = (iso: string): string => dateUtc(Date.parse(iso)).split(' ').slice(1).join(' ')

export const stateWords: Record<StationRecord['state'], string> = {
  active: 'active',
  maintenance: 'in maintenance, its limits are suppressed',
  retired: 'retired',
}

export function deploymentWords({ deployment, comingDeployments, drafts }: StationRecord): string {
  const now = deployment
    ? `deployment ${deployment.number} in force since ${dayWords(deployment.validFrom)}`
    : 'no deployment in force'
  const coming = comingDeployments.map(({ number, validFrom }) => `, ${number} from ${dayWords(validFrom)}`).join('')
  return `${now}${coming}${drafts > 0 ? `, ${drafts === 1 ? 'a draft' : `${drafts} drafts`} open` : ''}`
}

export const keyWords = (count: number): string =>
  count === 0 ? 'no key' : count === 1 ? '1 key valid' : `${count} keys valid`

export const stationWords = (record: StationRecord): string =>
  `${record.code}, ${stateWords[record.state]}; ${deploymentWords(record)}`
