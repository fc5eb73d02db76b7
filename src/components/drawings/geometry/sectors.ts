/** Sectors of bearings, degrees true, clockwise from the first to the second. */
export type Sector = readonly [from: number, to: number]

/** How far it reaches, 0 (excluded) to 360. */
export const sectorSpan = ([from, to]: Sector): number => {
  const span = (((to - from) % 360) + 360) % 360
  return span === 0 ? 360 : span
}

/** Bearings from its first edge to its last, at most `step` degrees apart; those past north go on above 360. */
export function sectorBearings(sector: Sector, step = 5): number[] {
  const span = sectorSpan(sector)
  const count = Math.max(1, Math.ceil(span / step))
  return Array.from({ length: count + 1 }, (_, index) => sector[0] + (span * index) / count)
}

/** Does the bearing lie in it, edges included? */
export const isInSector = (bearing: number, sector: Sector): boolean =>
  (((bearing - sector[0]) % 360) + 360) % 360 <= sectorSpan(sector)
