/** Scenarios of what goes wrong at an array or on its link; each begins at the anchor. */
import { moderateSea } from './moderateSea.ts'
import type { Scenario } from './scenario.ts'

export const clockSlip: Scenario = {
  name: 'clock-slip',
  summary: "from the anchor the clock of each array's third sensor slips, to 0.6 s after 20 min, and stays there",
  systems: moderateSea,
  faults: [{ kind: 'clock', sensorIndex: 2, offsetSeconds: 0.6, growsOverSeconds: 1200 }],
}

export const stuckSensor: Scenario = {
  name: 'stuck-sensor',
  summary: "from the anchor each array's second sensor repeats one value",
  systems: moderateSea,
  faults: [{ kind: 'stuck', sensorIndex: 1 }],
}

export const spikes: Scenario = {
  name: 'spikes',
  summary: 'from the anchor 0.4 % of all samples are thrown off by metres and 0.6 % are missing',
  systems: moderateSea,
  faults: [
    { kind: 'spikes', share: 0.004, size: 6 },
    { kind: 'gaps', share: 0.006 },
  ],
}

export const linkLoss: Scenario = {
  name: 'link-loss',
  summary:
    'two minutes after the anchor, then every 40 min, the link is down for 6 min; the station buffers and back-fills',
  systems: moderateSea,
  link: { everySeconds: 2400, firstAfterSeconds: 120, downSeconds: 360 },
}
