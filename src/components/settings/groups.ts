/** Which settings stand on the page, in which words, and with what kind of field. Others are set where they are used. */

export interface SettingField {
  name: string
  label: string
  kind: 'text' | 'sentences' | 'zone' | 'number' | 'months' | 'time' | 'switch'
  help?: string
  unit?: string
}

export interface SettingSection {
  group: string
  title: string
  says: string
  fields: SettingField[]
}

const months = (name: string, label: string): SettingField => ({
  name,
  label,
  kind: 'months',
  unit: 'months',
  help: 'besides the current one; empty keeps all',
})

export const settingSections: readonly SettingSection[] = [
  {
    group: 'port',
    title: 'Port',
    says: 'name and zone, on every page and in every e-mail',
    fields: [
      { name: 'portName', label: 'Name of the port', kind: 'text' },
      { name: 'timeZone', label: 'Time zone', kind: 'zone', help: 'Hours, seasons and local times are kept in it.' },
    ],
  },
  {
    group: 'contact',
    title: 'Emergency contact',
    says: 'beside cautions in e-mails and on the receipt page',
    fields: [
      {
        name: 'emergencyLine',
        label: 'Line of words',
        kind: 'text',
        help: 'Such as “In an emergency call the harbour watch, channel 12”. Empty: nothing stands there.',
      },
    ],
  },
  {
    group: 'cautions',
    title: 'Cautions',
    says: 'the local wording beside figures that people act on; never that something is safe',
    fields: [
      { name: 'figures', label: 'Beside figures', kind: 'sentences' },
      { name: 'array', label: 'Of where an array sees', kind: 'sentences' },
      { name: 'traceSpeeds', label: 'Beside trace speeds', kind: 'sentences' },
    ],
  },
  {
    group: 'sender',
    title: 'Sender of e-mails',
    says: 'the name before the address; the address itself is in the configuration of the server',
    fields: [{ name: 'name', label: 'Name', kind: 'text', help: 'Empty: as the configuration has it.' }],
  },
  {
    group: 'bulletins',
    title: 'Bulletins',
    says: 'who looks at them before they go out, and who may read them',
    fields: [
      {
        name: 'asksSecondPerson',
        label: 'A second pair of eyes before issuing',
        kind: 'switch',
        help: 'Another operator consents at the desk; who is alone writes down why.',
      },
      {
        name: 'isPublic',
        label: 'Public page of bulletins',
        kind: 'switch',
        help: 'Anybody can read issued bulletins at /bulletin without signing in; no names stand there.',
      },
    ],
  },
  {
    group: 'people',
    title: 'Signing in',
    says: 'who needs more than a passphrase',
    fields: [
      {
        name: 'administratorsNeedSecondFactor',
        label: 'Administrators must use a second factor',
        kind: 'switch',
        help: 'Who has none is led to set it up at once and sees nothing else before.',
      },
    ],
  },
  {
    group: 'retention',
    title: 'Retention',
    says: 'how long rows are kept; older months go in the night and do not come back',
    fields: [
      months('readingBlocks', 'Readings'),
      months('estimates', 'Estimates'),
      months('estimateDetails', 'Details of estimates'),
      months('stationHealthHours', 'Health of links'),
    ],
  },
]

/** Groups that are set where they are used, and whose versions can be seen and put back here. */
export const otherGroups: readonly { group: string; title: string }[] = [
  { group: 'alerts', title: 'Rules of the watch' },
  { group: 'mail', title: 'Daily e-mail' },
  { group: 'watch', title: 'Lead station' },
  { group: 'coast', title: 'Plan of the coast' },
  { group: 'placeCautions', title: 'Cautions of places' },
  { group: 'beachFlags', title: 'Flags of beaches' },
  { group: 'notices', title: 'Notices' },
]
