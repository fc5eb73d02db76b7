/** What of the installation's settings bulletins speak of; read by whoever calls the service. */
export interface BulletinOffice {
  portName: string
  timeZone: string
  cautions: string[]
  isDemonstration: boolean
  /** A second pair of eyes before anything goes out, or a written reason of who is alone. */
  asksSecondPerson: boolean
}
