/**
 * Alerts for machines: what an OASIS CAP 1.2 message says (OASIS Standard, 1 July 2010), as plain values. Each event in
 * an alert's life that outsiders must hear of is one message; they are chained by references. Pure.
 */
import type { AlertEventKind } from '../schemas/alert.ts'
import type { Priority } from '../schemas/limit.ts'

export interface CapFacts {
  alertId: number
  isExercise: boolean
  isDemonstration: boolean
  priority: Priority
  portName: string
  /** `Total height, Outer Ledge`. */
  title: string
  words: string
  toCheck: string
  caution: string
  subjectName: string
  subjectCode: string
  /** Degrees; GeoJSON order does not apply here. */
  latitude: number
  longitude: number
  /** Rings of longitude and latitude (GeoJSON); null: a circle about the station stands for it. */
  ring: [longitude: number, latitude: number][] | null
  sender: string
  /** Of the alert's page. */
  web: string
  /** ms since 1970 UTC. */
  crossedAt: number
  events: CapEvent[]
}

export interface CapEvent {
  id: number
  kind: AlertEventKind
  at: number
  /** With its unit and ±. */
  value: string
  /** SI, for `parameter`. */
  number: number | null
}

export interface CapMessage {
  identifier: string
  sender: string
  sent: string
  status: 'Actual' | 'Exercise' | 'Test'
  msgType: 'Alert' | 'Update' | 'Cancel'
  scope: 'Public'
  note: string | null
  references: string | null
  incidents: string
  info: {
    language: string
    category: ('Met' | 'Safety')[]
    event: string
    responseType: 'Monitor' | 'AllClear'
    urgency: 'Immediate' | 'Expected' | 'Future' | 'Past'
    severity: 'Extreme' | 'Severe' | 'Moderate' | 'Minor'
    certainty: 'Observed'
    effective: string
    onset: string
    expires: string
    senderName: string
    headline: string
    description: string
    instruction: string
    web: string
    parameter: { valueName: string; value: string }[]
    area: { areaDesc: string; polygon: string | null; circle: string | null }
  }
}

/** An alert that nobody renews is not taken for one that holds. */
const expiresAfterMs = 6 * 3_600_000
/** Kilometres about a station without an area of its own. */
const radiusKm = 1

const severities: Record<Priority, CapMessage['info']['severity']> = {
  urgent: 'Extreme',
  high: 'Severe',
  medium: 'Moderate',
  low: 'Minor',
}
const urgencies: Record<Priority, CapMessage['info']['urgency']> = {
  urgent: 'Immediate',
  high: 'Immediate',
  medium: 'Expected',
  low: 'Future',
}

const types: Partial<Record<AlertEventKind, CapMessage['msgType']>> = {
  raised: 'Alert',
  raisedAgain: 'Update',
  shelfExpired: 'Update',
  unshelved: 'Update',
  resumed: 'Update',
  returned: 'Update',
  priorityRose: 'Update',
  limitChanged: 'Update',
  cleared: 'Cancel',
  closed: 'Cancel',
}

/** `2026-01-14T05:40:00-00:00`: without fractions, UTC as −00:00 and never Z (CAP 1.2, 3.3.2). */
export const capTime = (ms: number): string => `${new Date(ms).toISOString().slice(0, 19)}-00:00`

/** Latitude before longitude, closed, at least four pairs: the other order than GeoJSON's. */
export const capPolygon = (ring: [longitude: number, latitude: number][]): string =>
  ring.map(([longitude, latitude]) => `${latitude.toFixed(5)},${longitude.toFixed(5)}`).join(' ')

/** No spaces, commas, < or & in it. */
const identifierOf = ({ alertId, subjectCode }: CapFacts, event: CapEvent): string =>
  `${subjectCode.replace(/[^A-Za-z0-9-]/g, '-')}-${alertId}-${event.id}`

/** The messages of one alert in their order. The first is an Alert, whatever event told it; a Cancel ends a chain, and what comes after begins another. */
export function capMessages(facts: CapFacts): CapMessage[] {
  const messages: CapMessage[] = []
  let chain: CapMessage[] = []
  for (const event of facts.events) {
    const type = types[event.kind]
    if (!type || (type === 'Cancel' && chain.length === 0)) continue
    const msgType = type === 'Cancel' ? type : chain.length === 0 ? 'Alert' : 'Update'
    const message = messageOf(facts, event, msgType, chain)
    messages.push(message)
    chain = msgType === 'Cancel' ? [] : [...chain, message]
  }
  return messages
}

function messageOf(facts: CapFacts, event: CapEvent, msgType: CapMessage['msgType'], chain: CapMessage[]): CapMessage {
  const isOver = msgType === 'Cancel'
  const sent = capTime(event.at)
  const marks = `${facts.isExercise ? 'EXERCISE ' : ''}${facts.isDemonstration ? 'DEMONSTRATION ' : ''}`
  const state = isOver ? 'no longer exceeded' : event.value
  const notice = facts.isExercise
    ? 'This is an exercise.'
    : facts.isDemonstration
      ? 'Demonstration data, invented coast.'
      : null
  return {
    identifier: identifierOf(facts, event),
    sender: facts.sender,
    sent,
    status: facts.isExercise ? 'Exercise' : facts.isDemonstration ? 'Test' : 'Actual',
    msgType,
    scope: 'Public',
    note: notice,
    references: chain.length === 0 ? null : chain.map((one) => `${one.sender},${one.identifier},${one.sent}`).join(' '),
    incidents: `alert-${facts.alertId}`,
    info: {
      language: 'en',
      category: ['Met', 'Safety'],
      event: facts.title.split(',')[0],
      responseType: isOver ? 'AllClear' : 'Monitor',
      urgency: isOver ? 'Past' : urgencies[facts.priority],
      severity: severities[facts.priority],
      certainty: 'Observed',
      effective: sent,
      onset: capTime(facts.crossedAt),
      expires: capTime(event.at + expiresAfterMs),
      senderName: facts.portName,
      headline: `${marks}${facts.title}: ${state}`.slice(0, 160),
      description: isOver
        ? `The limit is no longer exceeded at ${facts.subjectName}. That does not mean that the sea is safe. ${facts.words}`
        : `Measured at ${facts.subjectName}: ${event.value}. Limit: ${facts.words}`,
      instruction: [facts.toCheck, facts.caution].filter((text) => text !== '').join(' '),
      web: facts.web,
      parameter:
        event.number === null ? [] : [{ valueName: 'value_SI', value: String(Number(event.number.toPrecision(4))) }],
      area: {
        areaDesc: facts.subjectName,
        polygon: facts.ring && facts.ring.length >= 4 ? capPolygon(facts.ring) : null,
        circle:
          facts.ring && facts.ring.length >= 4
            ? null
            : `${facts.latitude.toFixed(5)},${facts.longitude.toFixed(5)} ${radiusKm}`,
      },
    },
  }
}
