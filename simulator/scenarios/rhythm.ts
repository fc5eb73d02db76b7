/** Smooth functions of time that scenarios are built from. */

/** 0 to 1 and back once in each period, highest at `peakAt`. All in hours. */
export const swing = (hours: number, period: number, peakAt: number): number =>
  0.5 * (1 + Math.cos((2 * Math.PI * (hours - peakAt)) / period))

/** Sine that passes zero, rising, at the anchor. */
export const wander = (hours: number, periodHours: number): number => Math.sin((2 * Math.PI * hours) / periodHours)
