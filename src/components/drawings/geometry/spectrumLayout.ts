/** Axes of the spectrum: frequency from 0.03 Hz to where energy ends, density to a round number above its peak. */
/** A round number of 1, 1.5, 2, 3, 5 or 10 times a power of ten, not below `least`. */
export function roundAbove(least: number): number {
  if (!(least > 0)) return 1
  const power = 10 ** Math.floor(Math.log10(least))
  return [1, 1.5, 2, 3, 5, 10].map((step) => step * power).find((value) => value >= least) ?? 10 * power
}

/** Last frequency shown, Hz: the cut-off to the next 0.05, within 0.3 and 0.5. */
export const lastFrequency = (cutoff: number): number => Math.min(0.5, Math.max(0.3, Math.ceil(cutoff * 20) / 20))

export function frequencyTicks(last: number): number[] {
  const step = last > 0.4 ? 0.1 : 0.05
  const ticks: number[] = []
  for (let index = 1; index * step <= last + 1e-9; index++) ticks.push(Math.round(index * step * 100) / 100)
  return ticks
}

/** 0, half and whole of the density axis. */
export const densityTicks = (highest: number): number[] => [0, highest / 2, highest]

/** Fewest decimals, three at most, that write a tick exactly. */
export function tickPlaces(tick: number): number {
  const exact = (places: number): boolean => Math.abs(tick * 10 ** places - Math.round(tick * 10 ** places)) < 1e-9
  return [0, 1, 2].find(exact) ?? 3
}
