/**
 * Thresholds of the QARTOD tests, per station (U.S. IOOS: Manual for Real-Time Quality Control of Water Level Data, version 2.1, 2021;
 * of In-Situ Surface Wave Data, version 2.1, 2019, whose numbers and names of tests are from memory). The defaults are the manuals'
 * examples where they give one, fitted to samples of several a second; an operator sets his own.
 */

export interface QualityLimits {
  /** What the instrument can measure, in its own unit (m above datum, or dbar): outside it a sample fails. Null: not given. */
  instrumentSpan: [number, number] | null
  /** Depths of still water that occur here, m; outside is of interest. Null: not given. */
  depthSpan: [number, number] | null
  /** Means of eight pieces of a window may differ by so much, straight line taken out, m or dbar. */
  segmentShift: number
  /** Acceleration of the surface, share of gravity. */
  acceleration: number
  /** A record that moves less has lost its signal: standard deviation that is suspect, and fails, m or dbar. */
  suspectDeviation: number
  failDeviation: number
  /** Share of usable samples below which a sensor is suspect; what fails is `leastCompleteness`. */
  suspectCompleteness: number
  /** One sensor's level against the middle of the others of its kind, m. */
  neighbourLevel: number
  /** One sensor's height in a band against the middle of all, share, beside what the sampling error allows. */
  neighbourHeight: number
  /** Bulk figures that can be: height as a share of the depth, periods in s, spread in degrees. */
  greatestHeightShare: number
  periodSpan: [number, number]
  spreadSpan: [number, number]
  /** Share of the energy below 0.05 Hz. */
  lowFrequencyShare: number
  /** What a tail above the cut-off may add to the height, share. */
  tailShare: number
  /** Change within half an hour: height by so many metres and a share of itself, peak period in s, heading in degrees. */
  heightChange: number
  heightChangeShare: number
  periodChange: number
  headingChange: number
  /** So many standard deviations off the mean of the last days. */
  recordDeviations: number
  /** So many windows in a row with the very same height are suspect, and fail. */
  suspectRepeats: number
  failRepeats: number
}

export const defaultQualityLimits: QualityLimits = {
  instrumentSpan: null,
  depthSpan: null,
  segmentShift: 0.3,
  acceleration: 0.5,
  suspectDeviation: 0.003,
  failDeviation: 0.0005,
  suspectCompleteness: 0.9,
  neighbourLevel: 0.2,
  neighbourHeight: 0.1,
  greatestHeightShare: 0.6,
  periodSpan: [1.5, 25],
  spreadSpan: [2, 75],
  lowFrequencyShare: 0.3,
  tailShare: 0.05,
  heightChange: 0.5,
  heightChangeShare: 0.2,
  periodChange: 5,
  headingChange: 60,
  recordDeviations: 4,
  suspectRepeats: 3,
  failRepeats: 5,
}
