import type { PlaceCautions } from '../../../shared/schemas/placeCautions.ts'

/** What of the installation's settings alerts and their e-mails speak of; read by whoever calls the service. */
export interface Office {
  portName: string
  /** IANA zone of the port: hours and seasons are kept in it. */
  timeZone: string
  /** Beside figures that people act on. */
  caution: string
  /** The same by quantity, for alerts at places. */
  placeCautions: PlaceCautions
  isDemonstration: boolean
  /** Urgent limits need a second person's consent, or a written reason of who is alone. */
  asksSecondPerson: boolean
  /** At most one watch. */
  longestShelfSeconds: number
}
