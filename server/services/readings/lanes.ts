/**
 * Commits of one station come one after the other, so that their numbers rise in the order in which readers see them.
 * Group commits leave out a station while something else, such as an import, commits readings of it.
 */
export interface Committer {
  /** Resolves when no commit is under way. */
  idle(): Promise<unknown>
  /** A station is free again. */
  resume(): void
}

const held = new Map<number, Promise<void>>()
const committers = new Set<Committer>()

export const isHeld = (stationId: number): boolean => held.has(stationId)

/** Resolves when one of the held stations is free again; at once when none is held. */
export const nextRelease = (): Promise<void> =>
  Promise.race([...held.values(), ...(held.size ? [] : [Promise.resolve()])])

/** Answers the function that leaves again. */
export function joinLanes(committer: Committer): () => void {
  committers.add(committer)
  return () => void committers.delete(committer)
}

/** Runs `work` while nothing else commits readings of this station. */
export async function holdStation<Result>(stationId: number, work: () => Promise<Result>): Promise<Result> {
  while (held.has(stationId)) await held.get(stationId)
  let release = (): void => undefined
  held.set(stationId, new Promise((resolve) => (release = resolve)))
  try {
    await Promise.all([...committers].map((committer) => committer.idle()))
    return await work()
  } finally {
    held.delete(stationId)
    release()
    for (const committer of committers) committer.resume()
  }
}
