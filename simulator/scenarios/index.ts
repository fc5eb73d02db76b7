import { crossingSeas } from './crossingSeas.ts'
import { demonstration } from './demonstration.ts'
import { clockSlip, linkLoss, spikes, stuckSensor } from './faulty.ts'
import { longLowSwell } from './longLowSwell.ts'
import { quiet } from './quiet.ts'
import { swellArrival } from './swellArrival.ts'
import { veeringGale } from './veeringGale.ts'

/** All scenarios; the first is the one played when none is named. */
export const scenarios = [
  demonstration,
  quiet,
  swellArrival,
  veeringGale,
  crossingSeas,
  longLowSwell,
  clockSlip,
  stuckSensor,
  spikes,
  linkLoss,
]

export const scenarioNamed = (name: string) => scenarios.find((scenario) => scenario.name === name)
