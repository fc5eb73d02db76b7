/**
 * Ends of the windows that a change of readings touches. Windows end at multiples of the hop since 1970 UTC and reach
 * back by their length; all times in milliseconds.
 */
export interface WindowGrid {
  windowMs: number
  hopMs: number
}

/**
 * A window ending at e holds the samples from e − windowMs up to and without e: it is touched by samples from `fromMs`
 * up to and without `toMs` when e > fromMs and e − windowMs < toMs. Ends after `newestEndMs` are left out.
 */
export function affectedWindowEnds(
  { windowMs, hopMs }: WindowGrid,
  fromMs: number,
  toMs: number,
  newestEndMs: number,
): number[] {
  const ends: number[] = []
  const last = Math.min(newestEndMs, Math.ceil((toMs + windowMs) / hopMs) * hopMs - hopMs)
  for (let end = (Math.floor(fromMs / hopMs) + 1) * hopMs; end <= last; end += hopMs) ends.push(end)
  return ends
}
