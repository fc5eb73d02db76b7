/**
 * Keeps the identity of wave systems from window to window, so that a swell is the same line on a chart for as long
 * as it lasts. Nearest peak frequency and heading within gates (0.01 Hz, 25 degrees), as partitions of spectra are
 * commonly tracked (Hanson and Phillips 2001, doi:10.1175/1520-0426(2001)018<0277:AAOOSD>2.0.CO;2).
 */
import { turnBetween } from '../directions.ts'
import type { WaveSystem } from '../schemas/estimate.ts'

/** What is remembered of a system: where it was when last seen. `at` in milliseconds since 1970 UTC. */
export interface Track {
  key: number
  peakPeriod: number
  toward: number
  at: number
  /** The name it goes by, and since when (ms) every window has said the other; null while they agree. */
  name: WaveSystem['name']
  contrarySince: number | null
}

export interface TrackedSystems {
  systems: WaveSystem[]
  tracks: Track[]
  /** The lowest key never given out yet. */
  nextKey: number
}

const frequencyGate = 0.01
const headingGate = 25
/** A track not seen for so long is another train of waves when it comes back, ms. */
const memory = 30 * 60_000

/**
 * The rule for the name has sampling error (a peak density of a 20-minute record scatters by 10 to 20 %), and windows a minute apart
 * share most of their readings: a name is changed only when windows over a whole window's length all say the other, ms.
 */
const sureAfter = 20 * 60_000

/** The name kept and the doubt about it, once a window has been looked at. */
function keepName(
  track: Track | undefined,
  said: WaveSystem['name'],
  at: number,
): Pick<Track, 'name' | 'contrarySince'> {
  if (!track || track.name === said) return { name: said, contrarySince: null }
  const since = track.contrarySince ?? at
  return Math.abs(at - since) >= sureAfter
    ? { name: said, contrarySince: null }
    : { name: track.name, contrarySince: since }
}

/** Squared distance in gates; null when outside. */
function distance(track: Track, system: WaveSystem): number | null {
  const inFrequency = Math.abs(1 / track.peakPeriod - 1 / system.peakPeriod) / frequencyGate
  const inHeading = Math.abs(turnBetween(track.toward, system.toward)) / headingGate
  return inFrequency > 1 || inHeading > 1 ? null : inFrequency ** 2 + inHeading ** 2
}

interface Pairing {
  track: Track
  index: number
  distance: number
}

/** All pairings within the gates, the nearest first; each track and each system is used once. */
function nearestPairs(tracks: Track[], systems: WaveSystem[]): Map<number, Track> {
  const candidates = tracks
    .flatMap((track) => systems.map((system, index) => ({ track, index, distance: distance(track, system) })))
    .filter((pairing): pairing is Pairing => pairing.distance !== null)
    .sort((a, b) => a.distance - b.distance)
  const taken = new Set<Track>()
  const chosen = new Map<number, Track>()
  for (const { track, index } of candidates) {
    if (taken.has(track) || chosen.has(index)) continue
    taken.add(track)
    chosen.set(index, track)
  }
  return chosen
}

/**
 * Keys the systems of the window that ends `at`, given the tracks of its neighbours (earlier ones, or later ones
 * when a past is computed backwards). Returns the same systems in the same order with their keys and kept names, the tracks to hand
 * to the next call, and the next free key.
 */
export function trackSystems(
  known: { tracks: Track[]; nextKey: number },
  systems: WaveSystem[],
  at: number,
): TrackedSystems {
  const within = known.tracks.filter((track) => Math.abs(track.at - at) <= memory)
  const pairs = nearestPairs(within, systems)
  let nextKey = known.nextKey
  const followed = systems.map((system, index): Track => {
    const track = pairs.get(index)
    const { peakPeriod, toward } = system
    return { key: track?.key ?? nextKey++, peakPeriod, toward, at, ...keepName(track, system.name, at) }
  })
  const named = systems.map((system, index) => ({ ...system, key: followed[index].key, name: followed[index].name }))
  const seen = new Set(followed.map((track) => track.key))
  const tracks = [...followed, ...within.filter((track) => !seen.has(track.key))]
  return { systems: named, tracks, nextKey }
}
