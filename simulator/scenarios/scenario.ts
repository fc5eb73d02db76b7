/** What a scenario tells the sea: its wave systems outside as smooth functions of time, and what goes wrong. */
export interface OffshoreSystem {
  /** Seeds the system's own phases; unique within a scenario and the same at all times. */
  key: string
  name: 'swell' | 'wind sea'
  significantWaveHeight: number
  peakPeriod: number
  /** Degrees true the waves come from. */
  from: number
  /** √(2(1 − m1)), degrees. */
  directionalSpread: number
  peakedness: number
}

/** Faults begin at the scenario's anchor and act on the sensor at this place in each array's list. */
export type Fault =
  /** A value stamped t was taken at t + offset; the offset grows from nothing over `growsOverSeconds`. */
  | { kind: 'clock'; sensorIndex: number; offsetSeconds: number; growsOverSeconds: number }
  /** The reading at the anchor is repeated for ever. */
  | { kind: 'stuck'; sensorIndex: number }
  /** Single samples thrown off by up to `size` metres; `share` of a sensor's samples. All sensors. */
  | { kind: 'spikes'; share: number; size: number }
  /** Missing samples in runs of a few; `share` of a sensor's samples. All sensors. */
  | { kind: 'gaps'; share: number }

/** The telemetry link goes down for `downSeconds` once in each `everySeconds`, first `firstAfterSeconds` after the anchor. */
export interface LinkSchedule {
  everySeconds: number
  firstAfterSeconds: number
  downSeconds: number
}

export interface Scenario {
  name: string
  summary: string
  /** Hours since the anchor; negative before it. The same systems in the same order at all times. */
  systems(hours: number): OffshoreSystem[]
  faults?: Fault[]
  link?: LinkSchedule
}
