/**
 * The demonstration's lists and limits. The numbers are invented for the invented coast and are nobody's rule: they lie so
 * that its own weather raises some of them, scenario `quiet` none, and a gale the urgent one.
 */
import type { Condition, LimitContent, Priority } from '../schemas/limit.ts'

export interface DemonstrationList {
  name: string
  purpose: string
  isSafety: boolean
  /** E-mails of the demonstration's people. */
  members: string[]
}

export const demonstrationLists: DemonstrationList[] = [
  {
    name: 'Harbour duty',
    purpose: 'Officers on watch, told at once.',
    isSafety: true,
    members: ['duty.a1@marrowick.example', 'duty.b2@marrowick.example'],
  },
  {
    name: 'Breakwater',
    purpose: 'Who closes the walk on the Long Arm.',
    isSafety: true,
    members: ['warden@marrowick.example'],
  },
  {
    name: 'Beach patrol',
    purpose: 'Who decides on the sand.',
    isSafety: true,
    members: ['patrol@marrowick.example'],
  },
]

export interface DemonstrationLimit {
  /** Null: Offing itself, or the place. */
  stationCode: string | null
  placeCode?: string
  /** Names of lists by step: minutes after the alert. */
  steps: { afterMinutes: number; lists: string[] }[]
  content: Omit<LimitContent, 'recipients'>
}

const minutes = 60

const condition = (comparisons: Condition['comparisons'], changes: Partial<Condition> = {}): Condition => ({
  comparisons,
  when: null,
  onDelaySeconds: 10 * minutes,
  offDelaySeconds: 30 * minutes,
  clearSigmas: 1,
  worstQuality: 3,
  latches: false,
  ...changes,
})

const above = (quantity: Condition['comparisons'][number]['quantity'], raise: number, clear: number): Condition['comparisons'][number] => ({ kind: 'above', quantity, raise, clear, riseOverSeconds: null }) // prettier-ignore

const content = (
  priority: Priority,
  judged: Condition,
  toCheck: string,
  changes: Partial<DemonstrationLimit['content']> = {},
): DemonstrationLimit['content'] => ({
  title: null,
  condition: judged,
  priority,
  schedule: null,
  note: 'Invented for the demonstration.',
  toCheck,
  reviewOn: null,
  isPublished: false,
  ...changes,
})

const dutyOnly = [{ afterMinutes: 0, lists: ['Harbour duty'] }]
const harbour = [
  { afterMinutes: 0, lists: ['Harbour duty'] },
  { afterMinutes: 16, lists: ['Breakwater'] },
]
const everybody = [
  { afterMinutes: 0, lists: ['Harbour duty', 'Breakwater'] },
  { afterMinutes: 8, lists: ['Beach patrol'] },
]

const rise: Condition['comparisons'][number] = {
  kind: 'above',
  quantity: 'significantWaveHeight',
  raise: 0.6,
  clear: 0.3,
  riseOverSeconds: 180 * minutes,
}
const fromSouthWest: Condition['comparisons'][number] = {
  kind: 'sector',
  quantity: 'swellFrom',
  from: 205,
  to: 275,
  deadBand: 10,
}

const waveLimits: DemonstrationLimit[] = [
  {
    stationCode: 'OL',
    steps: dutyOnly,
    content: content('low', condition([above('swellHeight', 1.35, 1.2)]), 'Which boats are out.'),
  },
  {
    stationCode: 'OL',
    steps: dutyOnly,
    content: content('medium', condition([rise], { onDelaySeconds: 20 * minutes }), 'The trend at the other stations.'),
  },
  {
    stationCode: 'FW',
    steps: harbour,
    content: content(
      'medium',
      condition([above('swellHeight', 1.3, 1.15), fromSouthWest]),
      'Entrance traffic of the next hours; small craft at the outer berths.',
      { title: 'Swell into the entrance', isPublished: true },
    ),
  },
  {
    stationCode: 'FW',
    steps: harbour,
    content: content(
      'high',
      condition([above('significantWaveHeight', 1.45, 1.25)]),
      'Pilot boarding; moorings at berths 3 to 6; the walk on the Long Arm.',
      { isPublished: true },
    ),
  },
  {
    stationCode: 'PB',
    steps: everybody,
    content: content(
      'urgent',
      condition([above('significantWaveHeight', 2.4, 2)], { onDelaySeconds: 0 }),
      'Close the walk and the bar; tell the patrol by telephone.',
      { title: 'Sea at the bar', isPublished: true },
    ),
  },
]

const beach = [{ afterMinutes: 0, lists: ['Harbour duty', 'Beach patrol'] }]

const placeLimits: DemonstrationLimit[] = [
  {
    ...{ stationCode: null, placeCode: 'EN', steps: harbour },
    content: content(
      'high',
      condition([above('crossSea', 1, 0.85)]),
      'Entrance traffic; pilots and tugs; small craft.',
    ),
  },
  {
    ...{ stationCode: null, placeCode: 'LA', steps: everybody },
    content: content(
      'urgent',
      condition([above('overtopping', 0.001, 0.0006)]),
      'The gate at the root of the walk; people on the walk; tell the warden by telephone.',
    ),
  },
  {
    ...{ stationCode: null, placeCode: 'B36', steps: dutyOnly },
    content: content(
      'medium',
      condition([above('longSwell', 0.08, 0.07)]),
      'Lines and fenders of the ships at berths 3 to 6.',
    ),
  },
  {
    ...{ stationCode: null, placeCode: 'PS', steps: beach },
    content: content(
      'high',
      condition([above('breakerHeight', 2.5, 2.2)]),
      'The flag; people in the water; the next low water.',
    ),
  },
  {
    ...{ stationCode: null, placeCode: 'OB', steps: beach },
    content: content('medium', condition([above('breakerHeight', 2, 1.7)]), 'The flag; people in the water.'),
  },
]

const healthLimits: DemonstrationLimit[] = [
  {
    stationCode: 'OL',
    steps: dutyOnly,
    content: content(
      'low',
      condition([{ kind: 'below', quantity: 'usableSensors', raise: 4, clear: 4 }], { clearSigmas: 0 }),
      'Which sensor is left out, and why.',
    ),
  },
  {
    stationCode: null,
    steps: [],
    content: content(
      'high',
      condition([above('mailQueueAge', 10 * minutes, 2 * minutes)], {
        onDelaySeconds: 0,
        offDelaySeconds: 0,
        clearSigmas: 0,
      }),
      'Tell people by telephone; look at Messages for what the mail server answers.',
    ),
  },
  {
    stationCode: null,
    steps: [],
    content: content(
      'medium',
      condition([{ kind: 'below', quantity: 'diskFree', raise: 0.05, clear: 0.08 }], { clearSigmas: 0 }),
      'Free room on the disk: without it no reading is stored.',
    ),
  },
]

/** Limits on stale data come with each station. */
export const demonstrationLimits: DemonstrationLimit[] = [...waveLimits, ...placeLimits, ...healthLimits]
